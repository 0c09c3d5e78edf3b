import type { TraceSegment } from '../../../src/records/reading.ts';
import type { PhotoTruth } from './truth.ts';

/** What an angle says when the specimen was loaded by torque alone (design, section 4: limits at 22.5 and 67.5). */
export type PureTorsionMode = 'shear-transverse' | 'normal-stress' | 'shear-longitudinal' | 'mixed';

interface Segment {
  readonly planeAngleDeg: number;
  readonly share: number;
  readonly closingStep?: boolean | undefined;
}

/** Cell of a plane angle or tilt, degrees. */
export function modeOfAngle(angleDeg: number): Exclude<PureTorsionMode, 'mixed'> {
  const steepness = Math.abs(angleDeg);
  return steepness < 22.5 ? 'shear-transverse' : steepness <= 67.5 ? 'normal-stress' : 'shear-longitudinal';
}

/** `mixed` when two modes each hold at least `minimumShare` of the length left after closing steps are set aside. */
export function modeOfSegments(segments: readonly Segment[], minimumShare: number): PureTorsionMode {
  const kept = segments.filter((segment) => segment.closingStep !== true);
  const total = kept.reduce((sum, segment) => sum + segment.share, 0);
  const shares = new Map<Exclude<PureTorsionMode, 'mixed'>, number>();
  for (const { planeAngleDeg, share } of kept) {
    const mode = modeOfAngle(planeAngleDeg);
    shares.set(mode, (shares.get(mode) ?? 0) + share / total);
  }
  const ranked = [...shares].sort((a, b) => b[1] - a[1]);
  const second = ranked[1];
  return second !== undefined && second[1] >= minimumShare ? 'mixed' : (ranked[0]?.[0] ?? 'mixed');
}

/** True segments with the closing steps marked: a steep stretch between two helical ones of the same hand. */
export function trueSegments(truth: PhotoTruth): Segment[] {
  const segments = truth.segments ?? [];
  return segments.map((segment, i) => {
    const before = segments[i - 1]?.thetaDeg ?? 0;
    const after = segments[i + 1]?.thetaDeg ?? 0;
    const between =
      modeOfAngle(before) === 'normal-stress' && modeOfAngle(after) === 'normal-stress' && before * after > 0;
    const closingStep = segment.closingStep ?? (modeOfAngle(segment.thetaDeg) === 'shear-longitudinal' && between);
    return { planeAngleDeg: segment.thetaDeg, share: segment.share, closingStep };
  });
}

/**
 * Modes that count as right for a photo. More than one only for a mixed break whose smaller segment lies so
 * near the limit of 25 % (20 to 30 %) that the visible share decides.
 */
export function rightModes(truth: PhotoTruth): ReadonlySet<PureTorsionMode> {
  if (truth.kind === 'mixed') {
    const segments = trueSegments(truth);
    return new Set([0.2, 0.25, 0.3].map((minimumShare) => modeOfSegments(segments, minimumShare)));
  }
  if (truth.kind === 'oblique-plane' && truth.betaDeg != null) return new Set([modeOfAngle(truth.betaDeg)]);
  if (truth.kind === 'longitudinal') return new Set(['shear-longitudinal']);
  return new Set(truth.visibleFrontThetaDeg === null ? [] : [modeOfAngle(truth.visibleFrontThetaDeg)]);
}

/** What a measurement says: tilt for a flat break, segments for a mixed one, otherwise the plane angle. */
export function measuredMode(measured: {
  readonly shape: string;
  readonly planeAngleDeg: number;
  readonly planeTiltDeg: number | null;
  readonly segments: readonly TraceSegment[];
}): PureTorsionMode {
  if (measured.shape === 'mixed') return modeOfSegments(measured.segments, 0.25);
  if (measured.shape === 'plane' && measured.planeTiltDeg !== null) return modeOfAngle(measured.planeTiltDeg);
  return modeOfAngle(measured.planeAngleDeg);
}
