import { LabError } from '../errors.ts';

/** Number, mean and standard deviation of a sample, in the unit of its values. */
export interface SampleMoments {
  readonly n: number;
  readonly mean: number;
  /** Sample standard deviation (divisor n − 1); null for one value. */
  readonly standardDeviation: number | null;
}

/** Refuses values that are no numbers, naming the first of them. @throws LabError `not-a-number` */
export function requireNumbers(input: string, values: readonly number[]): void {
  const at = values.findIndex((value) => !Number.isFinite(value));
  if (at === -1) return;
  throw new LabError('not-a-number', `${input} must be finite numbers, got ${values[at]} as value ${at + 1}`, {
    input,
    value: values[at],
  });
}

/**
 * Mean and standard deviation in two passes, so that values that differ only in their last digits keep them.
 * @throws LabError `missing-value` for no values, `not-a-number`
 * @see NIST StRD univariate sets NumAcc1 to NumAcc4, in the tests
 */
export function sampleMoments(values: readonly number[], input = 'values'): SampleMoments {
  if (values.length === 0)
    throw new LabError('missing-value', `${input} must hold at least one value, got none`, { input });
  requireNumbers(input, values);
  const n = values.length;
  const rough = values.reduce((sum, value) => sum + value, 0) / n;
  const mean = rough + values.reduce((sum, value) => sum + (value - rough), 0) / n;
  if (n === 1) return { n, mean, standardDeviation: null };
  const squares = values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  const drift = values.reduce((sum, value) => sum + (value - mean), 0);
  return { n, mean, standardDeviation: Math.sqrt((squares - drift ** 2 / n) / (n - 1)) };
}
