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
