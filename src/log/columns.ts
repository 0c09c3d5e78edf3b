import { LabError } from '../errors.ts';
import { INSIDE_UNIT, parseUnit } from '../units.ts';
import { type ColumnName, LOG_COLUMNS, type LogColumn, REASON_HEADERS } from './columnNames.ts';
import { DIMENSION_COLUMNS } from './rowGeometry.ts';

/** Where one column of the log stands in this file, and in which unit its cells are. */
export interface MappedColumn {
  readonly column: ColumnName;
  /** Place in the row, from 0. */
  readonly index: number;
  /** Header as the file has it. */
  readonly header: string;
  /** Unit of cells that carry none; null for columns without a quantity. */
  readonly unit: string | null;
  /** True when neither header nor mapping states the unit, so that the inside unit is assumed. */
  readonly unitAssumed: boolean;
}

export interface ColumnMap {
  readonly columns: readonly MappedColumn[];
  /** Headers that no column was found for; their cells are not read. */
  readonly ignoredHeaders: readonly string[];
  /** Number of cells of the header row. */
  readonly width: number;
}

/** One column mapped by hand: header of the file → canonical column (null: leave it out), optionally with the unit of its cells. */
export interface HandMapping {
  readonly header: string;
  readonly column: ColumnName | null;
  readonly unit?: string;
}

/** Letters and digits only, lower case, without accents: `Prüf-Datum ` and `PRUF_DATUM` are the same header. */
export function foldHeader(text: string): string {
  return text
    .replaceAll('ß', 'ss')
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .replace(/[^\p{L}\p{N}⌀]+/gu, ' ')
    .trim();
}

interface NamedColumn {
  readonly column: LogColumn & { readonly name: ColumnName };
  readonly impliedUnit: string | null;
}

const NAMES: ReadonlyMap<string, NamedColumn> = new Map(
  LOG_COLUMNS.flatMap((column): [string, NamedColumn][] => [
    [foldHeader(column.name), { column, impliedUnit: column.quantity && INSIDE_UNIT[column.quantity] }],
    ...column.aliases.map((alias): [string, NamedColumn] => {
      const [name = '', impliedUnit = null] = alias.split('=');
      return [foldHeader(name), { column, impliedUnit }];
    }),
  ]),
);

interface Recognised extends NamedColumn {
  readonly unit: string | null;
}

function unitIn(text: string, column: LogColumn): string | null {
  if (!column.quantity) return null;
  try {
    return parseUnit(text, column.quantity);
  } catch {
    return null;
  }
}

/** `Torque (N·m)`, `diameter [in]`: a name with its unit in brackets. */
function withBracket(header: string): Recognised | null {
  const match = /^([^([{]*)[([{]([^)\]}]*)[)\]}](.*)$/.exec(header);
  if (!match) return null;
  const [, before = '', inside = '', after = ''] = match;
  const named = NAMES.get(foldHeader(`${before} ${after}`));
  if (!named) return null;
  const unit = unitIn(inside, named.column);
  if (unit === null && named.column.quantity && inside.trim() !== '') {
    throw new LabError(
      'unknown-unit',
      `column "${header}" must state a unit of ${named.column.quantity}, got "${inside}"`,
      {
        input: header,
        value: inside,
      },
    );
  }
  return { ...named, unit };
}

/** `diameter_in`, `Drehmoment in Nm`, `Torque, lbf·in`: a name followed by its unit. */
function withTrailingUnit(header: string): Recognised | null {
  const breaks = [...header.matchAll(/[\s_,;:/-]+/g)];
  for (const gap of breaks.reverse()) {
    const named = NAMES.get(foldHeader(header.slice(0, gap.index)));
    if (!named?.column.quantity) continue;
    const rest = header.slice(gap.index + gap[0].length);
    const unit = unitIn(rest, named.column) ?? unitIn(rest.replace(/^in[\s_]+/i, ''), named.column);
    if (unit !== null) return { ...named, unit };
  }
  return null;
}

/** No header of a log is longer; what is, is text and is not looked through for names and units. */
const LONGEST_HEADER_CHARS = 200;

