import { assembleRecords, LONGEST_RECORD_CHARS, type RawRecord } from '../recordLines.ts';
import { cellsOfRecords } from './cellsOfRecords.ts';
import { textReader } from './encoding.ts';
import type { LogInspection } from './inspectLog.ts';
import type { LogSource } from './logSource.ts';

/** A record of the log with its cells; null cells when it cannot be read (see `problem`). */
export interface LogRow extends RawRecord {
  readonly cells: readonly string[] | null;
  /** True for the last record of a file that does not end with a line break: it may have been cut off. */
  readonly endsFile: boolean;
}

/** Records handed on at a time: enough to make a transaction worth while, little enough to keep memory flat. */
const ROWS_AT_A_TIME = 500;

/** Physical lines of a text that comes in pieces; a line beyond the limit is cut, so that it cannot fill the memory. */
async function* linesOf(source: LogSource, layout: LogInspection): AsyncGenerator<{ lines: string[]; last: boolean }> {
  const reader = textReader(layout.encoding);
  let rest = '';
  let tooLong = false;
  let first = true;
  const take = (piece: string): string[] => {
    const text = first ? piece.replace(/^\uFEFF/, '') : piece;
    if (text !== '') first = false;
    const pieces = text.split(layout.lineBreak);
    const complete: string[] = [];
    for (const [i, part] of pieces.entries()) {
      if (!tooLong) rest = rest === '' ? part : rest + part;
      if (rest.length > LONGEST_RECORD_CHARS + 1) {
        rest = rest.slice(0, LONGEST_RECORD_CHARS + 1);
        tooLong = true;
      }
      if (i === pieces.length - 1) break;
      complete.push(rest.endsWith('\r') ? rest.slice(0, -1) : rest);
      rest = '';
      tooLong = false;
    }
    return complete;
  };
  for await (const chunk of source.open()) yield { lines: take(reader.read(chunk)), last: false };
  const lines = take(reader.end());
  if (rest !== '') lines.push(rest.endsWith('\r') ? rest.slice(0, -1) : rest);
  yield { lines, last: rest !== '' };
}

/** The rows below the header, some hundred at a time; memory does not grow with the length of the log. */
export async function* readRows(source: LogSource, layout: LogInspection): AsyncGenerator<LogRow[]> {
  const { delimiter } = layout;
  const assembler = assembleRecords(delimiter, layout.headers.length, layout.firstRowLine);
  let lineNumber = 0;
  let waiting: RawRecord[] = [];
  let endsWithoutBreak = false;

  const withCells = (records: readonly RawRecord[], atEnd: boolean): LogRow[] => {
    const readable = records.filter((record) => !record.problem);
    const cells = cellsOfRecords(
      readable.map((record) => record.raw),
      delimiter,
    );
    let next = 0;
    return records.map((record, i) => ({
      ...record,
      cells: record.problem ? null : (cells[next++] ?? null),
      endsFile: atEnd && endsWithoutBreak && i === records.length - 1,
    }));
  };

  for await (const { lines, last } of linesOf(source, layout)) {
    if (last) endsWithoutBreak = true;
    for (const line of lines) {
      lineNumber++;
      if (lineNumber < layout.firstRowLine) continue;
      waiting.push(...assembler.line(line));
      if (waiting.length > ROWS_AT_A_TIME) {
        // The newest record stays behind: only at the end is it known whether it is the last one.
        yield withCells(waiting.slice(0, -1), false);
        waiting = waiting.slice(-1);
      }
    }
  }
  waiting.push(...assembler.end());
  if (waiting.length > 0) yield withCells(waiting, true);
}
