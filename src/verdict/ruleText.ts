import type { CellProbability, DecisionRule } from './model.ts';
import { degreesText, percentText } from './wording.ts';

/** The decision rule in words, printed on every result. */
export function ruleTextOf(
  rule: DecisionRule,
  cells: readonly CellProbability[],
  quantity: 'planeAngle' | 'planeTilt',
): string {
  const compared =
    quantity === 'planeTilt'
      ? 'the tilt of the flat break, compared with the magnitudes of the predicted planes'
      : 'the plane angle';
  return (
    `A mode is stated when its probability is at least ${percentText(rule.minimumProbability)}, otherwise the result is ` +
    `indeterminate. The probability is the share of the reading's distribution (normal, u = U/k) of ${compared} that lies ` +
    `nearest to the planes of the mode; the limits are ${limitsText(cells, quantity)}. Mixed is stated when two segments of different ` +
    `modes each have at least ${percentText(rule.minimumSegmentShare)} of the trace, closing steps set aside.`
  );
}

function limitsText(cells: readonly CellProbability[], quantity: 'planeAngle' | 'planeTilt'): string {
  const limits = new Set<number>();
  for (const { fromDeg, toDeg } of cells) {
    limits.add(fromDeg > 90 ? fromDeg - 180 : fromDeg);
    limits.add(toDeg > 90 ? toDeg - 180 : toDeg);
  }
  // The ends of the range of a tilt are no limits between cells.
  const between = [...limits].filter((limit) => quantity === 'planeAngle' || (limit > 0 && limit < 90));
  return between
    .sort((a, b) => a - b)
    .map(degreesText)
    .join(', ');
}
