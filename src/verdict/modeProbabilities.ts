import type { PredictedPlaneName } from '../mechanics/stressState.ts';
import type { CellProbability, FailureModeStatement } from './model.ts';

/** Modes that a plane speaks for. */
export type PlaneMode = FailureModeStatement['likeliestMode'];
export type ModeProbabilities = FailureModeStatement['modeProbabilities'];

export const modeOfPlane = (plane: PredictedPlaneName): PlaneMode =>
  plane === 'shear-transverse' || plane === 'shear-longitudinal' ? plane : 'normal-stress';

/** Probability of each mode: the sum over its cells. Tension and compression plane both count as normal-stress. */
export function modeProbabilitiesOf(cells: readonly CellProbability[]): ModeProbabilities {
  const sum = { 'shear-transverse': 0, 'shear-longitudinal': 0, 'normal-stress': 0 };
  for (const cell of cells) sum[modeOfPlane(cell.plane)] += cell.probability;
  return {
    'shear-transverse': Math.min(1, sum['shear-transverse']),
    'shear-longitudinal': Math.min(1, sum['shear-longitudinal']),
    'normal-stress': Math.min(1, sum['normal-stress']),
  };
}

/** The mode of the largest probability; normal-stress when equal. */
export function likeliestOf(probabilities: ModeProbabilities): PlaneMode {
  let best: PlaneMode = 'normal-stress';
  if (probabilities['shear-transverse'] > probabilities[best]) best = 'shear-transverse';
  if (probabilities['shear-longitudinal'] > probabilities[best]) best = 'shear-longitudinal';
  return best;
}
