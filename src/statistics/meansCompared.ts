import { LabError } from '../errors.ts';
import { fisherFTail, studentTQuantile, studentTTwoSided } from './distributions.ts';
import { type SampleMoments, sampleMoments } from './sample.ts';
import type { Interval } from './strength.ts';

/** Whether two samples have the same mean, without taking their scatter as the same. */
export interface MeanDifference {
  /** Mean of the first minus mean of the second, in the unit of the values. */
  readonly difference: number;
  readonly confidence: Interval;
  readonly t: number;
  readonly degreesOfFreedom: number;
  readonly p: number;
}

function withSpread(values: readonly number[], input: string): SampleMoments & { readonly standardDeviation: number } {
  const moments = sampleMoments(values, input);
  const { standardDeviation } = moments;
  if (standardDeviation === null) {
    throw new LabError('missing-value', `${input} must hold at least two values to be compared, got one`, { input });
  }
  return { ...moments, standardDeviation };
}

/**
 * Welch's t test.
 * @throws LabError `missing-value` for a sample of fewer than two values
 * @see Welch, Biometrika 34 (1947) 28; degrees of freedom by Satterthwaite (GUM G.4)
 */
export function compareTwoMeans(
  first: readonly number[],
  second: readonly number[],
  confidenceLevel = 0.95,
): MeanDifference {
  const a = withSpread(first, 'first sample');
  const b = withSpread(second, 'second sample');
  const va = a.standardDeviation ** 2 / a.n;
  const vb = b.standardDeviation ** 2 / b.n;
  const difference = a.mean - b.mean;
  const error = Math.sqrt(va + vb);
  if (error === 0) {
    const same = difference === 0;
    return {
      difference,
      confidence: { from: difference, to: difference },
      t: same ? 0 : Math.sign(difference) * Number.POSITIVE_INFINITY,
      degreesOfFreedom: a.n + b.n - 2,
      p: same ? 1 : 0,
    };
  }
  const degreesOfFreedom = (va + vb) ** 2 / (va ** 2 / (a.n - 1) + vb ** 2 / (b.n - 1));
  const half = studentTQuantile(1 - (1 - confidenceLevel) / 2, degreesOfFreedom) * error;
  const t = difference / error;
  return {
    difference,
    confidence: { from: difference - half, to: difference + half },
    t,
    degreesOfFreedom,
    p: studentTTwoSided(t, degreesOfFreedom),
  };
}

/** One-way analysis of variance. */
export interface VarianceAnalysis {
  readonly fStatistic: number;
  readonly degreesOfFreedom: readonly [number, number];
  readonly p: number;
  /** Standard deviation within the groups. */
  readonly withinStandardDeviation: number;
  /** Share of the variance that the groups explain, 0 to 1. */
  readonly rSquared: number;
}

/**
 * One-way analysis of variance of groups: are all means the same?
 * @throws LabError `missing-value` for fewer than two groups, or no more values than groups
 * @see NIST StRD, analysis of variance; certified sets in the tests
 */
export function analyseVariance(groups: readonly (readonly number[])[]): VarianceAnalysis {
  const moments = groups.map((values) => sampleMoments(values, 'group'));
  const n = moments.reduce((sum, m) => sum + m.n, 0);
  if (groups.length < 2 || n <= groups.length) {
    throw new LabError(
      'missing-value',
      `an analysis of variance must have two groups and more values than groups, got ${groups.length} with ${n} values`,
      { input: 'groups' },
    );
  }
  const { mean } = sampleMoments(groups.flat());
  const between = moments.reduce((sum, m) => sum + m.n * (m.mean - mean) ** 2, 0);
  const within = moments.reduce((sum, m) => sum + (m.n - 1) * (m.standardDeviation ?? 0) ** 2, 0);
  const d1 = groups.length - 1;
  const d2 = n - groups.length;
  const fStatistic = within === 0 ? (between === 0 ? 0 : Number.POSITIVE_INFINITY) : between / d1 / (within / d2);
  return {
    fStatistic,
    degreesOfFreedom: [d1, d2],
    p: Number.isFinite(fStatistic) ? fisherFTail(fStatistic, d1, d2) : 0,
    withinStandardDeviation: Math.sqrt(within / d2),
    rSquared: between + within === 0 ? 0 : between / (between + within),
  };
}
