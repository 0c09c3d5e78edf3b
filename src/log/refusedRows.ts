import { REASON_HEADERS } from './columnNames.ts';
import type { Refusal } from './importSummary.ts';

/** A refused row with its own text, for the CSV that is mended and imported again. */
export interface RefusedText {
  readonly refusal: Refusal;
  /** The row as the file has it. */
  readonly raw: string;
  /** True when the text cannot stand as a row (a quote without end): it becomes one quoted cell. */
  readonly malformed: boolean;
}

const quoted = (text: string, delimiter: string): string =>
  text.includes('"') || text.includes(delimiter) || /[\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;

const messagesOf = (refusal: Refusal): string =>
  [refusal.message, ...(refusal.also ?? []).map((problem) => problem.message)].join(' | ');

/**
 * The CSV of refused rows: reason columns first, then the header and each row exactly as the file has them. Reasons come
 * first so that a row with too many or too few cells still stands under its headers up to the fault.
 */
export function refusedRowsHeader(rawHeader: string, delimiter: string): string {
  return [...REASON_HEADERS, rawHeader].join(delimiter);
}

/** One line of the CSV of refused rows; see `refusedRowsHeader`. */
export function refusedRowLine({ refusal, raw, malformed }: RefusedText, delimiter: string): string {
  const reasons = [String(refusal.line), refusal.column ?? '', refusal.code, messagesOf(refusal)];
  const cells = reasons.map((text) => quoted(text, delimiter));
  return [...cells, malformed ? `"${raw.replaceAll('"', '""')}"` : raw].join(delimiter);
}
