import { LabError } from '../../errors.ts';
import type { MeasurePool } from '../../photo/measurement.ts';
import type { LaboratoryRecords, LogEntry, Photo } from '../../records/laboratoryRecords.ts';
import type { CellProblem } from '../cells.ts';
import { type ImportSummary, MOST_LISTED, type PhotoProblem, type Refusal } from '../importSummary.ts';
import type { RefusedText } from '../refusedRows.ts';
import { rowReader } from '../row.ts';
import { importPhotos, type WantedPhoto } from './importPhotos.ts';
import { inspectLog } from './inspectLog.ts';
import { keepEntries } from './keepEntries.ts';
import type { LogSource } from './logSource.ts';
import type { PhotoSource } from './photoSource.ts';
import { type ImportPlan, type LogDeclarations, planImport } from './planImport.ts';
import { type LogRow, readRows } from './readRows.ts';
import { type KeptSpecimen, photosFoundBySpecimen } from './unnamedPhotos.ts';

export interface ImportProgress {
  readonly phase: 'rows' | 'photos';
  readonly done: number;
  /** Photos in all; null for rows, whose number is known only at the end. */
  readonly total: number | null;
}

export interface ImportLog {
  readonly source: LogSource;
  /** Folder or archive with the photos that rows name; null when there is none. */
  readonly photos: PhotoSource | null;
  /** Where the rows are kept; null only in a dry run. */
  readonly records: LaboratoryRecords | null;
  /** Measures the photos before the import returns; null: they are only kept, see `onPhotoKept`. */
  readonly pool: MeasurePool | null;
  readonly dryRun: boolean;
  readonly declared?: LogDeclarations;
  readonly onProgress?: (progress: ImportProgress) => void;
  /** Sees every refused row with its own text, once the header row is known. */
  readonly onRefused?: (row: RefusedText, log: { readonly rawHeader: string; readonly delimiter: string }) => void;
  readonly onPhotoKept?: (photo: Photo, testId: string) => void | Promise<void>;
  readonly temporaryDir?: string;
  /** Stops the import between two batches of rows. */
  readonly signal?: AbortSignal;
}

/** Rows seen and what became of them; the lists stop at `MOST_LISTED`, the counts do not. */
class Tally {
  rows = 0;
  stored = 0;
  updated = 0;
  unchanged = 0;
  refused = 0;
  readingsAdded = 0;
  readonly refusals: Refusal[] = [];
  readonly photoProblems: PhotoProblem[] = [];
  readonly wanted: WantedPhoto[] = [];
  /** Kept rows, as far as a photo may belong to them. */
  readonly kept: KeptSpecimen[] = [];
  stoppedAtLine: number | null = null;
}

/** Lines of a log that state the same specimen and day as an earlier line. */
const identityOf = (entry: LogEntry): string => `${entry.test.specimenId}\u0000${entry.test.testDate ?? ''}`;

/** A list of refusals is read by people and held in memory: long cells are cut in it; the CSV of refused rows has all of them. */
const LONGEST_VALUE_CHARS = 200;
const LONGEST_MESSAGE_CHARS = 1000;
const cut = (text: string, chars: number): string => (text.length > chars ? `${text.slice(0, chars)}…` : text);
const listed = (problem: CellProblem): CellProblem => ({
  ...problem,
  value: cut(problem.value, LONGEST_VALUE_CHARS),
  message: cut(problem.message, LONGEST_MESSAGE_CHARS),
});

const refusalOf = (line: number, problems: readonly CellProblem[]): Refusal => {
  const [first, ...also] = problems.map(listed) as [CellProblem, ...CellProblem[]];
  return { line, ...first, ...(also.length > 0 && { also }) };
};

const PROBLEM_MESSAGE = {
  'unclosed-quote': 'a quote is opened and never closed; close it or take it out',
  'too-long': 'the row is longer than any row of a test log; check its quotes',
} as const;

/** Why a record does not stand under the header: not readable as cells, too many cells, or cut off; null when it does. */
function misfit(row: LogRow, headers: number): string | null {
  if (row.problem) return PROBLEM_MESSAGE[row.problem];
  if (row.cells === null) return 'the row cannot be read as cells; check its quotes';
  if (row.cells.slice(headers).some((cell) => cell.trim() !== '')) {
    return `the row must have ${headers} cells as the header, got ${row.cells.length}; quote cells that hold the separator`;
  }
  if (row.endsFile && row.cells.length < headers) {
    return `the row must have ${headers} cells as the header, got ${row.cells.length} and then the end of the file; it may have been cut off`;
  }
  return null;
}

const misfitRefusal = (row: LogRow, message: string): Refusal => ({
  line: row.line,
  column: null,
  value: cut(row.raw, LONGEST_VALUE_CHARS),
  code: 'invalid-request',
  message,
});

interface KeepableRow {
  readonly row: LogRow;
  readonly entry: LogEntry;
  readonly photoNames: readonly string[];
}

/**
 * Imports a test log: every row that can be kept is kept, some hundred at a time in one transaction each; every other row
 * is refused with line, column and reason, and costs only itself. The same log twice changes nothing. Of the rows read, only
 * specimen id and date are held (to find repeated ones), what was refused (up to `MOST_LISTED`), and the photos named.
 * @throws LabError `not-a-log` for a file without a header row that can be read
 */
