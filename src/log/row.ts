import { LabError } from '../errors.ts';
import type { LogEntry } from '../records/laboratoryRecords.ts';
import { TestInput } from '../records/test.ts';
import { type CellProblem, hasControlCharacters } from './cells.ts';
import { logColumn } from './columnNames.ts';
import type { ColumnMap, MappedColumn } from './columns.ts';
import { type DateOrder, parseLogDate } from './dates.ts';
import type { DecimalMark } from './decimal.ts';
import { instrumentReading } from './instrumentReading.ts';
import { RowCells } from './rowCells.ts';
import { geometryOfRow } from './rowGeometry.ts';
import { problemsOfIssues } from './rowIssues.ts';
import { type Direction, directionOfWord, torqueWithDirection } from './torqueDirection.ts';

/** How the rows of one log are to be read. */
export interface RowOptions {
  readonly decimalMark: DecimalMark;
  readonly dateOrder: DateOrder;
  /** Standard uncertainty declared for angles that stand in the log without one, degrees; null: such rows are refused. */
  readonly angleStandardUncertaintyDeg: number | null;
}

/** A row that can be kept: the test, the angle it states, and the photos it names. */
export interface ReadRow {
  readonly ok: true;
  readonly entry: LogEntry;
  readonly photoNames: readonly string[];
}

export interface RefusedRow {
  readonly ok: false;
  /** Never empty; the first one is the one to show. */
  readonly problems: readonly CellProblem[];
}

function torqueOf(row: RowCells): {
  torqueMaxNm: number | null;
  torqueDirection: Direction | null;
  clockwiseSign: boolean;
} {
  const signedNm = row.number('torque_max_Nm');
  const word = row.text('torque_direction');
  const stated = word === null ? null : directionOfWord(word);
  if (word !== null && stated === null) {
    row.refuse(
      'torque_direction',
      'invalid-request',
      `torque direction must be ccw or cw (facing the driven end), got "${word}"`,
    );
  }
  if (signedNm === null) return { torqueMaxNm: null, torqueDirection: stated, clockwiseSign: false };
  try {
    return { ...torqueWithDirection(signedNm, stated, 'torque_max_Nm'), clockwiseSign: signedNm < 0 };
  } catch (error) {
    if (!(error instanceof LabError)) throw error;
    row.refuse('torque_direction', error.code, error.message);
    return { torqueMaxNm: Math.abs(signedNm), torqueDirection: stated, clockwiseSign: true };
  }
}

function dateOf(row: RowCells, order: DateOrder): string | null {
  const text = row.text('test_date');
  if (text === null) return null;
  const date = parseLogDate(text, order);
  if (date.ok) return date.isoDate;
  row.refuse('test_date', 'invalid-request', `test date must be a certain day: ${date.why}, got "${text}"`);
  return null;
}

/** A twist written with the sign of a clockwise torque is its magnitude. */
function twistOf(row: RowCells, clockwiseSign: boolean): number | null {
  const twistDeg = row.number('twist_fracture_deg');
  return twistDeg !== null && twistDeg < 0 && clockwiseSign ? -twistDeg : twistDeg;
}

function refuseControlCharacters(row: RowCells, columns: readonly MappedColumn[]): void {
  for (const { column } of columns) {
    if (hasControlCharacters(row.original(column))) {
      row.refuse(column, 'invalid-request', `${logColumn(column).label} must be plain text, got control characters`);
    }
  }
}

const photoNamesIn = (text: string | null): string[] =>
  (text ?? '')
    .split(/[;|\n]/)
    .map((name) => name.trim())
    .filter(Boolean);

/** Reads the rows of one log, whose columns stand as `map` says. */
export function rowReader(map: ColumnMap, options: RowOptions): (cells: readonly string[]) => ReadRow | RefusedRow {
  const columns = new Map(map.columns.map((column) => [column.column, column]));
  return (cells) => {
    const row = new RowCells(cells, columns, options.decimalMark);
    refuseControlCharacters(row, map.columns);
    const specimenId = row.text('specimen_id');
    if (specimenId === null) row.refuse('specimen_id', 'missing-value', 'specimen id must be given, got an empty cell');
    const testDate = dateOf(row, options.dateOrder);
    const geometry = geometryOfRow(row);
    const gaugeLengthMm = row.number('gauge_length_mm');
    const torque = torqueOf(row);
    const twistFractureDeg = twistOf(row, torque.clockwiseSign);
    const axialForceN = row.number('axial_force_N');
    const bendingMomentNm = row.number('bending_moment_Nm');
    const reading = instrumentReading(row, options.angleStandardUncertaintyDeg);
    if (row.problems.length > 0) return { ok: false, problems: row.problems };
    const parsed = TestInput.safeParse({
      specimenId,
      testDate,
      material: row.text('material'),
      heat: row.text('heat'),
      geometry,
      gaugeLengthMm,
      torqueMaxNm: torque.torqueMaxNm,
      torqueDirection: torque.torqueDirection,
      twistFractureDeg,
      axialForceN,
      bendingMomentNm,
      operator: row.text('operator'),
      remarks: row.text('remarks'),
    });
    if (!parsed.success) return { ok: false, problems: problemsOfIssues(parsed.error.issues, row) };
    return { ok: true, entry: { test: parsed.data, reading }, photoNames: photoNamesIn(row.text('photo')) };
  };
}
