import { createWriteStream, type WriteStream } from 'node:fs';
import { finished } from 'node:stream/promises';
import { Command } from 'commander';
import { LabError } from '../../errors.ts';
import type { DateOrder } from '../../log/dates.ts';
import type { ImportSummary } from '../../log/importSummary.ts';
import { importLog } from '../../log/node/importLog.ts';
import { logFile } from '../../log/node/logSource.ts';
import { openPhotoSource } from '../../log/node/openPhotoSource.ts';
import type { LogDeclarations } from '../../log/node/planImport.ts';
import { refusedRowLine, refusedRowsHeader } from '../../log/refusedRows.ts';
import type { CommandContext } from '../context.ts';
import { EXIT } from '../exitStatus.ts';
import { showProgress } from '../progress.ts';
import { dataDirOption, numberOf } from './options.ts';

interface ImportFlags {
  readonly photos?: string;
  readonly data: string;
  readonly dryRun?: boolean;
  readonly refused?: string;
  readonly dateOrder?: string;
  readonly decimal?: string;
  readonly angleU?: string;
  readonly json?: boolean;
}

const EXAMPLES = `
Examples:
  breakplane import log.csv --dry-run
  breakplane import log.csv --photos photos/ --refused refused.csv
  breakplane import log.csv --photos photos.zip --data /srv/torsion-lab --json

Rows that cannot be taken over are listed with line, column and reason; all others go in. The same log twice changes
nothing. Exit status: 0 every row went in, 3 rows were refused, 2 wrong usage or no log.`;

const oneOf = <T extends string>(option: string, text: string | undefined, allowed: readonly T[]): T | undefined => {
  if (text === undefined) return undefined;
  const found = allowed.find((word) => word === text);
  if (found !== undefined) return found;
  throw new LabError('usage', `${option} must be ${allowed.join(' or ')}, got "${text}"`, {
    input: option,
    value: text,
  });
};

function declarationsOf(flags: ImportFlags): LogDeclarations {
  const dateOrder = oneOf<DateOrder>('--date-order', flags.dateOrder, ['dmy', 'mdy', 'ymd']);
  const decimalMark = oneOf('--decimal', flags.decimal, ['point', 'comma']);
  return {
    ...(dateOrder !== undefined && { dateOrder }),
    ...(decimalMark !== undefined && { decimalMark }),
    ...(flags.angleU !== undefined && { angleStandardUncertaintyDeg: numberOf('--angle-u', flags.angleU) }),
  };
}

/** Writes refused rows to a new file as they come. */
function refusedFile(path: string | undefined) {
  let stream: WriteStream | null = null;
  return {
    add(row: Parameters<typeof refusedRowLine>[0], log: { rawHeader: string; delimiter: string }): void {
      if (path === undefined) return;
      if (stream === null) {
        stream = createWriteStream(path);
        // A byte-order mark makes spreadsheets read UTF-8.
        stream.write(`\uFEFF${refusedRowsHeader(log.rawHeader, log.delimiter)}\r\n`);
      }
      stream.write(`${refusedRowLine(row, log.delimiter)}\r\n`);
    },
    async end(): Promise<void> {
      if (stream === null) return;
      stream.end();
      await finished(stream);
    },
  };
}

function summaryLines(summary: ImportSummary, flags: ImportFlags): string[] {
  const verb = summary.dryRun ? 'would be stored' : 'stored';
  const lines = [
    `${summary.rows} rows: ${summary.stored} ${verb}, ${summary.updated} updated, ${summary.unchanged} unchanged, ${summary.refused} refused`,
  ];
  if (summary.photosQueued > 0) lines.push(`${summary.photosQueued} photos kept, ${summary.photosMeasured} measured`);
  for (const r of summary.refusals.slice(0, 50))
    lines.push(`  line ${r.line}${r.column === null ? '' : `, ${r.column}`}: ${r.message}`);
  if (summary.refusals.length > 50) lines.push(`  and ${summary.refused - 50} more; --refused FILE writes all of them`);
  for (const p of summary.photoProblems.slice(0, 50)) lines.push(`  line ${p.line}, photo "${p.photo}": ${p.message}`);
  for (const note of summary.notes) lines.push(`  ${note}`);
  if (summary.refused > 0 && flags.refused !== undefined)
    lines.push(`Refused rows, ready to be mended: ${flags.refused}`);
  return lines;
}

/** `breakplane import`: a test log, with the photos its rows name, into the laboratory's data folder. */
export function importCommand(context: CommandContext): Command {
  const { ports, output } = context;
  return new Command('import')
    .description('Take over a test log (CSV) and the photos named in it')
    .argument('<log>', 'CSV with a header row')
    .option('--photos <dir|zip>', 'folder or zip archive with the photos named in the log')
    .addOption(dataDirOption(ports))
    .option('--dry-run', 'only say what would happen')
    .option('--refused <file>', 'write the refused rows with their reasons into this CSV')
    .option('--date-order <dmy|mdy|ymd>', 'order of day, month and year in dates such as 03/04/2026')
    .option('--decimal <point|comma>', 'decimal mark of the log (found in the log when not given)')
    .option('--angle-u <degrees>', 'standard uncertainty of angles that stand in the log without one')
    .option('--json', 'one JSON object')
    .addHelpText('after', EXAMPLES)
    .action(async (log: string, flags: ImportFlags) => {
      const declared = declarationsOf(flags);
      const source = await logFile(log);
      const photos = flags.photos === undefined ? null : await openPhotoSource(flags.photos);
      const dryRun = flags.dryRun === true;
      const records = await ports.openRecords(flags.data);
      const pool = photos === null || dryRun ? null : ports.createMeasurePool({});
      const refused = refusedFile(flags.refused);
      let progress: ReturnType<typeof showProgress> | null = null;
      try {
        const summary = await importLog({
          source,
          photos,
          records,
          pool,
          dryRun,
          declared,
          onRefused: refused.add,
          onProgress: ({ phase, total }) => {
            if (phase !== 'photos' || total === null) return;
            progress ??= showProgress(output, 'photos', total);
            progress.step();
          },
        });
        if (flags.json) output.line(JSON.stringify(summary));
        else for (const line of summaryLines(summary, flags)) output.line(line);
        if (summary.refused > 0) context.status = EXIT.partly;
      } finally {
        (progress as ReturnType<typeof showProgress> | null)?.end();
        await refused.end();
        await pool?.close();
        await records.close();
        photos?.close();
      }
    });
}
