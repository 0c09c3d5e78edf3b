import { requireNumbers, sampleMoments } from './sample.ts';

/** Mean of the range of two values from a normal distribution, in standard deviations: 2/√π. ISO 7870-2, table of d₂, n = 2. */
const D2_OF_TWO = 2 / Math.sqrt(Math.PI);

/** A chart of individual values in the order of testing. */
export interface ControlChart {
  readonly centre: number;
  readonly lowerLimit: number;
  readonly upperLimit: number;
  readonly meanMovingRange: number;
  /** Places of values outside the limits, from 0. */
  readonly outside: readonly number[];
}

/**
 * Shewhart chart of individuals: mean ± 3 R̄/d₂, R̄ the mean of the ranges of neighbours.
 * @param values in the order of testing; at least two, else null
 * @throws LabError `not-a-number`
 * @see ISO 7870-2; NIST/SEMATECH e-Handbook 6.3.2.2
 */
export function controlChartOfIndividuals(values: readonly number[]): ControlChart | null {
  requireNumbers('values', values);
  if (values.length < 2) return null;
  const centre = sampleMoments(values).mean;
  const ranges = values.slice(1).map((value, i) => Math.abs(value - (values[i] ?? value)));
  const meanMovingRange = sampleMoments(ranges).mean;
  const reach = (3 * meanMovingRange) / D2_OF_TWO;
  const lowerLimit = centre - reach;
  const upperLimit = centre + reach;
  const outside = values.flatMap((value, i) => (value < lowerLimit || value > upperLimit ? [i] : []));
  return { centre, lowerLimit, upperLimit, meanMovingRange, outside };
}