/** What a header of the file means, or null when it means nothing to the import. @throws LabError `unknown-unit` */
export function recogniseHeader(
  header: string,
): { column: ColumnName; unit: string | null; unitAssumed: boolean } | null {
  const text = header.trim();
  if (text.length > LONGEST_HEADER_CHARS) return null;
  const plain = NAMES.get(foldHeader(text));
  const found: Recognised | null = plain ? { ...plain, unit: null } : (withBracket(text) ?? withTrailingUnit(text));
  if (!found) return null;
  const { column } = found;
  const stated = found.unit ?? found.impliedUnit;
  return {
    column: column.name,
    unit: column.quantity ? (stated ?? INSIDE_UNIT[column.quantity]) : null,
    unitAssumed: column.quantity !== null && stated === null,
  };
}

/** How many headers of a row mean something: how likely it is that this row is the header row. */
export function recognisedHeaders(cells: readonly string[]): number {
  return cells.filter((cell) => {
    try {
      return recogniseHeader(cell) !== null;
    } catch {
      return true;
    }
  }).length;
}

function mapByHand(index: number, header: string, hand: HandMapping): MappedColumn | null {
  const column = LOG_COLUMNS.find((candidate) => candidate.name === hand.column);
  if (!column) {
    if (hand.column === null) return null;
    throw new LabError(
      'invalid-request',
      `column for header "${header}" must be one of the canonical headers, got "${hand.column}"`,
      {
        input: header,
        value: hand.column,
      },
    );
  }
  if (!column.quantity) return { column: column.name, index, header, unit: null, unitAssumed: false };
  const own = hand.unit === undefined ? null : parseUnit(hand.unit, column.quantity, header);
  const stated = own ?? recogniseHeader(header)?.unit ?? null;
  return {
    column: column.name,
    index,
    header,
    unit: stated ?? INSIDE_UNIT[column.quantity],
    unitAssumed: own === null,
  };
}

/** Headers as a message shows them. */
function headersShown(headers: readonly string[]): string {
  const text = headers
    .map((header) => header.trim())
    .filter(Boolean)
    .join(', ');
  return text.length > 500 ? `${text.slice(0, 500)}…` : text || 'none';
}

/**
 * Finds the log's columns in a header row.
 * @throws LabError `not-a-log` when a required column is missing or two headers mean the same column; `unknown-unit`
 */
export function mapColumns(headers: readonly string[], byHand: readonly HandMapping[] = []): ColumnMap {
  const columns: MappedColumn[] = [];
  const ignoredHeaders: string[] = [];
  headers.forEach((header, index) => {
    const hand = byHand.find((mapping) => foldHeader(mapping.header) === foldHeader(header));
    const known = hand ? mapByHand(index, header, hand) : recogniseHeader(header);
    if (known) columns.push({ ...known, index, header });
    else if (header.trim() !== '' && !(REASON_HEADERS as readonly string[]).includes(header.trim()))
      ignoredHeaders.push(header);
  });
  for (const { column, header } of columns) {
    const twin = columns.find((other) => other.column === column && other.header !== header);
    const repeated = columns.filter((other) => other.column === column).length > 1;
    if (repeated) {
      throw new LabError(
        'not-a-log',
        `each column must stand once, got "${header}" and "${twin?.header ?? header}" for ${column}; map one of them by hand or rename it`,
        { input: column },
      );
    }
  }
  const stands = (name: ColumnName): boolean => columns.some((found) => found.column === name);
  const missing = LOG_COLUMNS.filter((c) => c.required && !stands(c.name)).map((c) => c.name);
  // The usual dimension is asked for; any other one tells the section as well.
  if (!DIMENSION_COLUMNS.some(stands)) missing.push('diameter_mm');
  if (missing.length > 0) {
    throw new LabError(
      'not-a-log',
      `log must have the columns ${missing.join(' and ')} (or another name of them), got the headers: ${headersShown(headers)}`,
      { input: missing[0] ?? 'header', value: headersShown(headers) },
    );
  }
  return { columns, ignoredHeaders, width: headers.length };
}