export async function importLog(work: ImportLog): Promise<ImportSummary> {
  const { source, records, dryRun } = work;
  const inspection = await inspectLog(source, work.declared?.mapping);
  const plan = planImport(inspection, work.declared);
  const tally = new Tally();
  const header = { rawHeader: inspection.rawHeader, delimiter: inspection.delimiter };
  const seen = new Map<string, number>();

  const refuse = (row: LogRow, refusal: Refusal): void => {
    tally.refused += 1;
    if (tally.refusals.length < MOST_LISTED) tally.refusals.push(refusal);
    work.onRefused?.({ refusal, raw: row.raw, malformed: row.cells === null }, header);
  };

  const read = rowReader(plan.map, plan.options);
  for await (const batch of readRows(source, inspection)) {
    if (work.signal?.aborted) {
      tally.stoppedAtLine = batch[0]?.line ?? null;
      break;
    }
    const keepable: KeepableRow[] = [];
    for (const row of batch) {
      if (!row.problem && row.raw.trim() === '') continue;
      tally.rows += 1;
      const why = misfit(row, inspection.headers.length);
      if (why !== null || row.cells === null) {
        refuse(row, misfitRefusal(row, why ?? ''));
        continue;
      }
      const outcome = read(row.cells);
      if (!outcome.ok) {
        refuse(row, refusalOf(row.line, outcome.problems));
        continue;
      }
      const identity = identityOf(outcome.entry);
      const earlier = seen.get(identity);
      if (earlier !== undefined) {
        const { specimenId, testDate } = outcome.entry.test;
        refuse(row, {
          line: row.line,
          column: 'specimen_id',
          value: specimenId,
          code: 'already-exists',
          message: `specimen id and test date must occur once in a log, got "${specimenId}" (${testDate ?? 'no date'}) again; it stands on line ${earlier}`,
        });
        continue;
      }
      seen.set(identity, row.line);
      keepable.push({ row, entry: outcome.entry, photoNames: outcome.photoNames });
    }
    const kept = await keepEntries(
      records,
      keepable.map((k) => k.entry),
      dryRun,
    );
    kept.forEach((answer, i) => {
      const { row, entry, photoNames } = keepable[i] as KeepableRow;
      if (answer instanceof LabError) {
        refuse(row, {
          line: row.line,
          column: null,
          value: entry.test.specimenId,
          code: answer.code,
          message: answer.message,
        });
        return;
      }
      tally[answer.outcome] += 1;
      if (answer.readingAdded) tally.readingsAdded += 1;
      const specimen = {
        line: row.line,
        specimenId: entry.test.specimenId,
        testId: answer.testId,
        diameterMm: 'diameterMm' in entry.test.geometry ? entry.test.geometry.diameterMm : null,
      };
      if (work.photos !== null) tally.kept.push({ ...specimen, namesPhotos: photoNames.length > 0 });
      for (const name of photoNames) tally.wanted.push({ ...specimen, name });
    });
    work.onProgress?.({ phase: 'rows', done: tally.rows, total: null });
  }

  const photos = { queued: 0, measured: 0 };
  const notes = [...plan.notes];
  const found = work.photos === null ? [] : photosFoundBySpecimen(work.photos.files, tally.wanted, tally.kept);
  const wanted = [...tally.wanted, ...found];
  for (const { name, message } of work.photos?.refused ?? []) notes.push(`"${name}" was left out: ${message}`);
  if (found.length > 0) {
    notes.push(
      found.length === 1
        ? 'One photo was matched by the specimen id in its file name.'
        : `${found.length} photos were matched by the specimen id in their file names.`,
    );
  }
  if (work.photos !== null && records !== null && !dryRun && wanted.length > 0) {
    const done = await importPhotos({
      wanted,
      source: work.photos,
      records,
      pool: work.pool,
      ...(work.onPhotoKept && { onPhotoKept: work.onPhotoKept }),
      onProblem: (problem) => {
        if (tally.photoProblems.length < MOST_LISTED) tally.photoProblems.push(problem);
      },
      onProgress: (count, total) => work.onProgress?.({ phase: 'photos', done: count, total }),
      signal: work.signal,
      temporaryDir: work.temporaryDir,
    });
    photos.queued = done.queued;
    photos.measured = done.measured;
  } else if (work.photos === null && tally.wanted.length > 0) {
    notes.push(`${tally.wanted.length} photos are named in the log; give their folder or archive to take them over.`);
  }

  return {
    rows: tally.rows,
    stored: tally.stored,
    updated: tally.updated,
    unchanged: tally.unchanged,
    refused: tally.refused,
    refusals: tally.refusals.sort((a, b) => a.line - b.line),
    readingsAdded: tally.readingsAdded,
    photosQueued: photos.queued,
    photosMeasured: photos.measured,
    photoProblems: tally.photoProblems.sort((a, b) => a.line - b.line),
    dryRun,
    stoppedAtLine: tally.stoppedAtLine,
    log: plan.reading,
    notes,
  };
}
