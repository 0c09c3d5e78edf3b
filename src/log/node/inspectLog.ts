import { TextDecoder } from 'node:util';
import { LabError } from '../../errors.ts';
import { foldHeader, type HandMapping, recognisedHeaders } from '../columns.ts';
import { assembleRecords, type RawRecord } from '../recordLines.ts';
import { cellsOfRecords } from './cellsOfRecords.ts';
import { encodingFromStart, type LogEncoding, textReader } from './encoding.ts';
import type { LogSource } from './logSource.ts';

/** How a log file is written, found before a row of it is read. */
export interface LogInspection {
  readonly name: string;
  readonly encoding: LogEncoding;
  readonly delimiter: string;
  readonly lineBreak: '\n' | '\r';
  /** Physical line the header row begins on, from 1. */
  readonly headerLine: number;
  /** Number of the first line below the header row. */
  readonly firstRowLine: number;
  readonly headers: readonly string[];
  /** Header row as the file has it. */
  readonly rawHeader: string;
  /** The first rows, for a preview and to see which decimal mark is used. */
  readonly sampleRows: readonly (readonly string[])[];
}

const SAMPLE_BYTES = 256 * 1024;
const ENOUGH_FOR_ENCODING = 4096;
const DELIMITERS = [',', ';', '\t', '|'] as const;
/** Title lines above the header row are passed over; a header further down is not looked for. */
const HEADER_WITHIN_RECORDS = 20;

interface Sample {
  readonly head: Uint8Array;
  readonly whole: boolean;
  readonly encoding: LogEncoding;
}

/** Reads the beginning, and goes on to the end only to know whether all of it is valid UTF-8. */
async function takeSample(source: LogSource): Promise<Sample> {
  const chunks: Uint8Array[] = [];
  let length = 0;
  let encoding: LogEncoding | null = null;
  let utf8: TextDecoder | null = new TextDecoder('utf-8', { fatal: true });
  let whole = true;
  for await (const chunk of source.open()) {
    const sampled = length < SAMPLE_BYTES;
    if (sampled) chunks.push(chunk);
    else whole = false;
    length += chunk.length;
    // A few bytes, as a slow upload brings them, tell no pattern yet.
    if (sampled && length >= ENOUGH_FOR_ENCODING) encoding = encodingFromStart(joined(chunks), source.name);
    if (encoding !== null && length >= SAMPLE_BYTES) {
      whole = false;
      break;
    }
    if (utf8 && encoding === null && !decodes(utf8, chunk)) utf8 = null;
  }
  if (utf8 && encoding === null && !decodes(utf8, null)) utf8 = null;
  if (length < ENOUGH_FOR_ENCODING) encoding = encodingFromStart(joined(chunks), source.name);
  return { head: joined(chunks), whole, encoding: encoding ?? (utf8 ? 'utf-8' : 'windows-1252') };
}

const joined = (chunks: readonly Uint8Array[]): Uint8Array =>
  chunks.length === 1 && chunks[0] ? chunks[0] : Buffer.concat(chunks);

function decodes(decoder: TextDecoder, chunk: Uint8Array | null): boolean {
  try {
    if (chunk) decoder.decode(chunk, { stream: true });
    else decoder.decode();
    return true;
  } catch {
    return false;
  }
}

function sampleLines({ head, whole, encoding }: Sample): { lines: string[]; lineBreak: '\n' | '\r' } {
  const reader = textReader(encoding);
  const text = (reader.read(head) + (whole ? reader.end() : '')).replace(/^\uFEFF/, '');
  const lineBreak = text.includes('\n') || !text.includes('\r') ? '\n' : '\r';
  const lines = text.split(lineBreak).map((line) => (line.endsWith('\r') ? line.slice(0, -1) : line));
  if (!whole && lines.length > 1) lines.pop();
  return { lines, lineBreak };
}

interface Layout {
  readonly delimiter: string;
  readonly header: RawRecord;
  readonly headers: readonly string[];
  readonly recognised: number;
  readonly records: readonly RawRecord[];
  readonly headerIndex: number;
}

function recordsOf(lines: readonly string[], delimiter: string): RawRecord[] {
  const assembler = assembleRecords(delimiter, null);
  return [...lines.flatMap((line) => assembler.line(line)), ...assembler.end()];
}

/** The likeliest header row for one delimiter: the one with most headers that mean something. */
function layoutFor(lines: readonly string[], delimiter: string, handHeaders: ReadonlySet<string>): Layout | null {
  const records = recordsOf(lines, delimiter);
  let best: Layout | null = null;
  let looked = 0;
  for (const [headerIndex, header] of records.entries()) {
    if (header.problem || header.raw.trim() === '' || /^sep=.$/i.test(header.raw)) continue;
    if (looked++ >= HEADER_WITHIN_RECORDS) break;
    const headers = cellsOfRecords([header.raw], delimiter)[0] ?? [];
    const byHand = headers.filter((text) => handHeaders.has(foldHeader(text))).length;
    const recognised = Math.max(recognisedHeaders(headers), byHand);
    if (!best || recognised > best.recognised) best = { delimiter, header, headers, recognised, records, headerIndex };
  }
  return best;
}

function bestLayout(lines: readonly string[], handHeaders: ReadonlySet<string>): Layout | null {
  const declared = /^sep=(.)$/i.exec(lines[0]?.trim() ?? '')?.[1];
  const layouts = (declared ? [declared] : DELIMITERS)
    .map((delimiter) => layoutFor(lines, delimiter, handHeaders))
    .filter((layout) => layout !== null);
  const score = (layout: Layout): number => layout.recognised * 1000 + layout.headers.length;
  return layouts.reduce<Layout | null>((a, b) => (a && score(a) >= score(b) ? a : b), null);
}

/**
 * Looks at a log before its rows are read: encoding, delimiter, header row, first rows.
 * @throws LabError `not-a-log` for a file that is empty or no text
 */
export async function inspectLog(source: LogSource, byHand: readonly HandMapping[] = []): Promise<LogInspection> {
  const sample = await takeSample(source);
  const { lines, lineBreak } = sampleLines(sample);
  const layout = bestLayout(lines, new Set(byHand.map((mapping) => foldHeader(mapping.header))));
  if (!layout) {
    throw new LabError(
      'not-a-log',
      `log "${source.name}" must have a header row, got ${source.bytes === 0 ? 'an empty file' : 'only blank lines'}`,
      {
        input: source.name,
      },
    );
  }
  const { header, headers, records, headerIndex, delimiter } = layout;
  const below = records.slice(headerIndex + 1).filter((record) => !record.problem);
  const sampleRows = cellsOfRecords(
    below.map((record) => record.raw),
    delimiter,
  ).filter((cells) => cells !== null);
  return {
    name: source.name,
    encoding: sample.encoding,
    delimiter,
    lineBreak,
    headerLine: header.line,
    firstRowLine: records[headerIndex + 1]?.line ?? header.line + header.raw.split('\n').length,
    headers,
    rawHeader: header.raw,
    sampleRows: sampleRows.slice(0, 2000),
  };
}
