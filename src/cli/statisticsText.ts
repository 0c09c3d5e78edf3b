import type { GroupSummary } from '../statistics/batch.ts';
import type { GroupComparison, PairComparison } from '../statistics/groupsCompared.ts';
import type { Interval } from '../statistics/strength.ts';
import { degreesText, fixedText } from '../verdict/wording.ts';
import type { CliOutput } from './output.ts';

type Colours = CliOutput['colours'];

const rangeText = ({ from, to }: Interval, digits = 1): string =>
  `${fixedText(from, digits)} to ${fixedText(to, digits)}`;

/** A counted share; unlike a probability it may be exactly 0 or 100 %. */
const percentText = (share: number): string => `${fixedText(100 * share, 0)} %`;

/** A probability of chance, as it is usually printed. */
const pText = (p: number): string => (p < 0.001 ? 'P < 0.001' : `P = ${p.toFixed(3)}`);

/** Differences rarer than this by chance are called out. */
const SIGNIFICANT_P = 0.05;

function modeLines({ modes }: GroupSummary): string[] {
  return modes.map(({ mode, share }) => {
    const { from, to } = share.confidence;
    return `  ${mode.padEnd(19)} ${share.count} of ${share.of}  (${percentText(share.share)}, interval ${percentText(from)} to ${percentText(to)})`;
  });
}

function angleLines({ planeAngles, planeTiltsDeg }: GroupSummary): string[] {
  const lines: string[] = [];
  if (planeAngles) {
    const { n, meanAxisDeg, confidenceHalfWidthDeg, circularStandardDeviationDeg, resultantLength } = planeAngles;
    const mean =
      meanAxisDeg === null
        ? 'no mean axis'
        : `mean axis ${degreesText(meanAxisDeg)}${confidenceHalfWidthDeg === null ? '' : ` ± ${degreesText(confidenceHalfWidthDeg)}`}`;
    const spread = Number.isFinite(circularStandardDeviationDeg)
      ? `, circular standard deviation ${degreesText(circularStandardDeviationDeg)}`
      : '';
    lines.push(
      `  plane angles (${n})    ${mean}${n > 1 ? `${spread}, resultant length ${resultantLength.toFixed(3)}` : ''}`,
    );
  }
  if (planeTiltsDeg) {
    const { n, mean, standardDeviation: s } = planeTiltsDeg;
    lines.push(
      `  tilts of flat breaks (${n})  mean ${degreesText(mean)}${s === null ? '' : `, standard deviation ${degreesText(s)}`}`,
    );
  }
  return lines;
}

function strengthLines({ strength, weibull, strengthDrift }: GroupSummary): string[] {
  if (!strength) return [];
  const { n, meanMPa, meanConfidenceMPa, standardDeviationMPa: s, lowerToleranceLimitMPa, content } = strength;
  const interval = meanConfidenceMPa ? ` (${rangeText(meanConfidenceMPa)})` : '';
  const lines = [
    `  strength T·r/J (${n})  mean ${fixedText(meanMPa, 1)} MPa${interval}${s === null ? '' : `, standard deviation ${fixedText(s, 1)} MPa`}`,
  ];
  if (lowerToleranceLimitMPa !== null && lowerToleranceLimitMPa > 0) {
    lines.push(
      `  ${percentText(content)} of all specimens above ${fixedText(lowerToleranceLimitMPa, 1)} MPa with ${percentText(strength.confidenceLevel)} confidence`,
    );
  }
  if (weibull) {
    const { unbiasedModulus, modulus, modulusConfidence, characteristicStrengthMPa } = weibull;
    const m = modulusConfidence ? ` (${rangeText(modulusConfidence)})` : '';
    lines.push(
      `  Weibull             modulus ${fixedText(unbiasedModulus ?? modulus, 1)}${m}, characteristic strength ${fixedText(characteristicStrengthMPa, 1)} MPa`,
    );
  }
  if (strengthDrift && strengthDrift.p < SIGNIFICANT_P) {
    const { perYear, perYearConfidence, p, fromDate, toDate } = strengthDrift;
    lines.push(
      `  drift               ${fixedText(perYear, 1)} MPa a year (${rangeText(perYearConfidence)}; ${pText(p)}), ${fromDate} to ${toDate}`,
    );
  }
  return lines;
}

/** One group of tests in a test engineer's words. */
export function groupLines(group: GroupSummary, title: string, colours: Colours): string[] {
  return [
    colours.bold(`${title}: ${group.tests} ${group.tests === 1 ? 'test' : 'tests'}`),
    ...modeLines(group),
    ...angleLines(group),
    ...strengthLines(group),
    ...group.odd.map(({ specimenId, sentence }) => `  ${colours.yellow('!')} ${specimenId}: ${sentence}`),
    ...group.leftOut.map(({ specimenId, reason }) => `  left out ${specimenId}: ${reason}`),
    ...group.notes.map((note) => `  ${colours.dim(`note: ${note}`)}`),
  ];
}

const nameText = (name: string | null): string => name ?? '(none stated)';

function pairLine({ first, second, strength, strengthCorrectedP, axes, normalStress }: PairComparison): string | null {
  const parts: string[] = [];
  if (strength && strengthCorrectedP !== null && strengthCorrectedP < SIGNIFICANT_P) {
    parts.push(
      `strength differs by ${fixedText(strength.difference, 1)} MPa (${rangeText(strength.confidence)}; ${pText(strengthCorrectedP)} after Holm)`,
    );
  }
  if (axes?.trustworthy && axes.p < SIGNIFICANT_P) parts.push(`mean axes differ (${pText(axes.p)})`);
  if (normalStress && normalStress.p < SIGNIFICANT_P) {
    const { from, to } = normalStress.confidence;
    parts.push(
      `share of normal-stress breaks differs by ${percentText(normalStress.difference)} (${percentText(from)} to ${percentText(to)}; ${pText(normalStress.p)})`,
    );
  }
  return parts.length === 0 ? null : `  ${nameText(first)} against ${nameText(second)}: ${parts.join('; ')}`;
}

/** Groups against each other: what differs by more than chance. */
export function comparisonLines({ strength, axes, pairs, notes }: GroupComparison, colours: Colours): string[] {
  const lines: string[] = [];
  if (strength) {
    const [d1, d2] = strength.degreesOfFreedom;
    lines.push(`  strengths, all groups  F(${d1}, ${d2}) = ${strength.fStatistic.toFixed(2)}, ${pText(strength.p)}`);
  }
  if (axes?.trustworthy) {
    const [d1, d2] = axes.degreesOfFreedom;
    lines.push(`  mean axes, all groups  F(${d1}, ${d2}) = ${axes.fStatistic.toFixed(2)}, ${pText(axes.p)}`);
  }
  const differing = pairs.map(pairLine).filter((line) => line !== null);
  lines.push(...differing);
  if (pairs.length > 0 && differing.length === 0) lines.push('  no pair of groups differs by more than chance');
  lines.push(...notes.map((note) => `  ${colours.dim(`note: ${note}`)}`));
  return lines.length === 0 ? [] : [colours.bold('Groups against each other'), ...lines];
}
