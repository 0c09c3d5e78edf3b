import { describe, expect, test } from 'vitest';
import { importLog } from '../../src/log/node/importLog.ts';
import { logFromBytes } from '../../src/log/node/logSource.ts';
import { DIMENSION_COLUMNS } from '../../src/log/rowGeometry.ts';
import { SECTION_NAMES } from '../../src/log/sectionWords.ts';
import { SectionGeometry } from '../../src/records/geometry.ts';
import type { LaboratoryRecords, LogEntry } from '../../src/records/laboratoryRecords.ts';

/** Imports rows of dimensions; answers with the geometries that were kept and what was refused. */
async function imported(header: string, ...rows: string[]) {
  const kept: LogEntry[] = [];
  const records = {
    upsertLogEntries: async (entries: readonly LogEntry[]) => {
      kept.push(...entries);
      return entries.map(() => ({ outcome: 'stored' as const, testId: '', readingAdded: false }));
    },
  } satisfies Pick<LaboratoryRecords, 'upsertLogEntries'> as unknown as LaboratoryRecords;
  const csv = [`specimen_id,${header}`, ...rows.map((row, i) => `S-${i},${row}`)].join('\n');
  const source = logFromBytes(new TextEncoder().encode(csv), 'log.csv');
  const { refusals } = await importLog({ source, photos: null, records, pool: null, dryRun: false });
  return { geometries: kept.map((entry) => entry.test.geometry), refusals };
}

describe('sections of a log', () => {
  test('every section of the records can be stated in a log', () => {
    expect([...SECTION_NAMES].sort()).toEqual(
      SectionGeometry.options.map((option) => option.shape.section.value).sort(),
    );
  });

  test('every dimension of every section has a column', () => {
    const fields = new Set(SectionGeometry.options.flatMap((option) => Object.keys(option.shape)));
    fields.delete('section');
    expect(DIMENSION_COLUMNS).toHaveLength(fields.size);
  });

  test('each section from its word and dimensions', async () => {
    const { geometries, refusals } = await imported(
      'section,diameter_mm,bore_mm,side_mm,width_mm,height_mm,wall_mm,major_axis_mm,minor_axis_mm,across_flats_mm',
      'round bar,12,,,,,,,,',
      'Rohr,25,19,,,,,,,',
      'Vierkant,,,10,,,,,,',
      'triangle,,,30,,,,,,',
      'flat bar,,,,20,5,,,,',
      'RHS,,,,60,40,2,,,',
      'oval,,,,,,,20,10,',
      'Sechskant,,,,,,,,,17',
    );
    expect(refusals).toEqual([]);
    expect(geometries).toEqual([
      { section: 'solid-round', diameterMm: 12 },
      { section: 'hollow-round', diameterMm: 25, boreMm: 19 },
      { section: 'square', sideMm: 10 },
      { section: 'equilateral-triangle', sideMm: 30 },
      { section: 'rectangle', widthMm: 20, heightMm: 5 },
      { section: 'rectangular-tube', widthMm: 60, heightMm: 40, wallMm: 2 },
      { section: 'ellipse', majorAxisMm: 20, minorAxisMm: 10 },
      { section: 'hexagon', acrossFlatsMm: 17 },
    ]);
  });

  test('without a section column the dimensions say which it is; a side alone does not', async () => {
    const { geometries, refusals } = await imported(
      'Durchmesser (mm),bore_in,Seitenlänge,Breite,Höhe,wall thickness,Schlüsselweite',
      '12,,,,,,',
      '25.4,0.5,,,,,',
      '25,,,,,3,',
      ',,,20,5,,',
      ',,,60,40,2,',
      ',,,,,,17',
      ',,10,,,,',
    );
    expect(geometries).toEqual([
      { section: 'solid-round', diameterMm: 12 },
      { section: 'hollow-round', diameterMm: 25.4, boreMm: 12.7 },
      { section: 'hollow-round', diameterMm: 25, boreMm: 19 },
      { section: 'rectangle', widthMm: 20, heightMm: 5 },
      { section: 'rectangular-tube', widthMm: 60, heightMm: 40, wallMm: 2 },
      { section: 'hexagon', acrossFlatsMm: 17 },
    ]);
    expect(refusals).toMatchObject([{ line: 8, column: 'section', code: 'missing-value' }]);
  });

  test('what contradicts, lacks or exceeds is refused at its column', async () => {
    const { geometries, refusals } = await imported(
      'section,diameter_mm,bore_mm,width_mm,height_mm,wall_mm',
      'solid round,12,6,,,',
      'solid round,,,,,',
      'tube,25,,,,',
      'tube,25,19,,,5',
      'tube,25,,,,13',
      'rectangle,12,,20,5,',
      'rectangle,,,20,,',
      'rhs,,,60,40,8',
      'tube,25,25,,,',
      'rectangle,,,20,-5,',
      'pentagon,12,,,,',
      'solid,12,0,0,,0',
    );
    expect(geometries).toEqual([{ section: 'solid-round', diameterMm: 12 }]);
    expect(refusals.map((r) => [r.line, r.column, r.code])).toEqual([
      [2, 'bore_mm', 'contradiction'],
      [3, 'diameter_mm', 'missing-value'],
      [4, 'bore_mm', 'missing-value'],
      [5, 'wall_mm', 'contradiction'],
      [6, 'wall_mm', 'out-of-range'],
      [7, 'diameter_mm', 'contradiction'],
      [8, 'height_mm', 'missing-value'],
      [9, 'wall_mm', 'out-of-range'],
      [10, 'bore_mm', 'out-of-range'],
      [11, 'height_mm', 'out-of-range'],
      [12, 'section', 'invalid-request'],
    ]);
  });
});
