import { type AxialComparison, compareMeanAxes } from './axialComparison.ts';
import { type BatchTest, planeAngleToTorqueDeg } from './batchTest.ts';
import { analyseVariance, compareTwoMeans, type MeanDifference, type VarianceAnalysis } from './meansCompared.ts';
import { fisherExactP, shareDifference, shareOf } from './proportions.ts';
import type { Interval } from './strength.ts';

interface NamedGroup {
  readonly name: string | null;
  readonly tests: readonly BatchTest[];
}

/** One group against another; each part is null where one of them has too few tests for it. */
export interface PairComparison {
  readonly first: string | null;
  readonly second: string | null;
  /** MPa, first minus second. */
  readonly strength: MeanDifference | null;
  readonly axes: AxialComparison | null;
  /** Share of breaks by normal stress, first minus second. */
  readonly normalStress: { readonly difference: number; readonly confidence: Interval; readonly p: number } | null;
  /** Strength P after Holm's correction for the number of pairs; null without a strength comparison. */
  readonly strengthCorrectedP: number | null;
}

export interface GroupComparison {
  readonly strength: VarianceAnalysis | null;
  readonly axes: AxialComparison | null;
  /** Every pair of groups; none when there are more than `MOST_COMPARED` groups. */
  readonly pairs: readonly PairComparison[];
  readonly notes: readonly string[];
}

/** More groups give more pairs than anybody reads. */
export const MOST_COMPARED = 12;

/**
 * Holm's step-down correction: keeps the chance of any false alarm among all comparisons at the level of one.
 * @see Holm, Scandinavian Journal of Statistics 6 (1979) 65
 */
export function holmCorrected(ps: readonly number[]): number[] {
  const order = ps.map((p, i) => ({ p, i })).sort((a, b) => a.p - b.p);
  const corrected = new Array<number>(ps.length).fill(1);
  let least = 0;
  order.forEach(({ p, i }, rank) => {
    least = Math.max(least, Math.min(1, (ps.length - rank) * p));
    corrected[i] = least;
  });
  return corrected;
}

const soundOf = (group: NamedGroup): BatchTest[] => group.tests.filter((test) => test.leftOut === null);
const strengthsOf = (group: NamedGroup): number[] => soundOf(group).flatMap((test) => test.strengthMPa ?? []);
const anglesOf = (group: NamedGroup): number[] => soundOf(group).flatMap((test) => planeAngleToTorqueDeg(test) ?? []);

function axesOf(groups: readonly NamedGroup[]): AxialComparison | null {
  const samples = groups.map(anglesOf).filter((angles) => angles.length > 1);
  return samples.length < 2 ? null : compareMeanAxes(samples);
}

function normalStressOf(a: NamedGroup, b: NamedGroup): PairComparison['normalStress'] {
  const count = (group: NamedGroup) => {
    const stated = group.tests.filter((test) => test.mode !== null);
    return { broke: stated.filter((test) => test.mode === 'normal-stress').length, of: stated.length };
  };
  const [first, second] = [count(a), count(b)];
  if (first.of === 0 || second.of === 0) return null;
  return {
    ...shareDifference(shareOf(first.broke, first.of), shareOf(second.broke, second.of)),
    p: fisherExactP([
      [first.broke, first.of - first.broke],
      [second.broke, second.of - second.broke],
    ]),
  };
}

function pairsOf(groups: readonly NamedGroup[]): PairComparison[] {
  const pairs = groups.flatMap((a, i) =>
    groups.slice(i + 1).map((b) => {
      const [x, y] = [strengthsOf(a), strengthsOf(b)];
      return {
        first: a.name,
        second: b.name,
        strength: x.length > 1 && y.length > 1 ? compareTwoMeans(x, y) : null,
        axes: axesOf([a, b]),
        normalStress: normalStressOf(a, b),
      };
    }),
  );
  const compared = pairs.flatMap((pair, i) => (pair.strength ? [{ i, p: pair.strength.p }] : []));
  const corrected = new Map(holmCorrected(compared.map((c) => c.p)).map((p, k) => [compared[k]?.i, p]));
  return pairs.map((pair, i) => ({ ...pair, strengthCorrectedP: corrected.get(i) ?? null }));
}

/**
 * Groups against each other: strengths by one-way analysis of variance and, in pairs, by Welch's t; mean axes by Watson and
 * Williams; shares of normal-stress breaks by Fisher's exact test with Newcombe's interval.
 */
export function compareGroups(groups: readonly NamedGroup[]): GroupComparison {
  const notes: string[] = [];
  const strengths = groups.map(strengthsOf).filter((values) => values.length > 1);
  const alone = groups.filter((group) => strengthsOf(group).length === 1).length;
  if (alone > 0 && strengths.length > 0)
    notes.push(
      alone === 1
        ? 'One group with a single strength is not compared.'
        : `${alone} groups with a single strength are not compared.`,
    );
  const axes = axesOf(groups);
  if (axes && !axes.trustworthy) {
    notes.push('The plane angles scatter so much that their mean axes cannot be compared by the Watson–Williams test.');
  }
  const tooMany = groups.length > MOST_COMPARED;
  if (tooMany) notes.push(`${groups.length} groups are too many to compare in pairs (at most ${MOST_COMPARED}).`);
  return {
    strength: strengths.length < 2 ? null : analyseVariance(strengths),
    axes,
    pairs: tooMany ? [] : pairsOf(groups),
    notes,
  };
}
