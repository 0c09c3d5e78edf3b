import { planeAngleDistanceDeg, wrapPlaneAngleDeg } from '../angle.ts';
import { LabError } from '../errors.ts';
import type { PredictedPlane, PredictedPlaneName } from '../mechanics/stressState.ts';
import type { PlaneReading } from '../records/reading.ts';
import { planeAngleProbabilities, planeTiltProbabilities } from './cells.ts';
import type { CellProbability, DecisionRule, FailureModeStatement } from './model.ts';
import { likeliestOf, modeProbabilitiesOf } from './modeProbabilities.ts';
import { ruleTextOf } from './ruleText.ts';
import { mixedPair, type SegmentMode, segmentModes } from './segments.ts';
import { degreesText, PLANE_TITLES, percentText } from './wording.ts';

/** What of a reading is compared with the planes: θ, or the tilt β of a flat break. */
export interface Compared {
  readonly quantity: 'planeAngle' | 'planeTilt';
  readonly valueDeg: number;
  readonly expandedUncertaintyDeg: number;
  readonly standardUncertaintyDeg: number;
}

export interface Reason {
  readonly code: string;
  readonly message: string;
}

/**
 * What is compared: the tilt for a flat break whose tilt is known, else the plane angle.
 * @throws LabError `out-of-range` for an angle or uncertainty that is no number
 */
export function comparedOf(reading: PlaneReading): Compared {
  const byTilt = reading.shape === 'plane' && reading.planeTiltDeg !== null;
  const valueDeg = byTilt ? (reading.planeTiltDeg ?? 0) : wrapPlaneAngleDeg(reading.planeAngleDeg);
  const expandedUncertaintyDeg = byTilt
    ? (reading.planeTiltExpandedUncertaintyDeg ?? reading.expandedUncertaintyDeg)
    : reading.expandedUncertaintyDeg;
  requireDegrees('planeAngleDeg', valueDeg, Number.isFinite(valueDeg), 'must be a number of degrees');
  const { coverageFactor } = reading;
  const usable = expandedUncertaintyDeg >= 0 && Number.isFinite(expandedUncertaintyDeg);
  requireDegrees('expandedUncertaintyDeg', expandedUncertaintyDeg, usable, 'must be a number ≥ 0 of degrees');
  requireDegrees(
    'coverageFactor',
    coverageFactor,
    coverageFactor > 0 && Number.isFinite(coverageFactor),
    'must be > 0',
  );
  return {
    quantity: byTilt ? 'planeTilt' : 'planeAngle',
    valueDeg,
    expandedUncertaintyDeg,
    standardUncertaintyDeg: expandedUncertaintyDeg / reading.coverageFactor,
  };
}

function requireDegrees(input: string, value: number, holds: boolean, expected: string): void {
  if (!holds) throw new LabError('out-of-range', `${input} ${expected}, got ${value}`, { input, value });
}

function nearestPlaneOf(planes: readonly PredictedPlane[], compared: Compared): FailureModeStatement['nearestPlane'] {
  let nearest = { plane: 'tension' as PredictedPlaneName, planeAngleDeg: 0, distanceDeg: Number.POSITIVE_INFINITY };
  for (const { plane, planeAngleDeg } of planes) {
    const distanceDeg =
      compared.quantity === 'planeTilt'
        ? Math.abs(compared.valueDeg - Math.abs(planeAngleDeg))
        : planeAngleDistanceDeg(compared.valueDeg, planeAngleDeg);
    if (distanceDeg < nearest.distanceDeg) nearest = { plane, planeAngleDeg, distanceDeg };
  }
  return nearest;
}

/**
 * States the failure mode of one reading against the predicted planes, by the declared rule.
 * @param planes the predicted planes, not empty
 * @param notAttributable why the geometry forbids a statement, where it does
 */
export function stateFailureMode(
  planes: readonly PredictedPlane[],
  reading: PlaneReading,
  rule: DecisionRule,
  notAttributable: Reason | null = null,
): Omit<FailureModeStatement, 'evidence'> {
  const compared = comparedOf(reading);
  const probabilitiesOf = compared.quantity === 'planeTilt' ? planeTiltProbabilities : planeAngleProbabilities;
  const cells = probabilitiesOf(planes, compared.valueDeg, compared.standardUncertaintyDeg);
  const modeProbabilities = modeProbabilitiesOf(cells);
  const likeliestMode = likeliestOf(modeProbabilities);
  const shared = {
    likeliestMode,
    modeProbabilities,
    cells,
    comparedQuantity: compared.quantity,
    comparedDeg: compared.valueDeg,
    comparedExpandedUncertaintyDeg: compared.expandedUncertaintyDeg,
    nearestPlane: nearestPlaneOf(planes, compared),
    rule,
    ruleText: ruleTextOf(rule, cells, compared.quantity),
  };
  const probability = modeProbabilities[likeliestMode];
  if (notAttributable) return { ...shared, mode: 'not-attributable', probability, reason: notAttributable };
  const pair = mixedPair(segmentModes(planes, reading, rule), rule);
  if (pair) {
    return {
      ...shared,
      mode: 'mixed',
      probability: pair[0].probability * pair[1].probability,
      reason: mixedReason(pair),
    };
  }
  if (probability >= rule.minimumProbability) return { ...shared, mode: likeliestMode, probability, reason: null };
  return { ...shared, mode: 'indeterminate', probability, reason: indeterminateReason(shared, compared) };
}

function mixedReason([first, second]: readonly [SegmentMode, SegmentMode]): Reason {
  const part = (s: SegmentMode) =>
    `${percentText(s.share)} of the trace at ${degreesText(s.planeAngleDeg)} (${s.mode})`;
  return {
    code: 'two-modes',
    message: `The trace has two parts of different modes: ${part(first)} and ${part(second)}.`,
  };
}

function indeterminateReason(
  { cells, rule }: { readonly cells: readonly CellProbability[]; readonly rule: DecisionRule },
  compared: Compared,
): Reason {
  const [first, second] = [...cells].sort((a, b) => b.probability - a.probability);
  const part = (cell: CellProbability | undefined) =>
    cell
      ? `${percentText(cell.probability)} nearest to the ${PLANE_TITLES[cell.plane]} (${degreesText(cell.planeAngleDeg)})`
      : '';
  return {
    code: 'below-minimum-probability',
    message:
      `No mode reaches ${percentText(rule.minimumProbability)}: a reading of ${degreesText(compared.valueDeg)} ± ` +
      `${degreesText(compared.expandedUncertaintyDeg)} lies ${part(first)} and ${part(second)}. ` +
      'A second photo, or a reading with a smaller uncertainty, may decide.',
  };
}
