import { LabError } from '../errors.ts';
import { studentTQuantile, studentTTwoSided } from './distributions.ts';
import { requireNumbers, sampleMoments } from './sample.ts';
import type { Interval } from './strength.ts';

/** A straight line by least squares, y = intercept + slope·x. */
export interface Line {
  readonly n: number;
  readonly slope: number;
  readonly intercept: number;
  readonly slopeStandardError: number;
  readonly interceptStandardError: number;
  /** Standard deviation about the line, in the unit of y. */
  readonly residualStandardDeviation: number;
  readonly rSquared: number;
  readonly slopeConfidence: Interval;
  /** How easily values without any drift would give such a slope. */
  readonly slopeP: number;
}

/**
 * Least-squares line, about the means so that large x lose no digits.
 * @throws LabError `missing-value` for fewer than three points or one x only; `not-a-number`
 * @see NIST StRD linear regression; the certified set Norris in the tests
 */
export function fitLine(points: readonly { readonly x: number; readonly y: number }[], confidenceLevel = 0.95): Line {
  const xs = points.map((p) => p.x);
  const ys = points.map((p) => p.y);
  requireNumbers('x', xs);
  requireNumbers('y', ys);
  const n = points.length;
  if (n < 3 || xs.every((x) => x === xs[0])) {
    throw new LabError('missing-value', `a line must have three points and two values of x, got ${n} points`, {
      input: 'points',
      value: n,
    });
  }
  const meanX = sampleMoments(xs).mean;
  const meanY = sampleMoments(ys).mean;
  let xx = 0;
  let xy = 0;
  let yy = 0;
  for (const { x, y } of points) {
    xx += (x - meanX) ** 2;
    xy += (x - meanX) * (y - meanY);
    yy += (y - meanY) ** 2;
  }
  const slope = xy / xx;
  const intercept = meanY - slope * meanX;
  const residual = points.reduce((sum, { x, y }) => sum + (y - meanY - slope * (x - meanX)) ** 2, 0);
  const residualStandardDeviation = Math.sqrt(residual / (n - 2));
  const slopeStandardError = residualStandardDeviation / Math.sqrt(xx);
  const half = studentTQuantile(1 - (1 - confidenceLevel) / 2, n - 2) * slopeStandardError;
  return {
    n,
    slope,
    intercept,
    slopeStandardError,
    interceptStandardError: residualStandardDeviation * Math.sqrt(1 / n + meanX ** 2 / xx),
    residualStandardDeviation,
    rSquared: yy === 0 ? 1 : 1 - residual / yy,
    slopeConfidence: { from: slope - half, to: slope + half },
    slopeP: slopeStandardError === 0 ? (slope === 0 ? 1 : 0) : studentTTwoSided(slope / slopeStandardError, n - 2),
  };
}

const DAYS_A_YEAR = 365.25;

/** Drift of a quantity over the days of its tests. */
export interface Drift {
  readonly n: number;
  readonly perYear: number;
  readonly perYearConfidence: Interval;
  readonly p: number;
  readonly fromDate: string;
  readonly toDate: string;
}

/**
 * Drift over time: slope of the least-squares line over the day of test.
 * @param values at least three, on at least two days; `date` is YYYY-MM-DD
 * @returns null where the values cannot show a drift (fewer than three, or all on one day)
 */
export function driftOverTime(values: readonly { readonly date: string; readonly value: number }[]): Drift | null {
  const dates = values.map((v) => v.date).sort();
  const fromDate = dates[0];
  const toDate = dates.at(-1);
  if (values.length < 3 || fromDate === undefined || toDate === undefined || fromDate === toDate) return null;
  const days = (date: string): number => Date.parse(`${date}T00:00:00Z`) / 86_400_000;
  const first = days(fromDate);
  const line = fitLine(values.map(({ date, value }) => ({ x: (days(date) - first) / DAYS_A_YEAR, y: value })));
  return { n: line.n, perYear: line.slope, perYearConfidence: line.slopeConfidence, p: line.slopeP, fromDate, toDate };
}
