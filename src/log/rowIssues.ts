import type { z } from 'zod';
import { INSIDE_UNIT } from '../units.ts';
import type { CellProblem } from './cells.ts';
import { type ColumnName, logColumn } from './columnNames.ts';
import type { RowCells } from './rowCells.ts';

type Issue = z.core.$ZodIssue;

/** Which column a field of a test comes from. */
const COLUMN_OF: Readonly<Record<string, ColumnName>> = {
  specimenId: 'specimen_id',
  testDate: 'test_date',
  material: 'material',
  heat: 'heat',
  geometry: 'section',
  'geometry.section': 'section',
  'geometry.diameterMm': 'diameter_mm',
  'geometry.boreMm': 'bore_mm',
  'geometry.sideMm': 'side_mm',
  'geometry.widthMm': 'width_mm',
  'geometry.heightMm': 'height_mm',
  'geometry.wallMm': 'wall_mm',
  'geometry.majorAxisMm': 'major_axis_mm',
  'geometry.minorAxisMm': 'minor_axis_mm',
  'geometry.acrossFlatsMm': 'across_flats_mm',
  gaugeLengthMm: 'gauge_length_mm',
  torqueMaxNm: 'torque_max_Nm',
  torqueDirection: 'torque_direction',
  twistFractureDeg: 'twist_fracture_deg',
  axialForceN: 'axial_force_N',
  bendingMomentNm: 'bending_moment_Nm',
  operator: 'operator',
  remarks: 'remarks',
};

function expectation(issue: Issue, unit: string): string {
  if (issue.code === 'too_small' && issue.origin !== 'string') {
    return `must be ${issue.inclusive === false ? '>' : '≥'} ${issue.minimum}${unit}`;
  }
  if (issue.code === 'too_big') {
    return issue.origin === 'string'
      ? `must have at most ${issue.maximum} characters`
      : `must be ${issue.inclusive === false ? '<' : '≤'} ${issue.maximum}${unit}`;
  }
  return issue.message;
}

/** What came: the cell as it stands, shortened; with the unit where the cell has none. */
function came(text: string, unit: string): string {
  if (text.length > 60) return `${text.length} characters`;
  return /^[+-−–]?[\d.,\s]+$/u.test(text) ? `${text}${unit}` : `"${text}"`;
}

function problemOf(issue: Issue, row: RowCells): CellProblem {
  const column = COLUMN_OF[issue.path.join('.')] ?? null;
  if (column === null) return { column, value: '', code: 'invalid-request', message: issue.message };
  const { label, quantity } = logColumn(column);
  const unit = quantity ? ` ${INSIDE_UNIT[quantity]}` : '';
  const value = row.original(column);
  if (issue.code === 'custom' && column === 'bore_mm') {
    const message = `bore must be smaller than the diameter of ${row.original('diameter_mm')}, got ${came(value, '')}`;
    return { column, value, code: 'out-of-range', message };
  }
  if (issue.code === 'custom' && column === 'wall_mm') {
    const message = `wall must be at most a tenth of the shorter width, where the thin-wall formula holds, got ${came(value, '')}`;
    return { column, value, code: 'out-of-range', message };
  }
  const code = issue.code === 'too_small' || issue.code === 'too_big' ? 'out-of-range' : 'invalid-request';
  return {
    column,
    value,
    code,
    message: `${label} ${expectation(issue, unit)}, got ${came(value, column ? unitOfCell(row, column) : '')}`,
  };
}

const unitOfCell = (row: RowCells, column: ColumnName): string => {
  const unit = row.unit(column);
  return unit === null ? '' : ` ${unit}`;
};

/** Issues of the schema that is the single source of what a test may be, told about the cells of the row. */
export function problemsOfIssues(issues: readonly Issue[], row: RowCells): CellProblem[] {
  return issues.map((issue) => problemOf(issue, row));
}
