import { LabError } from '../../errors.ts';

export type LogEncoding = 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252';

const startsWith = (bytes: Uint8Array, ...signature: number[]): boolean =>
  signature.every((byte, i) => bytes[i] === byte);

/** Share of zero bytes at even or odd places: Latin text in UTF-16 has one in nearly every pair. */
function zeroShare(bytes: Uint8Array, parity: 0 | 1): number {
  let zeros = 0;
  const pairs = Math.floor(bytes.length / 2);
  for (let i = parity; i < 2 * pairs; i += 2) if (bytes[i] === 0) zeros++;
  return pairs === 0 ? 0 : zeros / pairs;
}

/** What other files begin with, so that a wrong file is named instead of read as rows. */
const OTHER_FILES: readonly { readonly what: string; readonly signature: readonly number[] }[] = [
  { what: 'a spreadsheet workbook or a zip archive; save the sheet as CSV', signature: [0x50, 0x4b, 0x03, 0x04] },
  { what: 'an old spreadsheet workbook; save the sheet as CSV', signature: [0xd0, 0xcf, 0x11, 0xe0] },
  { what: 'a PDF', signature: [0x25, 0x50, 0x44, 0x46] },
  { what: 'a JPEG photo', signature: [0xff, 0xd8, 0xff] },
  { what: 'a PNG picture', signature: [0x89, 0x50, 0x4e, 0x47] },
  { what: 'a gzip archive', signature: [0x1f, 0x8b] },
];

/**
 * Guesses the encoding from the first bytes: byte-order mark, else the pattern of zero bytes, else null, which means
 * UTF-8 when the whole file is valid UTF-8 and Windows-1252 when it is not.
 * @throws LabError `not-a-log` for files that are no text
 */
export function encodingFromStart(head: Uint8Array, name: string): LogEncoding | null {
  if (startsWith(head, 0xef, 0xbb, 0xbf)) return 'utf-8';
  if (startsWith(head, 0xff, 0xfe)) return 'utf-16le';
  if (startsWith(head, 0xfe, 0xff)) return 'utf-16be';
  const other = OTHER_FILES.find(({ signature }) => startsWith(head, ...signature));
  if (other) {
    throw new LabError('not-a-log', `log "${name}" must be CSV text, got ${other.what}`, { input: name });
  }
  if (head.length >= 4) {
    const even = zeroShare(head, 0);
    const odd = zeroShare(head, 1);
    if (odd > 0.6 && even < 0.1) return 'utf-16le';
    if (even > 0.6 && odd < 0.1) return 'utf-16be';
  }
  if (head.includes(0)) {
    throw new LabError('not-a-log', `log "${name}" must be CSV text, got a file with zero bytes`, { input: name });
  }
  return null;
}

/**
 * Bytes 80 to 9F of Windows-1252 as the Encoding Standard maps them (https://encoding.spec.whatwg.org/#windows-1252).
 * Written out because TextDecoder of Node 20 reads them as the control characters of Latin-1.
 */
const FROM_80 = '€\u0081‚ƒ„…†‡ˆ‰Š‹Œ\u008dŽ\u008f\u0090‘’“”•–—˜™š›œ\u009džŸ';

/** Turns bytes into text piece by piece; `end` gives what is left at the end. */
export interface TextReader {
  read(bytes: Uint8Array): string;
  end(): string;
}

/** Reads text of a known encoding. Bytes that do not belong become U+FFFD (never in Windows-1252, where all belong). */
export function textReader(encoding: LogEncoding): TextReader {
  if (encoding === 'windows-1252') {
    const latin1 = new TextDecoder('latin1');
    const replace = (text: string): string =>
      text.replace(/[\u0080-\u009f]/g, (c) => FROM_80[c.charCodeAt(0) - 0x80] ?? c);
    return { read: (bytes) => replace(latin1.decode(bytes)), end: () => '' };
  }
  const decoder = new TextDecoder(encoding);
  return { read: (bytes) => decoder.decode(bytes, { stream: true }), end: () => decoder.decode() };
}
