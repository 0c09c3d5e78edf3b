/**
 * Physical lines → records of the log. A record is one line, or several when a quoted cell holds line breaks. A quote
 * that is never closed costs its own line only: the lines after it are read as if it had not been there.
 */
export interface RawRecord {
  /** Physical line of the file the record begins on, from 1. */
  readonly line: number;
  /** The record's own text, without the line break that ends it. */
  readonly raw: string;
  /** Set when the record cannot be read as cells. */
  readonly problem?: 'unclosed-quote' | 'too-long';
}

/** Limits that no row of a real log reaches; beyond them a quote is taken for one that was never closed. */
export const LONGEST_RECORD_CHARS = 65_536;
export const MOST_LINES_IN_A_RECORD = 100;

/** How far the reading of a record has come: cells so far, and whether a quoted cell is still open. */
interface Scan {
  readonly cells: number;
  readonly open: boolean;
}

const QUOTE = 34;
const SPACE = 32;
const FRESH: Scan = { cells: 1, open: false };

/** Counts cells by the quoting rules of RFC 4180, with a stray quote read as csv-parse reads it with `relax_quotes`. */
export function scanCells(text: string, delimiter: string, from: Scan = FRESH): Scan {
  const separator = delimiter.charCodeAt(0);
  let { cells, open } = from;
  let atStart = !open;
  for (let i = 0; i < text.length; i++) {
    const c = text.charCodeAt(i);
    if (open) {
      if (c !== QUOTE) continue;
      if (text.charCodeAt(i + 1) === QUOTE) i++;
      else open = false;
    } else if (c === separator) {
      cells++;
      atStart = true;
    } else if (c === QUOTE && atStart) {
      open = true;
      atStart = false;
    } else if (c !== SPACE) {
      atStart = false;
    }
  }
  return { cells, open };
}

export interface RecordAssembler {
  /** Takes the next physical line (without its line break); returns the records that are complete with it. */
  line(text: string): RawRecord[];
  /** The file has ended: whatever is left. */
  end(): RawRecord[];
}

/**
 * @param width cells of the header row; a record over several lines with another width has a stray quote. Null: not known.
 * @param firstLine number of the line that comes first
 */
export function assembleRecords(delimiter: string, width: number | null, firstLine = 1): RecordAssembler {
  /** Lines that are not yet part of a record; the scan of the record they begin has come to `scanned`. */
  let pending: string[] = [];
  let pendingFrom = firstLine;
  let scanned = 0;
  let scannedChars = 0;
  let scan = FRESH;

  const takeFirst = (lines: number): string => {
    const raw = lines === 1 ? (pending[0] ?? '') : pending.slice(0, lines).join('\n');
    pending = pending.slice(lines);
    pendingFrom += lines;
    scanned = 0;
    scannedChars = 0;
    scan = FRESH;
    return raw;
  };

  /** The next record, or null when more lines are needed to know. */
  const nextRecord = (ended: boolean): RawRecord | null => {
    const line = pendingFrom;
    do {
      const text = pending[scanned++];
      if (text === undefined) {
        scanned--;
        return ended ? { line, raw: takeFirst(1), problem: 'unclosed-quote' } : null;
      }
      scan = scanCells(text, delimiter, scan);
      scannedChars += text.length;
      if (scanned === 1 && scannedChars > LONGEST_RECORD_CHARS) {
        return { line, raw: takeFirst(1).slice(0, LONGEST_RECORD_CHARS), problem: 'too-long' };
      }
    } while (scan.open && scanned < MOST_LINES_IN_A_RECORD && scannedChars <= LONGEST_RECORD_CHARS);
    const whole = !scan.open && (scanned === 1 || width === null || scan.cells === width);
    return whole ? { line, raw: takeFirst(scanned) } : { line, raw: takeFirst(1), problem: 'unclosed-quote' };
  };

  const drain = (ended: boolean): RawRecord[] => {
    const records: RawRecord[] = [];
    while (pending.length > 0) {
      const record = nextRecord(ended);
      if (!record) break;
      records.push(record);
    }
    return records;
  };

  return {
    line(text) {
      if (pending.length === 0 && text.length <= LONGEST_RECORD_CHARS && !text.includes('"')) {
        return [{ line: pendingFrom++, raw: text }];
      }
      pending.push(text);
      return drain(false);
    },
    end: () => drain(true),
  };
}
