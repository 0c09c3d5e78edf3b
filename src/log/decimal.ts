/** How a log writes numbers. `mixed`: both marks occur, so a number that could be read in two ways is refused. */
export type DecimalMark = 'point' | 'comma' | 'mixed';

const SPACES = /[\s\u00a0\u2009\u202f'’]/g;
const GROUPED_BY_SPACE = /^[+-]?\d{1,3}(?:[\s\u00a0\u2009\u202f'’]\d{3})+(?:[.,]\d+)?$/;

/** Which decimal mark a number can only have; null when it has none or could be read in two ways. */
export function decimalEvidence(text: string): 'point' | 'comma' | null {
  const number = /^[+-]?[\d.,]+/.exec(text.trim().replace(SPACES, ''))?.[0];
  if (number === undefined) return null;
  const points = number.split('.').length - 1;
  const commas = number.split(',').length - 1;
  if (points > 0 && commas > 0) return number.lastIndexOf('.') > number.lastIndexOf(',') ? 'point' : 'comma';
  if (points > 1) return 'comma';
  if (commas > 1) return 'point';
  if (points + commas === 0) return null;
  const [whole = '', decimals = ''] = number.replace(/^[+-]/, '').split(/[.,]/);
  const couldBeThousands = decimals.length === 3 && /^[1-9]\d{0,2}$/.test(whole);
  if (couldBeThousands) return null;
  return points === 1 ? 'point' : 'comma';
}

/**
 * The decimal mark of a log, from its number cells. Without any evidence the point, or the comma where cells are parted
 * by a semicolon (spreadsheets write a semicolon exactly where the comma is the decimal mark).
 */
export function decimalMarkOf(numberCells: Iterable<string>, delimiter: string): DecimalMark {
  let points = 0;
  let commas = 0;
  for (const cell of numberCells) {
    const evidence = decimalEvidence(cell);
    if (evidence === 'point') points++;
    else if (evidence === 'comma') commas++;
  }
  if (points > 0 && commas > 0) return 'mixed';
  if (points + commas > 0) return points > 0 ? 'point' : 'comma';
  return delimiter === ';' ? 'comma' : 'point';
}

const PLAIN = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/;
const THOUSANDS_BY_COMMA = /^[+-]?\d{1,3}(?:,\d{3})+(?:\.\d+)?$/;
const THOUSANDS_BY_POINT = /^[+-]?\d{1,3}(?:\.\d{3})+(?:,\d+)?$/;

export type ParsedNumber =
  | { readonly ok: true; readonly value: number }
  | { readonly ok: false; readonly why: 'not-a-number' | 'two-readings' };

const NOT_A_NUMBER: ParsedNumber = { ok: false, why: 'not-a-number' };

const plain = (text: string): ParsedNumber => {
  const value = PLAIN.test(text) ? Number(text) : Number.NaN;
  // No log means −0.
  return Number.isFinite(value) ? { ok: true, value: value === 0 ? 0 : value } : NOT_A_NUMBER;
};

/**
 * Reads a number as the log writes it. A mark that can only be the decimal mark is taken as such even where the log's
 * usual one is the other; `1.234` and `1,234` are read by the log's usual mark, and refused where there is none.
 */
export function parseLogNumber(text: string, mark: DecimalMark): ParsedNumber {
  let number = text.trim().replace(/[−–]/g, '-');
  if (/[\s\u00a0\u2009\u202f'’]/.test(number)) {
    if (!GROUPED_BY_SPACE.test(number)) return NOT_A_NUMBER;
    number = number.replace(SPACES, '');
  }
  const hasComma = number.includes(',');
  if (!hasComma && !number.includes('.')) return plain(number);
  const evidence = decimalEvidence(number);
  if (evidence === null && mark === 'mixed' && /[.,]\d{3}$/.test(number)) return { ok: false, why: 'two-readings' };
  const decimal = evidence ?? mark;
  if (decimal === 'comma') {
    if (THOUSANDS_BY_POINT.test(number)) return plain(number.replaceAll('.', '').replace(',', '.'));
    return number.includes('.') ? NOT_A_NUMBER : plain(number.replace(',', '.'));
  }
  if (THOUSANDS_BY_COMMA.test(number)) return plain(number.replaceAll(',', ''));
  return hasComma ? NOT_A_NUMBER : plain(number);
}
