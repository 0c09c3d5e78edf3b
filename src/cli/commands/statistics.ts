import { Command } from 'commander';
import { LabError } from '../../errors.ts';
import { type GroupSummary, groupTests, summariseGroup } from '../../statistics/batch.ts';
import { type BatchTest, GROUPINGS, type Grouping } from '../../statistics/batchTest.ts';
import { compareGroups, type GroupComparison } from '../../statistics/groupsCompared.ts';
import { assessTest } from '../../verdict/assessTest.ts';
import { batchTestOf } from '../../verdict/batchTest.ts';
import { chosenTests, noTestFits } from '../chooseTests.ts';
import type { CommandContext } from '../context.ts';
import { comparisonLines, groupLines } from '../statisticsText.ts';
import { dataDirOption } from './options.ts';

interface StatisticsFlags {
  readonly data: string;
  readonly by?: string;
  readonly where?: string;
  readonly test?: readonly string[];
  readonly json?: boolean;
}

const EXAMPLES = `
Examples:
  breakplane statistics --by material
  breakplane statistics --where "material=grey cast iron" --by heat
  breakplane statistics --by operator --json

Plane angles are axes: they are averaged with period 180°, and turned to counter-clockwise torque first, so that breaks
under torque in both directions can be compared. Intervals are at 95 %. A test marked ! stands apart from its group: look
at it, but do not leave it out for that alone. Too few tests say so.`;

function groupingOf(text: string | undefined): Grouping | null {
  if (text === undefined) return null;
  const found = GROUPINGS.find((name) => name === text);
  if (found) return found;
  throw new LabError('usage', `--by must be ${GROUPINGS.join(', ')}, got "${text}"`, { input: '--by', value: text });
}

/** `Infinity` is no JSON: an unlimited scatter is null. */
const jsonText = (value: unknown): string =>
  JSON.stringify(value, (_key, item) => (typeof item === 'number' && !Number.isFinite(item) ? null : item));

/** `breakplane statistics`: modes, plane angles and strengths of many tests, by material, heat, section or operator. */
export function statisticsCommand(context: CommandContext): Command {
  const { ports, output } = context;
  return new Command('statistics')
    .description('Say what many tests say together: modes, plane angles, strengths, tests that stand apart')
    .addOption(dataDirOption(ports))
    .option('--by <field>', `group the tests by ${GROUPINGS.join(', ')}`)
    .option('--where <field=value>', 'tests of a material, a heat, or found by a text')
    .option('--test <id...>', 'specimen ids or record ids')
    .option('--json', 'one JSON object')
    .addHelpText('after', EXAMPLES)
    .action(async (flags: StatisticsFlags) => {
      const by = groupingOf(flags.by);
      const records = await ports.openRecords(flags.data);
      const tests: BatchTest[] = [];
      try {
        for await (const test of chosenTests(records, flags)) {
          const readings = await records.readingsOf(test.id);
          tests.push(batchTestOf(test, readings, assessTest(test, readings)));
        }
      } finally {
        await records.close();
      }
      if (tests.length === 0) throw noTestFits(flags);
      const groups = by === null ? [{ name: null, tests }] : groupTests(tests, by);
      const summaries = groups.map((group) => summariseGroup(group.name, group.tests));
      const comparison = groups.length > 1 ? compareGroups(groups) : null;
      if (flags.json) output.line(jsonText({ tests: tests.length, by, groups: summaries, comparison }));
      else for (const line of textLines(by, summaries, comparison, output.colours)) output.line(line);
    });
}

function textLines(
  by: Grouping | null,
  summaries: readonly GroupSummary[],
  comparison: GroupComparison | null,
  colours: CommandContext['output']['colours'],
): string[] {
  const title = (group: GroupSummary): string => {
    if (by === null) return 'All tests';
    return group.name === null ? `No ${by} stated` : `${by} ${group.name}`;
  };
  return [
    ...summaries.flatMap((group) => groupLines(group, title(group), colours)),
    ...(comparison ? comparisonLines(comparison, colours) : []),
  ];
}
