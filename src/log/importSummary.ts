import type { ErrorCode } from '../errors.ts';
import type { CellProblem } from './cells.ts';
import type { ColumnName } from './columnNames.ts';

/** One refused row: where it stands, and the first thing that is wrong with it. */
export interface Refusal {
  /** Physical line of the file, from 1 (the header is usually line 1). */
  readonly line: number;
  /** Canonical header; null when the row as a whole cannot be read. */
  readonly column: ColumnName | null;
  /** The cell as the file has it, cut after 200 characters. */
  readonly value: string;
  readonly code: ErrorCode;
  readonly message: string;
  /** What else is wrong with the row. */
  readonly also?: readonly CellProblem[];
}

/** A photo that a row names and that could not be kept; the row itself is kept. */
export interface PhotoProblem {
  readonly line: number;
  readonly specimenId: string;
  readonly photo: string;
  readonly code: ErrorCode;
  readonly message: string;
}

/** How the file was read, so that a reader can see what was assumed. */
export interface LogReading {
  readonly encoding: string;
  readonly delimiter: string;
  readonly decimalMark: 'point' | 'comma' | 'mixed';
  readonly headerLine: number;
  readonly columns: readonly { readonly header: string; readonly column: ColumnName; readonly unit: string | null }[];
}

/** What an import did: the one object `breakplane import --json` prints. */
export interface ImportSummary {
  /** Rows below the header that are not blank: stored + updated + unchanged + refused. */
  readonly rows: number;
  readonly stored: number;
  readonly updated: number;
  readonly unchanged: number;
  readonly refused: number;
  /** One entry a refused row, in the order of the file, at most `MOST_LISTED`. */
  readonly refusals: readonly Refusal[];
  readonly readingsAdded: number;
  /** Photos newly kept and handed on to be measured. */
  readonly photosQueued: number;
  /** Of these, the ones whose plane angle was measured before the import returned. */
  readonly photosMeasured: number;
  /** At most `MOST_LISTED`. */
  readonly photoProblems: readonly PhotoProblem[];
  readonly dryRun: boolean;
  /** Set when the import was stopped: the lines before it are kept, and the same import again goes on from there. */
  readonly stoppedAtLine: number | null;
  readonly log: LogReading;
  /** Sentences on what was assumed or left out. */
  readonly notes: readonly string[];
}

/** Lists in a summary end here; the counts stay exact and `onRefused` sees every row. */
export const MOST_LISTED = 10_000;
