import { logColumn } from '../columnNames.ts';
import { type ColumnMap, type HandMapping, mapColumns } from '../columns.ts';
import type { DateOrder } from '../dates.ts';
import { type DecimalMark, decimalMarkOf } from '../decimal.ts';
import type { LogReading } from '../importSummary.ts';
import type { RowOptions } from '../row.ts';
import type { LogInspection } from './inspectLog.ts';

/** What the laboratory declares about a log; what it does not declare is found in the file or refused, never guessed. */
export interface LogDeclarations {
  /** Columns mapped by hand; the others are found by their names. */
  readonly mapping?: readonly HandMapping[];
  readonly dateOrder?: DateOrder;
  readonly decimalMark?: 'point' | 'comma';
  /** Standard uncertainty of angles that stand in the log without one, degrees. */
  readonly angleStandardUncertaintyDeg?: number;
}

/** How the rows of a log will be read. */
export interface ImportPlan {
  readonly map: ColumnMap;
  readonly options: RowOptions;
  readonly reading: LogReading;
  readonly notes: readonly string[];
}

function decimalMarkIn(inspection: LogInspection, map: ColumnMap): DecimalMark {
  const places = map.columns
    .filter((column) => logColumn(column.column).quantity !== null)
    .map((column) => column.index);
  const cells = inspection.sampleRows.flatMap((row) => places.map((place) => row[place] ?? ''));
  return decimalMarkOf(cells, inspection.delimiter);
}

function notesOn(inspection: LogInspection, map: ColumnMap, decimalMark: DecimalMark): string[] {
  const notes: string[] = [];
  if (inspection.headerLine > 1) notes.push(`The header row was found on line ${inspection.headerLine}.`);
  if (inspection.encoding === 'windows-1252') {
    notes.push('The log is no valid UTF-8; it was read as Windows-1252. Check names with accents.');
  }
  for (const { header, unit, unitAssumed } of map.columns) {
    if (unitAssumed) notes.push(`Column "${header.trim()}" states no unit: ${unit} was assumed where a cell has none.`);
  }
  if (decimalMark === 'mixed') {
    notes.push('Both decimal comma and decimal point occur; numbers that could be read in two ways are refused.');
  }
  if (map.ignoredHeaders.length > 0) {
    notes.push(`Columns not read: ${map.ignoredHeaders.map((header) => `"${header.trim()}"`).join(', ')}.`);
  }
  return notes;
}

/** Decides how the rows are read, from the inspection and what was declared. @throws LabError `not-a-log`, `unknown-unit` */
export function planImport(inspection: LogInspection, declared: LogDeclarations = {}): ImportPlan {
  const map = mapColumns(inspection.headers, declared.mapping);
  const decimalMark = declared.decimalMark ?? decimalMarkIn(inspection, map);
  return {
    map,
    options: {
      decimalMark,
      dateOrder: declared.dateOrder ?? 'unknown',
      angleStandardUncertaintyDeg: declared.angleStandardUncertaintyDeg ?? null,
    },
    reading: {
      encoding: inspection.encoding,
      delimiter: inspection.delimiter,
      decimalMark,
      headerLine: inspection.headerLine,
      columns: map.columns.map(({ header, column, unit }) => ({ header: header.trim(), column, unit })),
    },
    notes: notesOn(inspection, map, decimalMark),
  };
}
