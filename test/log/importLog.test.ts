import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { openStore } from '../../server/store/openStore.ts';
import type { ImportSummary } from '../../src/log/importSummary.ts';
import { importLog } from '../../src/log/node/importLog.ts';
import { logFromBytes } from '../../src/log/node/logSource.ts';
import type { LaboratoryRecords } from '../../src/records/laboratoryRecords.ts';

let folder: string;
let records: LaboratoryRecords;
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'breakplane-log-'));
  records = await openStore(folder);
});
afterEach(async () => {
  await records.close();
  await rm(folder, { recursive: true, force: true });
});

const importBytes = (bytes: Uint8Array, dryRun = false): Promise<ImportSummary> =>
  importLog({ source: logFromBytes(bytes, 'log.csv'), photos: null, records, pool: null, dryRun });
const importText = (text: string, dryRun = false) => importBytes(new TextEncoder().encode(text), dryRun);

const HEADER =
  'specimen_id,test_date,material,heat,section,diameter_mm,torque_max_Nm,torque_direction,angle_deg,angle_u_deg';
const row = (
  i: number,
  change: Partial<{ id: string; diameter: string; torque: string; angle: string; date: string }> = {},
) =>
  [
    change.id ?? `S-${String(i).padStart(3, '0')}`,
    change.date ?? '2026-05-04',
    'C45',
    'H1',
    'solid round',
    change.diameter ?? '12',
    change.torque ?? '85',
    'ccw',
    change.angle ?? '1',
    '1',
  ].join(',');

describe('a log of 200 rows with 6 bad ones', () => {
  const bad = new Map([
    [10, row(10, { diameter: '-3' })],
    [40, row(40, { diameter: '12,5,x' })],
    [77, row(77, { torque: 'about 80' })],
    [100, row(100, { date: '2026-02-31' })],
    [150, row(9)],
    [199, row(199, { id: '' })],
  ]);
  const lines = [HEADER, ...Array.from({ length: 200 }, (_, i) => bad.get(i) ?? row(i))];

  test('stores 194, lists 6 with line and reason, and twice changes nothing', async () => {
    const first = await importText(lines.join('\n'));
    expect(first).toMatchObject({ rows: 200, stored: 194, updated: 0, unchanged: 0, refused: 6, readingsAdded: 194 });
    expect(first.refusals.map((r) => r.line)).toEqual([...bad.keys()].map((i) => i + 2));
    for (const refusal of first.refusals) expect(refusal.message.length).toBeGreaterThan(20);
    expect(first.refusals[0]).toMatchObject({ column: 'diameter_mm', value: '-3', code: 'out-of-range' });
    const again = await importText(lines.join('\n'));
    expect(again).toMatchObject({ rows: 200, stored: 0, updated: 0, unchanged: 194, refused: 6, readingsAdded: 0 });
    expect((await records.listTests({ limit: 1 })).total).toBe(194);
  });

  test('a dry run says the same and keeps nothing', async () => {
    expect(await importText(lines.join('\n'), true)).toMatchObject({
      rows: 200,
      stored: 194,
      refused: 6,
      dryRun: true,
    });
    expect((await records.listTests({ limit: 1 })).total).toBe(0);
  });

  test('a changed row is an update', async () => {
    await importText([HEADER, row(1)].join('\n'));
    expect(await importText([HEADER, row(1, { torque: '86' })].join('\n'))).toMatchObject({ updated: 1, stored: 0 });
  });
});

describe('how a log may be written', () => {
  const semicolons = 'Specimen;Date;Material;Diameter (mm);Torque (N·m)\r\nA-1;25.05.2026;C45;12,5;85,25\r\n';

  test('byte-order mark, semicolons, decimal comma, CRLF, other names of headers', async () => {
    const summary = await importText(`\uFEFF${semicolons}`);
    expect(summary).toMatchObject({ rows: 1, stored: 1, log: { delimiter: ';', decimalMark: 'comma' } });
    const { tests } = await records.listTests({ limit: 5 });
    expect(tests[0]).toMatchObject({ specimenId: 'A-1', geometry: { diameterMm: 12.5 }, torqueMaxNm: 85.25 });
  });

  test('UTF-16 as spreadsheets save it', async () => {
    const utf16 = Buffer.from(`\uFEFF${semicolons}`, 'utf16le');
    expect(await importBytes(utf16)).toMatchObject({ rows: 1, stored: 1, log: { encoding: 'utf-16le' } });
  });

  test('units in headers and in cells', async () => {
    // 1 in = 25.4 mm exactly; 1 lbf·in = 0.112984829 N·m (NIST SP 811, B.8).
    await importText('specimen_id,diameter_in,Torque (lbf·in)\nU-1,0.5,1000\n');
    const { tests } = await records.listTests({ limit: 5 });
    const [test0] = tests;
    expect(test0?.geometry).toMatchObject({ diameterMm: 12.7 });
    expect(test0?.torqueMaxNm).toBeCloseTo(112.984829, 5);
  });

  test('a quoted cell with line breaks and separators stays one cell', async () => {
    const summary = await importText('specimen_id,diameter_mm,remarks\nQ-1,10,"two\nlines, one cell"\nQ-2,10,plain\n');
    expect(summary).toMatchObject({ rows: 2, stored: 2 });
    const { tests } = await records.listTests({ limit: 5 });
    expect(tests.find((t) => t.specimenId === 'Q-1')?.remarks).toBe('two\nlines, one cell');
  });

  test('an unclosed quote costs its own row only', async () => {
    const summary = await importText(
      'specimen_id,diameter_mm,remarks\nQ-1,10,"never closed\nQ-2,10,fine\nQ-3,10,fine\n',
    );
    expect(summary).toMatchObject({ rows: 3, stored: 2, refused: 1 });
    expect(summary.refusals[0]).toMatchObject({ line: 2, message: expect.stringContaining('quote') });
  });

  test('a row cut off by the end of the file is refused, not half stored', async () => {
    const summary = await importText(`${HEADER}\n${row(1)}\nS-002,2026-05-04,C45`);
    expect(summary).toMatchObject({ rows: 2, stored: 1, refused: 1 });
    expect(summary.refusals[0]?.message).toContain('cut off');
  });

  test('header only: nothing to keep, no complaint', async () => {
    expect(await importText(`${HEADER}\n`)).toMatchObject({ rows: 0, stored: 0, refused: 0 });
  });

  test.each([
    ['an empty file', ''],
    ['blank lines', '\n\n\n'],
    ['no header that means anything', 'foo,bar\n1,2\n'],
  ])('%s is no log, and says so', async (_name, text) => {
    await expect(importText(text)).rejects.toMatchObject({ code: 'not-a-log' });
  });

  test('negative, zero, absurd and contradictory geometry is refused by name', async () => {
    const summary = await importText(
      'specimen_id,section,diameter_mm,bore_mm\nG-1,solid round,0,\nG-2,solid round,NaN,\nG-3,solid round,3km,\nG-4,hollow round,20,20\nG-5,hollow round,20,16\n',
    );
    expect(summary).toMatchObject({ rows: 5, stored: 1, refused: 4 });
    expect(summary.refusals.map((r) => r.column)).toEqual(['diameter_mm', 'diameter_mm', 'diameter_mm', 'bore_mm']);
  });
});
