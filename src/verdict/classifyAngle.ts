import { handOfPlaneAngle, wrapPlaneAngleDeg } from '../angle.ts';
import { LabError } from '../errors.ts';
import type { TestLoads } from '../mechanics/surfaceStress.ts';
import type { FractureShape, PlaneReading, TraceSegment } from '../records/reading.ts';
import { assessReading } from './assessReading.ts';
import type { Reason } from './failureMode.ts';
import type { Assessment, DecisionRule } from './model.ts';

/** Loads and one angle, as given to `breakplane classify` and `POST /api/v1/classify`. */
export interface AngleToClassify extends TestLoads {
  /** Degrees; any value, wrapped into (−90, 90]. */
  readonly planeAngleDeg: number;
  /** U, degrees, ≥ 0. */
  readonly expandedUncertaintyDeg: number;
  /** k of U = k u; default 2. */
  readonly coverageFactor?: number;
  /** Default `helix`. For `plane` give the tilt too. */
  readonly shape?: FractureShape;
  readonly planeTiltDeg?: number | null;
  readonly segments?: readonly TraceSegment[];
}

export interface ClassifyOptions {
  readonly rule?: Partial<DecisionRule>;
  readonly notAttributable?: Reason | null;
}

/** Stress, planes, failure mode and evidence for one angle. Pure. @throws LabError naming the input that cannot be */
export function classifyAngle(angle: AngleToClassify, options: ClassifyOptions = {}): Assessment {
  return assessReading(angle, readingOf(angle), options);
}

function readingOf(angle: AngleToClassify): PlaneReading {
  if (!Number.isFinite(angle.planeAngleDeg)) {
    throw new LabError('not-a-number', `planeAngleDeg must be a number of degrees, got ${angle.planeAngleDeg}`, {
      input: 'planeAngleDeg',
      value: angle.planeAngleDeg,
    });
  }
  const planeAngleDeg = wrapPlaneAngleDeg(angle.planeAngleDeg);
  const shape = angle.shape ?? 'helix';
  return {
    planeAngleDeg,
    expandedUncertaintyDeg: angle.expandedUncertaintyDeg,
    coverageFactor: angle.coverageFactor ?? 2,
    hand: shape === 'plane' ? 'none' : handOfPlaneAngle(planeAngleDeg),
    shape,
    planeTiltDeg: angle.planeTiltDeg ?? null,
    segments: angle.segments ? [...angle.segments] : [{ planeAngleDeg, share: 1 }],
  };
}
