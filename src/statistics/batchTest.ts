/** What the statistics of a batch look at in one test. */
export interface BatchTest {
  readonly id: string;
  readonly specimenId: string;
  /** YYYY-MM-DD. */
  readonly testDate: string | null;
  readonly material: string | null;
  readonly heat: string | null;
  readonly section: string;
  readonly operator: string | null;
  /** As seen facing the driven end. */
  readonly torqueDirection: 'ccw' | 'cw' | null;
  /** Failure mode by the rule; null when there is no reading. */
  readonly mode: string | null;
  /** Plane angle of a helix or a longitudinal split, degrees; null for a flat break (see `planeTiltDeg`) or no reading. */
  readonly planeAngleDeg: number | null;
  /** Tilt of a flat break, 0 to 90 degrees; it has no hand. */
  readonly planeTiltDeg: number | null;
  /** Elastic torsional strength T·r/J, MPa; null when no torque is known. */
  readonly strengthMPa: number | null;
  /** Why strength and angle of the test say nothing about the material; null for a sound test. */
  readonly leftOut: string | null;
}

/** What tests may be grouped by. */
export const GROUPINGS = ['material', 'heat', 'section', 'operator'] as const;
export type Grouping = (typeof GROUPINGS)[number];

/**
 * Plane angle as it would be under counter-clockwise torque, degrees: a break turned by the opposite torque has the
 * opposite hand, and ±45 must not average to nothing. Null without an angle or without a direction.
 */
export function planeAngleToTorqueDeg(test: BatchTest): number | null {
  if (test.planeAngleDeg === null || test.torqueDirection === null) return null;
  return test.torqueDirection === 'cw' ? -test.planeAngleDeg : test.planeAngleDeg;
}
