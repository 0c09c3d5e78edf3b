/// <reference path="./fontkit.d.ts" />
import { join } from 'node:path';
import { openSync } from 'fontkit';
import { fontFolder } from './fonts.ts';

let regular: ReturnType<typeof openSync> | null = null;

/** Characters that layout treats specially and that no font draws. */
const INVISIBLE = /[\p{Zs}\n\t\u200b-\u200f\u202a-\u202e\u2066-\u2069]/u;

/**
 * The text with every character the embedded font cannot draw written out as its code point (`[U+1F529]`): PDF/A refuses
 * missing glyphs, and a character that silently vanishes would change a record.
 */
export function printable(text: string): string {
  regular ??= openSync(join(fontFolder(), 'DejaVuSans.ttf'));
  const font = regular;
  let out = '';
  for (const character of text) {
    const codePoint = character.codePointAt(0) ?? 0;
    if (INVISIBLE.test(character) || font.hasGlyphForCodePoint(codePoint)) out += character;
    else out += `[U+${codePoint.toString(16).toUpperCase().padStart(4, '0')}]`;
  }
  return out;
}

/** A value with every text in it made printable. */
export function printableValue<T>(value: T): T {
  if (typeof value === 'string') return printable(value) as T;
  if (Array.isArray(value)) return value.map((v) => printableValue(v)) as T;
  if (value !== null && typeof value === 'object') {
    return Object.fromEntries(Object.entries(value).map(([k, v]) => [k, printableValue(v)])) as T;
  }
  return value;
}
