import { rename, writeFile } from 'node:fs/promises';
import { Command } from 'commander';
import { LabError } from '../../errors.ts';
import { REPORT_FORMATS, renderReport } from '../../report/node/render.ts';
import type { ReportedTest } from '../../report/summary.ts';
import { assessTest } from '../../verdict/assessTest.ts';
import { chosenTests, noTestFits } from '../chooseTests.ts';
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

/** More single reports in one document than anybody prints. */
const MOST_TESTS = 5000;

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

const tooMany = (): LabError =>
  new LabError('too-large', `a report must have at most ${MOST_TESTS} tests, got more; narrow them with --where`, {
    input: '--where',
  });

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
        const tests: ReportedTest[] = [];
        for await (const test of chosenTests(records, flags)) {
          if (tests.length === MOST_TESTS) throw tooMany();
          const readings = await records.readingsOf(test.id);
          tests.push({ test, readings, assessment: assessTest(test, readings) });
        }
        if (tests.length === 0) throw noTestFits(flags);
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
