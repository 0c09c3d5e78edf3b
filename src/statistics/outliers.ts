import { studentTQuantile } from './distributions.ts';
import { requireNumbers, sampleMoments } from './sample.ts';

/** One value that stands apart from its sample. */
export interface Outlier {
  /** Place in the sample, from 0. */
  readonly index: number;
  readonly value: number;
  /** |value − mean|/s of the sample without the outliers found before it. */
  readonly statistic: number;
  readonly criticalValue: number;
}

export interface OutlierTest {
  readonly outliers: readonly Outlier[];
  /** What was tested, most extreme first; as many as were looked for. */
  readonly steps: readonly Outlier[];
  readonly significance: number;
}

/** Fewer values cannot show an outlier. */
const FEWEST = 3;

/**
 * Two-sided critical value of Grubbs' statistic max|x − x̄|/s: ((n − 1)/√n) √(t²/(n − 2 + t²)), t the upper α/(2n) point of
 * Student's t with n − 2 degrees of freedom. One-sided: hand in 2α.
 * @param n ≥ 3
 * @see Grubbs, Technometrics 11 (1969); ASTM E178; NIST/SEMATECH e-Handbook 1.3.5.17.1
 */
export function grubbsCriticalValue(n: number, significance: number): number {
  const t = studentTQuantile(1 - significance / (2 * n), n - 2);
  return ((n - 1) / Math.sqrt(n)) * Math.sqrt(t ** 2 / (n - 2 + t ** 2));
}

/**
 * Outliers of a sample from a normal distribution, by Rosner's generalised extreme Studentised deviate test: up to
 * `atMost` values, so that two outliers do not hide each other. With `atMost` 1 it is the two-sided test of Grubbs.
 * @param atMost by default a tenth of the sample, at least one and at most 10
 * @param significance chance of a false alarm in a clean sample, default 0.05
 * @returns no outliers for fewer than 3 values or values that are all the same
 * @throws LabError `not-a-number`
 * @see Rosner, Technometrics 25 (1983) 165; NIST/SEMATECH e-Handbook 1.3.5.17.3. Good for n ≥ 15, common practice below
 */
export function findOutliers(
  values: readonly number[],
  { atMost, significance = 0.05 }: { readonly atMost?: number; readonly significance?: number } = {},
): OutlierTest {
  requireNumbers('values', values);
  const most = Math.min(
    atMost ?? Math.min(10, Math.max(1, Math.floor(values.length / 10))),
    values.length - FEWEST + 1,
  );
  let left = values.map((value, index) => ({ value, index }));
  const steps: Outlier[] = [];
  let found = 0;
  for (let i = 0; i < most; i++) {
    const { n, mean, standardDeviation } = sampleMoments(left.map((v) => v.value));
    if (!standardDeviation) break;
    const [first, ...others] = left;
    if (!first) break;
    const extreme = others.reduce((a, b) => (Math.abs(b.value - mean) > Math.abs(a.value - mean) ? b : a), first);
    const statistic = Math.abs(extreme.value - mean) / standardDeviation;
    const criticalValue = grubbsCriticalValue(n, significance);
    steps.push({ ...extreme, statistic, criticalValue });
    if (statistic > criticalValue) found = i + 1;
    left = left.filter((v) => v.index !== extreme.index);
  }
  return { outliers: steps.slice(0, found), steps, significance };
}
