import { handOfPlaneAngle } from '../angle.ts';
import type { BudgetLine, PlaneReading } from '../records/reading.ts';
import type { TraceMeasurement } from './budget.ts';

/** Coverage factor of every expanded uncertainty stated here (GUM 6.3.3: about 95 %). */
export const COVERAGE_FACTOR = 2;

/** A fitted trace with its budget, as a reading states it: expanded uncertainties, hand, segments. */
export function planeReadingOf(measured: TraceMeasurement): Omit<PlaneReading, 'view'> & { budget: BudgetLine[] } {
  const { fit, budget, combinedStandardUncertaintyDeg } = measured;
  const expanded = (standard: number) => COVERAGE_FACTOR * standard;
  return {
    planeAngleDeg: fit.planeAngleDeg,
    expandedUncertaintyDeg: expanded(combinedStandardUncertaintyDeg),
    coverageFactor: COVERAGE_FACTOR,
    hand: handOfPlaneAngle(fit.planeAngleDeg),
    shape: fit.shape,
    planeTiltDeg: fit.planeTiltDeg,
    planeTiltExpandedUncertaintyDeg:
      fit.planeTiltStandardUncertaintyDeg === null ? null : expanded(fit.planeTiltStandardUncertaintyDeg),
    segments: fit.segments.map((s) => ({
      planeAngleDeg: s.planeAngleDeg,
      share: s.share,
      expandedUncertaintyDeg: expanded(s.standardUncertaintyDeg),
      ...(s.closingStep ? { closingStep: true } : {}),
    })),
    budget: [...budget],
  };
}
