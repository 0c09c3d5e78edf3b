import type { PredictedPlane, PredictedPlaneName } from '../mechanics/stressState.ts';
import { wrappedNormalMass } from './angleDistribution.ts';
import type { CellProbability } from './model.ts';

/** Two folded planes closer than this coincide, as ±45° do for a flat break in pure torsion. */
const COINCIDENT_DEG = 1e-9;

export interface Cell {
  readonly plane: PredictedPlaneName;
  readonly planeAngleDeg: number;
  readonly fromDeg: number;
  readonly toDeg: number;
}

/**
 * The circle of plane angles divided into cells, each holding the angles nearest to one predicted plane:
 * the limits lie halfway between neighbouring planes (±22.5° and ±67.5° in pure torsion).
 * A cell that crosses the wrap runs beyond 90°.
 */
export function planeAngleCells(planes: readonly PredictedPlane[]): Cell[] {
  const sorted = [...planes].sort((a, b) => a.planeAngleDeg - b.planeAngleDeg);
  return planes.map(({ plane, planeAngleDeg }) => {
    const index = sorted.findIndex((p) => p.plane === plane);
    const before = sorted[index - 1]?.planeAngleDeg ?? (sorted.at(-1)?.planeAngleDeg ?? planeAngleDeg) - 180;
    const after = sorted[index + 1]?.planeAngleDeg ?? (sorted[0]?.planeAngleDeg ?? planeAngleDeg) + 180;
    const fromDeg = (before + planeAngleDeg) / 2;
    const shift = fromDeg < -90 ? 180 : 0;
    return { plane, planeAngleDeg, fromDeg: fromDeg + shift, toDeg: (planeAngleDeg + after) / 2 + shift };
  });
}

/**
 * Cells for the tilt β of a flat break. β runs from 0 to 90° and has no sign: a flat cut crosses the
 * surface at +β on one side of the bar and at −β on the other, so it is compared with the magnitudes
 * |θ| of the predicted planes. Limits lie halfway between neighbouring magnitudes. Planes of equal
 * magnitude (tension and compression in pure torsion) share one cell: a flat break cannot tell them apart.
 */
export function planeTiltCells(planes: readonly PredictedPlane[]): Cell[] {
  const magnitudes: number[] = [];
  for (const magnitude of planes.map((p) => Math.abs(p.planeAngleDeg)).sort((a, b) => a - b)) {
    const last = magnitudes.at(-1);
    if (last === undefined || magnitude - last > COINCIDENT_DEG) magnitudes.push(magnitude);
  }
  return planes.map(({ plane, planeAngleDeg }) => {
    const index = magnitudes.findLastIndex((m) => m <= Math.abs(planeAngleDeg));
    const own = magnitudes[index] ?? 0;
    const below = magnitudes[index - 1];
    const above = magnitudes[index + 1];
    return {
      plane,
      planeAngleDeg,
      fromDeg: below === undefined ? 0 : (below + own) / 2,
      toDeg: above === undefined ? 90 : (own + above) / 2,
    };
  });
}

/** Probability of each cell of the plane angle: the mass of the reading's wrapped normal distribution in it. */
export function planeAngleProbabilities(
  planes: readonly PredictedPlane[],
  planeAngleDeg: number,
  standardUncertaintyDeg: number,
): CellProbability[] {
  return planeAngleCells(planes).map((cell) => ({
    ...cell,
    probability: wrappedNormalMass(cell.fromDeg, cell.toDeg, planeAngleDeg, standardUncertaintyDeg),
  }));
}

/**
 * Probability of each cell of the tilt: the distribution of β is folded at 0 and at 90°, since a tilt
 * read as −2° is a tilt of 2°. Coinciding cells share their mass equally.
 */
export function planeTiltProbabilities(
  planes: readonly PredictedPlane[],
  tiltDeg: number,
  standardUncertaintyDeg: number,
): CellProbability[] {
  const cells = planeTiltCells(planes);
  return cells.map((cell) => {
    const sharing = cells.filter((other) => other.fromDeg === cell.fromDeg && other.toDeg === cell.toDeg).length;
    const mass =
      wrappedNormalMass(cell.fromDeg, cell.toDeg, tiltDeg, standardUncertaintyDeg) +
      wrappedNormalMass(-cell.toDeg, -cell.fromDeg, tiltDeg, standardUncertaintyDeg);
    return { ...cell, probability: mass / sharing };
  });
}
