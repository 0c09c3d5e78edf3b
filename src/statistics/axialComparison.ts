import { radToDeg, wrapPlaneAngleDeg } from '../angle.ts';
import { LabError } from '../errors.ts';
import { axialResultant } from './axial.ts';
import { fisherFTail } from './distributions.ts';
import { vonMisesKappa } from './vonMises.ts';

/** Whether samples of plane angles have the same mean axis. */
export interface AxialComparison {
  readonly meanAxesDeg: readonly number[];
  readonly fStatistic: number;
  readonly degreesOfFreedom: readonly [number, number];
  /** How easily samples with one common mean axis would differ as much. */
  readonly p: number;
  /** κ of the doubled angles about their own means. */
  readonly concentration: number;
  /** False when the angles scatter so much (κ < 2) that F is not to be trusted. */
  readonly trustworthy: boolean;
}

/** Below it the F of the test is not to be trusted. Zar 27.4 (common practice). */
const LEAST_CONCENTRATION = 2;

/**
 * Watson–Williams test of one common mean axis, on doubled angles: F = K (N − q)(ΣRⱼ − R)/((q − 1)(N − ΣRⱼ)),
 * K = 1 + 3/(8κ), κ from A(κ) = ΣRⱼ/N (R are resultant lengths, not means).
 * @param samples two or more samples of plane angles, degrees; N > q
 * @throws LabError `missing-value` for too few samples or angles
 * @see Zar, Biostatistical Analysis (5th ed.) 27.4; Mardia & Jupp, Directional Statistics (2000), 7.4.1
 */
export function compareMeanAxes(samples: readonly (readonly number[])[]): AxialComparison {
  const q = samples.length;
  const resultants = samples.map(axialResultant);
  const total = resultants.reduce((sum, r) => sum + r.n, 0);
  if (q < 2 || total <= q) {
    throw new LabError(
      'missing-value',
      `a comparison must have two samples and more angles than samples, got ${q} with ${total} angles`,
      { input: 'samples' },
    );
  }
  const within = resultants.reduce((sum, r) => sum + r.n * r.length, 0);
  const all = axialResultant(samples.flat());
  const concentration = vonMisesKappa(within / total);
  const factor = 1 + 3 / (8 * concentration);
  const between = Math.max(0, within - all.n * all.length);
  const scatter = total - within;
  const fStatistic = between < 1e-12 * total ? 0 : (factor * (total - q) * between) / ((q - 1) * scatter);
  return {
    meanAxesDeg: resultants.map((r) => wrapPlaneAngleDeg(radToDeg(r.direction) / 2)),
    fStatistic,
    degreesOfFreedom: [q - 1, total - q],
    p: fisherFTail(fStatistic, q - 1, total - q),
    concentration,
    trustworthy: concentration >= LEAST_CONCENTRATION,
  };
}
