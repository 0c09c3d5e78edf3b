import { planeAngleDifferenceDeg, planeAngleDistanceDeg } from '../../../src/angle.ts';
import type { PhotoMeasurement } from '../../../src/records/reading.ts';
import { measuredMode, type PureTorsionMode, rightModes, trueSegments } from './pureTorsionMode.ts';
import type { PhotoWithTruth } from './truth.ts';

/** One photo, measured and compared with its truth. Members are null where the question does not arise. */
export interface PhotoScore {
  readonly file: string;
  readonly kind: string;
  readonly view: string;
  readonly material: string;
  readonly background: string;
  readonly light: string;
  readonly section: string;
  readonly trueDeg: number | null;
  readonly trueTiltDeg: number | null;
  readonly diameterPx: number | null;
  readonly outcome: 'measured' | 'not-measured';
  readonly reason: string | null;
  readonly planeAngleDeg: number | null;
  readonly planeTiltDeg: number | null;
  readonly shape: string | null;
  readonly expandedUncertaintyDeg: number | null;
  /** Signed axial error, measured − true, degrees. */
  readonly errorDeg: number | null;
  readonly tiltErrorDeg: number | null;
  /** Mixed breaks: every true segment of at least 15 % has a measured one within 6°. */
  readonly segmentsFound: boolean | null;
  readonly wrongHand: boolean;
  readonly mode: PureTorsionMode | null;
  readonly rightMode: boolean | null;
  readonly covered: boolean | null;
  readonly falseAlarm: boolean;
  readonly elapsedMs: number;
  readonly warnings: readonly string[];
}

const SEGMENT_TOLERANCE_DEG = 6;
const SMALLEST_SEGMENT = 0.15;

/** Compares a measurement with the truth of its photo. */
export function scorePhoto({ file, truth }: PhotoWithTruth, result: PhotoMeasurement): PhotoScore {
  const measured = result.outcome === 'measured' ? result : null;
  const isBreak = truth.kind !== 'none';
  const trueDeg = truth.kind === 'mixed' ? null : truth.visibleFrontThetaDeg;
  const errorDeg = measured && trueDeg !== null ? planeAngleDifferenceDeg(measured.planeAngleDeg, trueDeg) : null;
  const tilt = truth.kind === 'oblique-plane' ? (truth.betaDeg ?? null) : null;
  const handMatters = trueDeg !== null && Math.abs(trueDeg) >= 15 && Math.abs(trueDeg) <= 75;
  const mode = measured ? measuredMode(measured) : null;
  const wanted = trueSegments(truth).filter((s) => s.closingStep !== true && s.share >= SMALLEST_SEGMENT);
  return {
    file,
    kind: truth.kind,
    view: truth.view ?? '-',
    material: truth.material ?? '-',
    background: truth.background ?? '-',
    light: truth.light ?? '-',
    section: truth.hollow === true ? 'tube' : 'solid',
    trueDeg,
    trueTiltDeg: tilt,
    diameterPx: truth.diameterPx ?? null,
    outcome: result.outcome,
    reason: result.outcome === 'not-measured' ? result.reason.code : null,
    planeAngleDeg: measured?.planeAngleDeg ?? null,
    planeTiltDeg: measured?.planeTiltDeg ?? null,
    shape: measured?.shape ?? null,
    expandedUncertaintyDeg: measured?.expandedUncertaintyDeg ?? null,
    errorDeg,
    tiltErrorDeg: measured && tilt !== null && measured.planeTiltDeg !== null ? measured.planeTiltDeg - tilt : null,
    segmentsFound:
      measured && truth.kind === 'mixed'
        ? wanted.every((s) =>
            measured.segments.some(
              (m) => planeAngleDistanceDeg(m.planeAngleDeg, s.planeAngleDeg) <= SEGMENT_TOLERANCE_DEG,
            ),
          )
        : null,
    wrongHand: measured !== null && handMatters && measured.planeAngleDeg * trueDeg < 0,
    mode,
    rightMode: mode !== null && isBreak ? rightModes(truth).has(mode) : null,
    covered: measured && errorDeg !== null ? Math.abs(errorDeg) <= measured.expandedUncertaintyDeg : null,
    falseAlarm: measured !== null && !isBreak,
    elapsedMs: result.elapsedMs,
    warnings: result.warnings.map((warning) => warning.code),
  };
}
