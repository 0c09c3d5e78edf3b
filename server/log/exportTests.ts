import { stringify } from 'csv-stringify';
import { CANONICAL_HEADERS } from '../../src/log/columnNames.ts';
import type { LaboratoryStore, TestDossier } from '../store/laboratoryStore.ts';
import type { TestFilter, TestRow } from '../store/listTests.ts';

/** Tests read at once; the export holds no more of them in memory. */
const TESTS_AT_ONCE = 500;

async function* pagesOf(
  store: LaboratoryStore,
  filter: Omit<TestFilter, 'limit' | 'cursor'>,
): AsyncGenerator<readonly TestRow[]> {
  let cursor: string | null = null;
  do {
    const page: { tests: readonly TestRow[]; nextCursor: string | null } = await store.listRows({
      ...filter,
      limit: TESTS_AT_ONCE,
      ...(cursor === null ? {} : { cursor }),
    });
    yield page.tests;
    cursor = page.nextCursor;
  } while (cursor !== null);
}

type Cell = string | number | null;

/** What a row of a test log says of a test, under the canonical headers; `angle_deg` is left to the columns behind them. */
function logCells(test: TestRow): Record<(typeof CANONICAL_HEADERS)[number], Cell> {
  const { geometry } = test;
  const dimensions: Readonly<Record<string, string | number>> = geometry;
  return {
    specimen_id: test.specimenId,
    test_date: test.testDate,
    material: test.material,
    heat: test.heat,
    section: geometry.section,
    diameter_mm: dimensions.diameterMm ?? null,
    bore_mm: dimensions.boreMm ?? null,
    side_mm: dimensions.sideMm ?? null,
    width_mm: dimensions.widthMm ?? null,
    height_mm: dimensions.heightMm ?? null,
    wall_mm: dimensions.wallMm ?? null,
    major_axis_mm: dimensions.majorAxisMm ?? null,
    minor_axis_mm: dimensions.minorAxisMm ?? null,
    across_flats_mm: dimensions.acrossFlatsMm ?? null,
    gauge_length_mm: test.gaugeLengthMm,
    torque_max_Nm: test.torqueMaxNm,
    torque_direction: test.torqueDirection,
    twist_fracture_deg: test.twistFractureDeg,
    axial_force_N: test.axialForceN,
    bending_moment_Nm: test.bendingMomentNm,
    angle_deg: null,
    angle_u_deg: null,
    photo: null,
    operator: test.operator,
    remarks: test.remarks,
  };
}

/** Columns behind those of a log: what Breakplane says. The import passes them over. */
const RESULT_HEADERS = [
  'result_failure_mode',
  'result_probability',
  'result_plane_angle_deg',
  'result_expanded_uncertainty_deg',
  'result_readings',
  'result_photos',
  'result_flags',
];

const resultCells = (test: TestRow): Cell[] => [
  test.mode,
  test.probability,
  test.planeAngleDeg,
  test.expandedUncertaintyDeg,
  test.readingCount,
  test.photoCount,
  test.flags.map((flag) => flag.sentence).join(' | '),
];

/** Tests as CSV under the canonical headers of a log. Text that a spreadsheet would take for a formula is defused. */
export async function* testsAsCsv(
  store: LaboratoryStore,
  filter: Omit<TestFilter, 'limit' | 'cursor'>,
): AsyncGenerator<string> {
  const headers = CANONICAL_HEADERS.filter((header) => !['angle_deg', 'angle_u_deg', 'photo'].includes(header));
  yield await csvOf([[...headers, ...RESULT_HEADERS]]);
  for await (const tests of pagesOf(store, filter)) {
    const rows = tests.map((test) => {
      const cells = logCells(test);
      return [...headers.map((header) => cells[header]), ...resultCells(test)];
    });
    if (rows.length > 0) yield await csvOf(rows);
  }
}

const csvOf = (rows: readonly (readonly Cell[])[]): Promise<string> =>
  new Promise((resolve, reject) => {
    // Numbers are handed over as numbers: only text is defused.
    stringify([...rows], { escape_formulas: true, record_delimiter: 'windows' }, (error, text) =>
      error ? reject(error) : resolve(text),
    );
  });

/** Tests with all their readings and photos, one JSON object a line. */
export async function* testsAsJsonLines(
  store: LaboratoryStore,
  filter: Omit<TestFilter, 'limit' | 'cursor'>,
): AsyncGenerator<string> {
  for await (const tests of pagesOf(store, filter)) {
    const dossiers: TestDossier[] = [];
    for (const { id } of tests) dossiers.push(await store.readDossier(id));
    yield dossiers.map((dossier) => `${JSON.stringify(dossier)}\n`).join('');
  }
}
