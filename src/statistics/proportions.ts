import { LabError } from '../errors.ts';
import { normalQuantile } from './distributions.ts';
import type { Interval } from './strength.ts';

/** A share of tests, with the interval that is right for small numbers and for shares near 0 and 1. */
export interface Share {
  readonly count: number;
  readonly of: number;
  /** count/of, 0 to 1. */
  readonly share: number;
  readonly confidence: Interval;
}

function requireCounts(count: number, of: number): void {
  if (Number.isInteger(count) && Number.isInteger(of) && of >= 1 && count >= 0 && count <= of) return;
  throw new LabError('out-of-range', `a share must be a whole number out of at least one test, got ${count} of ${of}`, {
    input: 'count',
    value: count,
  });
}

/**
 * Wilson score interval of a share, without continuity correction.
 * @throws LabError `out-of-range` for counts that cannot be
 * @see Wilson, JASA 22 (1927); Newcombe, Statistics in Medicine 17 (1998) 857, method 3
 */
export function shareOf(count: number, of: number, confidenceLevel = 0.95): Share {
  requireCounts(count, of);
  const p = count / of;
  const z = normalQuantile(1 - (1 - confidenceLevel) / 2);
  const scale = 1 + z ** 2 / of;
  const centre = (p + z ** 2 / (2 * of)) / scale;
  const half = (z * Math.sqrt((p * (1 - p)) / of + z ** 2 / (4 * of ** 2))) / scale;
  return {
    count,
    of,
    share: p,
    confidence: {
      from: count === 0 ? 0 : Math.max(0, centre - half),
      to: count === of ? 1 : Math.min(1, centre + half),
    },
  };
}

/**
 * Interval of the difference of two shares, a − b: Newcombe's hybrid of the two Wilson intervals.
 * @see Newcombe, Statistics in Medicine 17 (1998) 873, method 10
 */
export function shareDifference(a: Share, b: Share): { readonly difference: number; readonly confidence: Interval } {
  const difference = a.share - b.share;
  const below = Math.hypot(a.share - a.confidence.from, b.confidence.to - b.share);
  const above = Math.hypot(a.confidence.to - a.share, b.share - b.confidence.from);
  return { difference, confidence: { from: difference - below, to: difference + above } };
}

/** ln n! for the sums below; exact enough (1e-12) for any number of tests. */
function logFactorials(upTo: number): Float64Array {
  const logs = new Float64Array(upTo + 1);
  for (let i = 2; i <= upTo; i++) logs[i] = (logs[i - 1] ?? 0) + Math.log(i);
  return logs;
}

/**
 * Fisher's exact test of a table of two by two, two-sided: the probability of all tables with these sums that are no
 * likelier than the one that was seen.
 * @param table [[a with, a without], [b with, b without]]
 * @throws LabError `out-of-range` for counts that are no whole numbers ≥ 0
 * @see Fisher, The Design of Experiments (1935)
 */
export function fisherExactP(table: readonly [readonly [number, number], readonly [number, number]]): number {
  const [[a, b], [c, d]] = table;
  for (const count of [a, b, c, d]) {
    if (Number.isInteger(count) && count >= 0) continue;
    throw new LabError('out-of-range', `counts must be whole numbers ≥ 0, got ${count}`, {
      input: 'table',
      value: count,
    });
  }
  const rows = [a + b, c + d] as const;
  const columns = [a + c, b + d] as const;
  const log = logFactorials(rows[0] + rows[1]);
  const of = (i: number): number => log[i] ?? 0;
  const fixed = of(rows[0]) + of(rows[1]) + of(columns[0]) + of(columns[1]) - of(rows[0] + rows[1]);
  const probability = (x: number): number =>
    Math.exp(fixed - of(x) - of(rows[0] - x) - of(columns[0] - x) - of(rows[1] - columns[0] + x));
  const seen = probability(a);
  let p = 0;
  for (let x = Math.max(0, columns[0] - rows[1]); x <= Math.min(rows[0], columns[0]); x++) {
    const one = probability(x);
    if (one <= seen * (1 + 1e-7)) p += one;
  }
  return Math.min(1, p);
}
