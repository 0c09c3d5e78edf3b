import type { SectionGeometry } from '../records/geometry.ts';
import { type ColumnName, logColumn } from './columnNames.ts';
import type { RowCells } from './rowCells.ts';
import { SECTION_NAMES, type SectionName, sectionOfWord } from './sectionWords.ts';

/** Columns that hold a dimension of the section, with the field of the record they fill. */
const FIELD_OF = {
  diameter_mm: 'diameterMm',
  bore_mm: 'boreMm',
  side_mm: 'sideMm',
  width_mm: 'widthMm',
  height_mm: 'heightMm',
  wall_mm: 'wallMm',
  major_axis_mm: 'majorAxisMm',
  minor_axis_mm: 'minorAxisMm',
  across_flats_mm: 'acrossFlatsMm',
} as const satisfies Partial<Record<ColumnName, string>>;

export type DimensionColumn = keyof typeof FIELD_OF;
export const DIMENSION_COLUMNS = Object.keys(FIELD_OF) as readonly DimensionColumn[];

/** The dimensions each section must have. */
const DIMENSIONS_OF: Readonly<Record<SectionName, readonly DimensionColumn[]>> = {
  'solid-round': ['diameter_mm'],
  'hollow-round': ['diameter_mm', 'bore_mm'],
  rectangle: ['width_mm', 'height_mm'],
  square: ['side_mm'],
  ellipse: ['major_axis_mm', 'minor_axis_mm'],
  'equilateral-triangle': ['side_mm'],
  hexagon: ['across_flats_mm'],
  'rectangular-tube': ['width_mm', 'height_mm', 'wall_mm'],
};

/** Bore and wall of one tube may differ by the rounding of a log, not by more. */
const ROUNDING_MM = 0.051;

type Dimensions = Partial<Record<DimensionColumn, number>>;

/** Dimensions of the row; a 0 stands for "none" everywhere but in the dimension a section cannot be without. */
function dimensionsOf(row: RowCells): Dimensions {
  const dimensions: Dimensions = {};
  for (const column of DIMENSION_COLUMNS) {
    const value = row.number(column);
    if (value !== null) dimensions[column] = value;
  }
  return dimensions;
}

const given = (dimensions: Dimensions, column: DimensionColumn): boolean => (dimensions[column] ?? 0) !== 0;

/** The section that only these dimensions can mean; null when it could be several. */
function sectionFrom(dimensions: Dimensions): SectionName | null {
  const has = (column: DimensionColumn): boolean => given(dimensions, column);
  if (has('across_flats_mm')) return 'hexagon';
  if (has('major_axis_mm') || has('minor_axis_mm')) return 'ellipse';
  if (has('width_mm') || has('height_mm')) return has('wall_mm') ? 'rectangular-tube' : 'rectangle';
  if (has('side_mm') && !has('diameter_mm')) return null;
  return has('bore_mm') || has('wall_mm') ? 'hollow-round' : 'solid-round';
}

/** A tube is as often stated by its wall as by its bore. */
function boreFromWall(dimensions: Dimensions, row: RowCells): Dimensions {
  const { diameter_mm: diameterMm, bore_mm: boreMm, wall_mm: wallMm, ...others } = dimensions;
  if (diameterMm === undefined || wallMm === undefined || wallMm === 0) return dimensions;
  const fromWallMm = diameterMm - 2 * wallMm;
  if (!(wallMm > 0 && fromWallMm > 0)) {
    row.refuse(
      'wall_mm',
      'out-of-range',
      `wall must be > 0 and less than half the diameter, got ${row.original('wall_mm')}`,
    );
  } else if (boreMm !== undefined && boreMm !== 0 && Math.abs(boreMm - fromWallMm) > ROUNDING_MM) {
    row.refuse(
      'wall_mm',
      'contradiction',
      `wall must agree with diameter and bore, which leave ${(diameterMm - boreMm) / 2} mm, got ${row.original('wall_mm')}`,
    );
  }
  return { ...others, diameter_mm: diameterMm, bore_mm: boreMm || fromWallMm };
}

function refuseWhatDoesNotBelong(section: SectionName, dimensions: Dimensions, row: RowCells): void {
  for (const column of DIMENSION_COLUMNS) {
    if (!given(dimensions, column) || DIMENSIONS_OF[section].includes(column)) continue;
    const { label } = logColumn(column);
    const what = section === 'solid-round' ? 'a solid section' : `section ${section}`;
    row.refuse(column, 'contradiction', `${label} must be empty or 0 for ${what}, got ${row.original(column)}`);
  }
}

function refuseWhatIsMissing(section: SectionName, dimensions: Dimensions, row: RowCells): void {
  for (const column of DIMENSIONS_OF[section]) {
    const mayBeZero = column === 'bore_mm' || column === 'wall_mm';
    if (mayBeZero ? given(dimensions, column) : dimensions[column] !== undefined) continue;
    const { label } = logColumn(column);
    const whose =
      section === 'solid-round' ? '' : section === 'hollow-round' ? ' for a hollow section' : ` for section ${section}`;
    row.refuse(column, 'missing-value', `${label} must be given${whose}, got an empty cell${mayBeZero ? ' or 0' : ''}`);
  }
}

function statedSection(row: RowCells): SectionName | null | undefined {
  const word = row.text('section');
  if (word === null) return null;
  const stated = sectionOfWord(word);
  if (stated === undefined) {
    row.refuse('section', 'invalid-request', `section must be one of ${SECTION_NAMES.join(', ')}, got "${word}"`);
  }
  return stated;
}

/**
 * Section and dimensions of a row. Without a section column the dimensions say which it is: a diameter alone is a solid bar,
 * with a bore or a wall a tube. Problems go to the row; limits of the values are the record's own.
 */
export function geometryOfRow(row: RowCells): SectionGeometry | null {
  const problemsBefore = row.problems.length;
  const read = dimensionsOf(row);
  const cellsRead = row.problems.length === problemsBefore;
  const stated = statedSection(row);
  if (!cellsRead || stated === undefined) return null;
  const section = stated ?? sectionFrom(read);
  if (section === null) {
    row.refuse(
      'section',
      'missing-value',
      'section must be given where only a side is: square or equilateral-triangle, got an empty cell',
    );
    return null;
  }
  const dimensions = section === 'hollow-round' ? boreFromWall(read, row) : read;
  refuseWhatDoesNotBelong(section, dimensions, row);
  refuseWhatIsMissing(section, dimensions, row);
  if (row.problems.length > problemsBefore) return null;
  const fields = DIMENSIONS_OF[section].map((column) => [FIELD_OF[column], dimensions[column]]);
  // The record's schema, which sees the whole test afterwards, is what makes this a geometry.
  return { section, ...Object.fromEntries(fields) } as SectionGeometry;
}
