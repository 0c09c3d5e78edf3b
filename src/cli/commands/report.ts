import { rename, writeFile } from 'node:fs/promises';
import { Command } from 'commander';
import { LabError } from '../../errors.ts';
import type { LaboratoryRecords } from '../../records/laboratoryRecords.ts';
import type { Test } from '../../records/test.ts';
import { REPORT_FORMATS, renderReport } from '../../report/node/render.ts';
import type { ReportedTest } from '../../report/summary.ts';
import { assessTest } from '../../verdict/assessTest.ts';
import type { CommandContext } from '../context.ts';
import { dataDirOption } from './options.ts';

interface ReportFlags {
  readonly data: string;
  readonly test?: readonly string[];
  readonly where?: string;
  readonly format: string;
  readonly out: string;
  readonly paper: string;
  readonly laboratory?: string;
  readonly date?: string;
}

const EXAMPLES = `
Examples:
  breakplane report --test GI-12 --out gi-12.pdf
  breakplane report --where "material=grey cast iron" --out iron.pdf
  breakplane report --where heat=G-117 --format json --out g-117.json

--test takes the specimen id or the id of a record; --where FIELD=VALUE takes material, heat or text (a search).
Without either, every test of the laboratory is reported.`;

const PAGE = 200;
const MOST_TESTS = 5000;

async function everyTest(
  records: LaboratoryRecords,
  query: { text?: string; material?: string; heat?: string },
): Promise<Test[]> {
  const found: Test[] = [];
  let cursor: string | null = null;
  do {
    const page: { tests: Test[]; nextCursor: string | null } = await records.listTests({
      limit: PAGE,
      ...query,
      ...(cursor !== null && { cursor }),
    });
    found.push(...page.tests);
    cursor = page.nextCursor;
  } while (cursor !== null && found.length < MOST_TESTS);
  return found;
}

async function testNamed(records: LaboratoryRecords, name: string): Promise<Test[]> {
  const named = (await everyTest(records, { text: name })).filter((t) => t.specimenId === name || t.id === name);
  if (named.length > 0) return named;
  return [
    await records.readTest(name).catch(() => {
      throw new LabError('not-found', `--test must be a specimen id or the id of a test, got "${name}"`, {
        input: '--test',
        value: name,
      });
    }),
  ];
}

async function selected(records: LaboratoryRecords, flags: ReportFlags): Promise<Test[]> {
  if (flags.test !== undefined && flags.test.length > 0) {
    return (await Promise.all(flags.test.map((name) => testNamed(records, name)))).flat();
  }
  if (flags.where === undefined) return everyTest(records, {});
  const at = flags.where.indexOf('=');
  const field = flags.where.slice(0, at).trim();
  const value = flags.where.slice(at + 1).trim();
  if (at < 1 || value === '' || (field !== 'material' && field !== 'heat' && field !== 'text')) {
    throw new LabError('usage', `--where must be material=…, heat=… or text=…, got "${flags.where}"`, {
      input: '--where',
      value: flags.where,
    });
  }
  return everyTest(records, { [field]: value });
}

function madeAt(text: string | undefined): Date {
  if (text === undefined) return new Date();
  const date = new Date(text);
  if (Number.isNaN(date.getTime())) {
    throw new LabError('usage', `--date must be a moment such as 2026-12-01T09:30:00Z, got "${text}"`, {
      input: '--date',
      value: text,
    });
  }
  return date;
}

/** `breakplane report`: the summary of tests as a document. */
export function reportCommand(context: CommandContext): Command {
  const { ports, output } = context;
  return new Command('report')
    .description('Write the summary of tests as PDF (PDF/A-2b), HTML or JSON')
    .addOption(dataDirOption(ports))
    .option('--test <id...>', 'specimen ids or record ids')
    .option('--where <field=value>', 'tests of a material, a heat, or found by a text')
    .option('--format <pdf|html|json>', 'form of the document', 'pdf')
    .requiredOption('--out <file>', 'file to write')
    .option('--paper <a4|us-letter>', 'size of the pages', 'a4')
    .option('--laboratory <name>', 'name printed under the title')
    .option('--date <moment>', 'moment printed, for the same bytes again')
    .addHelpText('after', EXAMPLES)
    .action(async (flags: ReportFlags) => {
      const format = REPORT_FORMATS.find((f) => f === flags.format);
      if (format === undefined) {
        throw new LabError('usage', `--format must be ${REPORT_FORMATS.join(', ')}, got "${flags.format}"`, {
          input: '--format',
          value: flags.format,
        });
      }
      if (flags.paper !== 'a4' && flags.paper !== 'us-letter') {
        throw new LabError('usage', `--paper must be a4 or us-letter, got "${flags.paper}"`, {
          input: '--paper',
          value: flags.paper,
        });
      }
      const moment = madeAt(flags.date);
      const records = await ports.openRecords(flags.data);
      try {
        const chosen = await selected(records, flags);
        if (chosen.length === 0)
          throw new LabError('not-found', 'no test fits what was asked for', { input: '--where', value: flags.where });
        const tests: ReportedTest[] = [];
        for (const test of chosen) {
          const readings = await records.readingsOf(test.id);
          tests.push({ test, readings, assessment: assessTest(test, readings) });
        }
        const bytes = await renderReport({
          tests,
          format,
          version: ports.version,
          madeAt: moment,
          photoPath: (sha256) => records.photoPath(sha256),
          paper: flags.paper,
          laboratory: flags.laboratory ?? null,
        });
        // Whole or not at all: a reader never sees half a report.
        const pending = `${flags.out}.part`;
        await writeFile(pending, bytes);
        await rename(pending, flags.out);
        output.say(`${tests.length} ${tests.length === 1 ? 'test' : 'tests'}: ${flags.out}`);
      } finally {
        await records.close();
      }
    });
}
