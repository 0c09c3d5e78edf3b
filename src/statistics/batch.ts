import { type AxialSummary, axialSummary } from './axial.ts';
import { type BatchTest, type Grouping, planeAngleToTorqueDeg } from './batchTest.ts';
import { type Drift, driftOverTime } from './drift.ts';
import { type OddTest, oddTestsOf } from './oddTests.ts';
import { type Share, shareOf } from './proportions.ts';
import { type RosePetal, rosePetals } from './rose.ts';
import { type SampleMoments, sampleMoments } from './sample.ts';
import { FEW_TESTS, notesOnSize } from './smallSamples.ts';
import { type StrengthSummary, strengthSummary } from './strength.ts';
import { fitWeibull, type WeibullFit } from './weibull.ts';

/** Everything a batch of tests says together. */
export interface GroupSummary {
  /** Name of the group; null for tests that state none (or for the whole batch). */
  readonly name: string | null;
  readonly tests: number;
  /** Share of each failure mode among the tests with a reading, largest first. */
  readonly modes: readonly { readonly mode: string; readonly share: Share }[];
  /** Plane angles of helices and splits, turned to counter-clockwise torque. */
  readonly planeAngles: AxialSummary | null;
  readonly rose: readonly RosePetal[];
  /** Tilts of flat breaks, degrees. */
  readonly planeTiltsDeg: SampleMoments | null;
  /** Elastic torsional strengths. */
  readonly strength: StrengthSummary | null;
  /** For groups that break by normal stress; null for others, for fewer than `FEW_TESTS`, and where no fit is possible. */
  readonly weibull: WeibullFit | null;
  /** Drift of the strength, MPa a year. */
  readonly strengthDrift: Drift | null;
  readonly odd: readonly OddTest[];
  readonly leftOut: readonly { readonly specimenId: string; readonly reason: string }[];
  /** Sentences on what the numbers cannot say. */
  readonly notes: readonly string[];
}

const numbersOf = (tests: readonly BatchTest[], of: (test: BatchTest) => number | null): number[] =>
  tests.flatMap((test) => of(test) ?? []);

function modesOf(tests: readonly BatchTest[]): GroupSummary['modes'] {
  const counts = new Map<string, number>();
  for (const { mode } of tests) if (mode !== null) counts.set(mode, (counts.get(mode) ?? 0) + 1);
  const all = [...counts.values()].reduce((sum, count) => sum + count, 0);
  return [...counts]
    .sort((a, b) => b[1] - a[1] || (a[0] < b[0] ? -1 : 1))
    .map(([mode, count]) => ({ mode, share: shareOf(count, all) }));
}

/** More than half broke by normal stress: the strength of such a material is that of its largest flaw. */
const isBrittle = (modes: GroupSummary['modes']): boolean =>
  modes[0]?.mode === 'normal-stress' && modes[0].share.share > 0.5;

function weibullOf(strengthsMPa: readonly number[], brittle: boolean): WeibullFit | null {
  const differ = strengthsMPa.some((s) => Math.abs(s / (strengthsMPa[0] ?? s) - 1) > 1e-3);
  return brittle && differ && strengthsMPa.length >= FEW_TESTS && strengthsMPa.every((s) => s > 0)
    ? fitWeibull(strengthsMPa)
    : null;
}

/** Statistics of one group of tests. Pure: the same tests give the same answer on the page, in the service and in a report. */
export function summariseGroup(name: string | null, tests: readonly BatchTest[]): GroupSummary {
  const sound = tests.filter((test) => test.leftOut === null);
  const modes = modesOf(tests);
  const angles = numbersOf(sound, planeAngleToTorqueDeg);
  const withoutDirection = sound.filter((t) => t.planeAngleDeg !== null && t.torqueDirection === null);
  const tilts = numbersOf(sound, (t) => t.planeTiltDeg);
  const strengths = numbersOf(sound, (t) => t.strengthMPa);
  const strength = strengths.length > 0 ? strengthSummary(strengths) : null;
  const planeAngles = angles.length > 0 ? axialSummary(angles) : null;
  const weibull = weibullOf(strengths, isBrittle(modes));
  const dated = sound.flatMap(({ testDate, strengthMPa }) =>
    testDate === null || strengthMPa === null ? [] : [{ date: testDate, value: strengthMPa }],
  );
  return {
    name,
    tests: tests.length,
    modes,
    planeAngles,
    rose: rosePetals(angles),
    planeTiltsDeg: tilts.length > 0 ? sampleMoments(tilts, 'planeTiltsDeg') : null,
    strength,
    weibull,
    strengthDrift: driftOverTime(dated),
    odd: oddTestsOf(tests),
    leftOut: tests.flatMap(({ specimenId, leftOut }) => (leftOut === null ? [] : [{ specimenId, reason: leftOut }])),
    notes: notesOnSize({ planeAngles, strength, weibull, anglesWithoutDirection: withoutDirection.length }),
  };
}

/** Tests by material, heat, section or operator; groups in the order of their names, tests that state none last. */
export function groupTests(
  tests: readonly BatchTest[],
  by: Grouping,
): readonly { readonly name: string | null; readonly tests: readonly BatchTest[] }[] {
  const groups = new Map<string | null, BatchTest[]>();
  for (const test of tests) {
    const name = test[by];
    const group = groups.get(name);
    if (group) group.push(test);
    else groups.set(name, [test]);
  }
  return [...groups]
    .map(([name, members]) => ({ name, tests: members }))
    .sort((a, b) => (a.name === null ? 1 : b.name === null ? -1 : a.name < b.name ? -1 : 1));
}
