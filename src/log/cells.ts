import { type ErrorCode, LabError } from '../errors.ts';
import { INSIDE_UNIT, type Quantity, toInside, UNITS_OF } from '../units.ts';
import { type ColumnName, logColumn } from './columnNames.ts';
import type { MappedColumn } from './columns.ts';
import { type DecimalMark, parseLogNumber } from './decimal.ts';

/** What is wrong with one cell. `column` is the canonical header, `value` the cell as the file has it. */
export interface CellProblem {
  readonly column: ColumnName | null;
  readonly value: string;
  readonly code: ErrorCode;
  /** What must hold, then what came, with unit. */
  readonly message: string;
}

const EMPTY_WORDS = /^(?:-+|–|—|n\/a|n\.a\.|na)?$/i;

/** True for cells that say "nothing recorded": blank, a dash, n/a. */
export const isEmptyCell = (text: string): boolean => EMPTY_WORDS.test(text);

// biome-ignore lint/suspicious/noControlCharactersInRegex: finding them is the purpose
const CONTROL = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f]/;

/** True for characters that no laboratory types and that hide text from readers. */
export const hasControlCharacters = (text: string): boolean => CONTROL.test(text);

const NUMBER_THEN_UNIT =
  /^([+-−–]?\s*(?:\d(?:[\d.,'’\s\u00a0\u2009\u202f]*\d)?[.,]?|[.,]\d+)(?:[eE][+-]?\d+)?)\s*(\D.*)?$/su;

export interface NumberCell {
  readonly ok: true;
  /** In the unit used inside. */
  readonly value: number;
}

const problem = (column: MappedColumn, value: string, code: ErrorCode, message: string): CellProblem => ({
  column: column.column,
  value,
  code,
  message,
});

/**
 * A number cell, `12.7`, `12,7 mm`, `85 lbf·in`, in the unit used inside.
 * @param text the trimmed cell, not empty
 */
export function numberCell(text: string, column: MappedColumn, mark: DecimalMark): NumberCell | CellProblem {
  const { label, quantity } = logColumn(column.column);
  const plain = parseLogNumber(text, mark);
  const match = plain.ok ? null : NUMBER_THEN_UNIT.exec(text);
  const parsed = plain.ok ? plain : parseLogNumber(match?.[1] ?? '', mark);
  if (!parsed.ok) {
    if (parsed.why === 'two-readings') {
      const message = `${label} must be written with one decimal mark throughout the log, got "${text}", which could be a thousand or a decimal`;
      return problem(column, text, 'not-a-number', message);
    }
    return problem(column, text, 'not-a-number', `${label} must be a number${unitPhrase(quantity)}, got "${text}"`);
  }
  if (!quantity) return { ok: true, value: parsed.value };
  return inInsideUnit(
    parsed.value,
    match?.[2]?.trim() || (column.unit ?? INSIDE_UNIT[quantity]),
    quantity,
    text,
    column,
  );
}

const unitPhrase = (quantity: Quantity | null): string => (quantity ? ` of ${INSIDE_UNIT[quantity]}` : '');

function inInsideUnit(
  value: number,
  unit: string,
  quantity: Quantity,
  text: string,
  column: MappedColumn,
): NumberCell | CellProblem {
  if (unit === INSIDE_UNIT[quantity]) return { ok: true, value };
  try {
    return { ok: true, value: toInside(value, quantity, unit) };
  } catch (error) {
    if (!(error instanceof LabError)) throw error;
    const { label } = logColumn(column.column);
    const message = `${label} must be in one of the units ${UNITS_OF[quantity].join(', ')}, got "${text}"`;
    return problem(column, text, error.code, message);
  }
}
