import { planeAngleDifferenceDeg } from '../angle.ts';
import { axialSummary } from './axial.ts';
import { type BatchTest, planeAngleToTorqueDeg } from './batchTest.ts';
import { controlChartOfIndividuals } from './controlChart.ts';
import { findOutliers } from './outliers.ts';

export const ODD_CODES = ['strength-outlier', 'angle-outlier', 'mode-unlike-group', 'outside-control-limits'] as const;

/** A test that stands apart from its group and should be looked at; being odd is no reason to leave it out. */
export interface OddTest {
  readonly id: string;
  readonly specimenId: string;
  readonly code: (typeof ODD_CODES)[number];
  readonly sentence: string;
  /** The numbers behind it, unit in the name. */
  readonly numbers: Readonly<Record<string, number>>;
}

/** Angles closer together than this (R̄ of the doubled angles) differ from their mean axis like plain numbers. */
const CLOSE_TOGETHER = 0.7;
/** A mode that this share of at least so many tests has is the mode of the group. Common practice. */
const GROUP_MODE = { share: 0.8, tests: 5 } as const;
/** Control limits from fewer tests say nothing. Common practice. */
const FEWEST_ON_A_CHART = 12;

const round = (x: number, digits: number): string => x.toFixed(digits);

function oddStrengths(tests: readonly BatchTest[]): OddTest[] {
  const tested = tests.flatMap((test) => (test.strengthMPa === null ? [] : [{ test, strengthMPa: test.strengthMPa }]));
  return findOutliers(tested.map((t) => t.strengthMPa)).outliers.flatMap(({ index, statistic, criticalValue }) => {
    const found = tested[index];
    if (!found) return [];
    return {
      id: found.test.id,
      specimenId: found.test.specimenId,
      code: 'strength-outlier',
      sentence: `The strength of ${round(found.strengthMPa, 1)} MPa stands apart from the ${tested.length} of its group (${round(statistic, 2)} standard deviations; more than ${round(criticalValue, 2)} happens to one sample in twenty).`,
      numbers: { strengthMPa: found.strengthMPa, statistic, criticalValue },
    };
  });
}

function oddAngles(tests: readonly BatchTest[]): OddTest[] {
  const measured = tests.flatMap((test) => {
    const angleDeg = planeAngleToTorqueDeg(test);
    return angleDeg === null ? [] : [{ test, angleDeg }];
  });
  if (measured.length < 3) return [];
  const { meanAxisDeg, resultantLength } = axialSummary(measured.map((m) => m.angleDeg));
  if (meanAxisDeg === null || resultantLength < CLOSE_TOGETHER) return [];
  const fromMeanDeg = measured.map((m) => planeAngleDifferenceDeg(m.angleDeg, meanAxisDeg));
  return findOutliers(fromMeanDeg).outliers.flatMap(({ index, value, statistic, criticalValue }) => {
    const found = measured[index];
    if (!found) return [];
    return {
      id: found.test.id,
      specimenId: found.test.specimenId,
      code: 'angle-outlier',
      sentence: `The plane angle lies ${round(Math.abs(value), 1)}° from the mean axis of the ${measured.length} of its group (${round(statistic, 2)} standard deviations; more than ${round(criticalValue, 2)} happens to one sample in twenty).`,
      numbers: {
        planeAngleDeg: found.test.planeAngleDeg ?? Number.NaN,
        fromMeanAxisDeg: value,
        statistic,
        criticalValue,
      },
    };
  });
}

/** A mode the rule states; the others leave the question open. */
const isStated = (mode: string | null): mode is string =>
  mode !== null && mode !== 'indeterminate' && mode !== 'not-attributable';

function oddModes(tests: readonly BatchTest[]): OddTest[] {
  const stated = tests.filter((test) => isStated(test.mode));
  if (stated.length < GROUP_MODE.tests) return [];
  const counts = new Map<string, number>();
  for (const { mode } of stated) if (mode !== null) counts.set(mode, (counts.get(mode) ?? 0) + 1);
  const [usual, count] = [...counts].reduce((a, b) => (b[1] > a[1] ? b : a));
  if (count / stated.length < GROUP_MODE.share) return [];
  return stated
    .filter((test) => test.mode !== usual)
    .map((test) => ({
      id: test.id,
      specimenId: test.specimenId,
      code: 'mode-unlike-group',
      sentence: `The failure mode is ${test.mode}; ${count} of ${stated.length} in its group are ${usual}.`,
      numbers: { usualCount: count, statedCount: stated.length },
    }));
}

function offTheChart(tests: readonly BatchTest[]): OddTest[] {
  const inOrder = tests
    .flatMap((test) =>
      test.testDate === null || test.strengthMPa === null
        ? []
        : [{ test, date: test.testDate, strengthMPa: test.strengthMPa }],
    )
    .sort((a, b) => (a.date === b.date ? (a.test.specimenId < b.test.specimenId ? -1 : 1) : a.date < b.date ? -1 : 1));
  if (inOrder.length < FEWEST_ON_A_CHART) return [];
  const chart = controlChartOfIndividuals(inOrder.map((t) => t.strengthMPa));
  return (chart?.outside ?? []).flatMap((index) => {
    const found = inOrder[index];
    if (!found || !chart) return [];
    const { lowerLimit, upperLimit } = chart;
    return {
      id: found.test.id,
      specimenId: found.test.specimenId,
      code: 'outside-control-limits',
      sentence: `The strength of ${round(found.strengthMPa, 1)} MPa lies outside the control limits ${round(lowerLimit, 1)} to ${round(upperLimit, 1)} MPa of the tests in their order.`,
      numbers: { strengthMPa: found.strengthMPa, lowerLimitMPa: lowerLimit, upperLimitMPa: upperLimit },
    };
  });
}

/** Tests of one group that stand apart from the others, by strength, plane angle, mode and order of testing. */
export function oddTestsOf(tests: readonly BatchTest[]): OddTest[] {
  const sound = tests.filter((test) => test.leftOut === null);
  return [...oddStrengths(sound), ...oddAngles(sound), ...oddModes(sound), ...offTheChart(sound)];
}
