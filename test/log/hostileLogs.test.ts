import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { gzipSync } from 'node:zlib';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { LaboratoryStore } from '../../server/store/laboratoryStore.ts';
import { openStore } from '../../server/store/openStore.ts';
import type { ImportSummary } from '../../src/log/importSummary.ts';
import { importLog } from '../../src/log/node/importLog.ts';
import { logFile, logFromBytes } from '../../src/log/node/logSource.ts';
import { uniforms } from '../statistics/seeded.ts';
import { zipArchive } from './zipArchive.ts';

let folder: string;
let records: LaboratoryStore;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'breakplane-hostile-'));
  records = await openStore(join(folder, 'data'));
});
afterAll(async () => {
  await records.close();
  await rm(folder, { recursive: true, force: true });
});

const bytesOf = (content: string | Uint8Array): Uint8Array =>
  typeof content === 'string' ? new TextEncoder().encode(content) : content;
const importBytes = (content: string | Uint8Array): Promise<ImportSummary> =>
  importLog({
    source: logFromBytes(bytesOf(content), 'hostile.csv'),
    photos: null,
    records,
    pool: null,
    dryRun: false,
  });
const testsNow = async (): Promise<number> => (await records.listTests({ limit: 1 })).total;

let goodRows = 0;
/** The laboratory still works: a sound row goes in and is found. */
async function unharmed(): Promise<void> {
  const id = `sound-${++goodRows}`;
  expect(await importBytes(`specimen_id,test_date,diameter_mm\n${id},2026-01-02,12\n`)).toMatchObject({
    stored: 1,
    refused: 0,
  });
  expect((await records.listTests({ limit: 1, text: id })).tests).toMatchObject([{ specimenId: id }]);
}

const random = (count: number): Uint8Array => Uint8Array.from(uniforms(3, count).map((u) => Math.floor(u * 256)));

const NO_LOGS: readonly (readonly [what: string, content: string | Uint8Array, words: RegExp])[] = [
  ['an empty file', '', /empty file/],
  ['a byte-order mark and nothing more', '\uFEFF', /header row/],
  ['half a byte-order mark of UTF-16', Uint8Array.of(0xff), /header row|columns/],
  ['blank lines', '\r\n\r\n\r\n', /blank lines/],
  ['headers that mean nothing', 'foo,bar\n1,2\n', /specimen_id and diameter_mm/],
  ['a log without the diameter', 'specimen_id,torque_max_Nm\nA,85\n', /diameter_mm/],
  [
    'two columns of one meaning',
    'specimen_id,Probe,diameter_mm\nA,B,12\n',
    /"specimen_id" and "Probe"|"Probe" and "specimen_id"/,
  ],
  ['a unit that is none of a torque', 'specimen_id,diameter_mm,Torque (MPa)\nA,12,85\n', /unit of torque, got "MPa"/],
  ['a JPEG photo', Uint8Array.of(0xff, 0xd8, 0xff, 0xe0, 0, 16, 0x4a, 0x46, 0x49, 0x46), /a JPEG photo/],
  ['a PNG picture', Uint8Array.of(0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a), /a PNG picture/],
  ['a PDF', '%PDF-1.7\n%âãÏÓ\n', /a PDF/],
  ['a workbook', zipArchive([{ name: 'xl/workbook.xml', bytes: bytesOf('<workbook/>') }]), /workbook or a zip/],
  ['an old workbook', Uint8Array.of(0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1), /old spreadsheet/],
  ['a packed log', gzipSync('specimen_id,diameter_mm\nA,12\n'), /gzip/],
  ['zero bytes in the text', 'specimen_id,diameter_mm\nA,1\0\x002\n', /zero bytes/],
  ['random bytes', random(50_000), /.{20}/],
  ['a web page', '<!doctype html><html><body><table><tr><td>A</td></tr></table></body></html>', /columns/],
  ['a JSON file', JSON.stringify([{ specimen: 'A', diameter: 12 }]), /columns/],
  [
    'entities that grow',
    `<?xml version="1.0"?><!DOCTYPE a [<!ENTITY a "aaaa"><!ENTITY b "&a;&a;&a;">]><a>&b;</a>`,
    /columns/,
  ],
  ['an unclosed quote in the header', '"specimen_id,diameter_mm\nA,12\nB,13\n', /.{20}/],
  ['a header of 100,000 empty cells', `${','.repeat(100_000)}\nA,12\n`, /.{20}/],
  ['a megabyte without a line break', 'x'.repeat(1_000_000), /.{20}/],
  ['names of the language itself as headers', '__proto__,constructor,toString\n1,2,3\n', /columns/],
];

describe('files that are no logs are refused whole, by name', () => {
  test.each(NO_LOGS)('%s', async (_what, content, words) => {
    const before = await testsNow();
    const refused = await importBytes(content).then(
      (summary) => expect.fail(`was imported: ${JSON.stringify(summary).slice(0, 300)}`),
      (error: unknown) => error,
    );
    expect(refused).toMatchObject({ name: 'LabError', code: expect.stringMatching(/^(not-a-log|unknown-unit)$/) });
    expect((refused as Error).message).toMatch(words);
    expect((refused as Error).message.length).toBeLessThan(2000);
    expect(await testsNow()).toBe(before);
    await unharmed();
  });

  test('a folder, and a file that is not there', async () => {
    await mkdir(join(folder, 'log.csv'));
    await expect(logFile(join(folder, 'log.csv'))).rejects.toMatchObject({ code: 'not-a-log' });
    await expect(logFile(join(folder, 'nowhere.csv'))).rejects.toMatchObject({
      code: 'not-a-log',
      message: expect.stringContaining('there is no such file'),
    });
  });
});

const HEADER = 'specimen_id,test_date,diameter_mm,torque_max_Nm,remarks';
const log = (...rows: string[]): string => [HEADER, ...rows].join('\n');

const BAD_ROWS: readonly (readonly [what: string, row: string, column: string | null, words: RegExp])[] = [
  ['a row of 10,000 cells', `H-1,2026-01-01,12,85,${'x,'.repeat(10_000)}`, null, /must have 5 cells/],
  ['a cell of a megabyte', `H-2,2026-01-01,12,85,${'x'.repeat(1_000_000)}`, null, /longer than any row/],
  ['a remark of 30,000 characters', `H-3,2026-01-01,12,85,${'x'.repeat(30_000)}`, 'remarks', /at most 20000/],
  ['a name of 300 characters', `${'n'.repeat(300)},2026-01-01,12,85,`, 'specimen_id', /at most 200/],
  ['control characters', 'H-\u00075,2026-01-01,12,85,', 'specimen_id', /control characters/],
  ['an escape sequence of terminals', 'H-6,2026-01-01,12,85,\u001b[2Jgone', 'remarks', /control characters/],
  ['a number beyond all numbers', 'H-7,2026-01-01,1e999,85,', 'diameter_mm', /number/],
  ['a diameter of three kilometres', 'H-8,2026-01-01,3000000,85,', 'diameter_mm', /≤/],
  ['a negative diameter', 'H-9,2026-01-01,-12,85,', 'diameter_mm', /> 0/],
  ['a torque of zero', 'H-10,2026-01-01,12,0,', 'torque_max_Nm', /> 0/],
  ['not a number', 'H-11,2026-01-01,NaN,85,', 'diameter_mm', /number/],
  ['a day that is not', 'H-12,2026-13-45,12,85,', 'test_date', /certain day/],
  ['a separator of another log', 'H-13;2026-01-01;12;85;', null, /.{10}/],
  ['a quote that is never closed', 'H-14,2026-01-01,12,85,"never closed', null, /quote/],
  ['an HTML cell where a number stands', 'H-15,2026-01-01,<b>12</b>,85,', 'diameter_mm', /number/],
  ['a formula where a number stands', 'H-16,2026-01-01,=1+1,85,', 'diameter_mm', /number/],
];

describe('rows that mean harm cost themselves only', () => {
  test.each(BAD_ROWS)('%s', async (what, row, column, words) => {
    const summary = await importBytes(
      log(`"first ${what}",2026-01-01,12,85,`, row, `"last ${what}",2026-01-01,12,85,`),
    );
    expect(summary).toMatchObject({ rows: 3, stored: 2, refused: 1 });
    const [refusal] = summary.refusals;
    expect(refusal).toMatchObject({ line: 3, message: expect.stringMatching(words) });
    // The separator of another log leaves one cell, and that is told by what is missing first.
    if (what !== 'a separator of another log') expect(refusal?.column).toBe(column);
    expect(JSON.stringify(refusal).length).toBeLessThan(3000);
    await unharmed();
  });

  test('500 rows behind a quote that is never closed all go in', async () => {
    const rows = Array.from({ length: 500 }, (_, i) => `Q-${i},2026-01-01,12,85,`);
    const summary = await importBytes(log('Q-bad,2026-01-01,12,85,"open', ...rows));
    expect(summary).toMatchObject({ rows: 501, stored: 500, refused: 1 });
  });

  test('100,000 quotes in a row', async () => {
    const summary = await importBytes(log('R-1,2026-01-01,12,85,', '"'.repeat(100_000), 'R-2,2026-01-01,12,85,'));
    expect(summary.stored).toBe(2);
  });
});

describe('text is kept as text', () => {
  const texts = [
    '=cmd|" /C calc"!A0',
    '+49 formula',
    '@SUM(A1)',
    '<script>alert(1)</script>',
    "'; DROP TABLE tests; --",
    '__proto__',
    'constructor',
    '../../etc/passwd',
    '#let x = 1',
    '{{failure_mode_summary}}',
    '‮txet desrever',
    '漢字 Ω τ σ ±',
    '🦴🔩',
    '%s%n%x',
    '\\N',
  ];
  test.each(texts)('%j as specimen id and remark', async (text) => {
    const quoted = `"${text.replaceAll('"', '""')}"`;
    expect(await importBytes(log(`${quoted},2026-05-05,12,85,${quoted}`))).toMatchObject({ stored: 1, refused: 0 });
    let cursor: string | null = null;
    const found: string[] = [];
    do {
      const page: Awaited<ReturnType<LaboratoryStore['listTests']>> = await records.listTests({
        limit: 200,
        ...(cursor === null ? {} : { cursor }),
      });
      found.push(...page.tests.filter((t) => t.specimenId === text).map((t) => t.remarks ?? ''));
      cursor = page.nextCursor;
    } while (cursor !== null);
    expect(found).toEqual([text]);
  });
});

test('a log that is cut off in the middle of a character of UTF-16', async () => {
  const bytes = Buffer.from(`\uFEFF${log('T-1,2026-01-01,12,85,', 'T-2,2026-01-01,12,85,x')}`, 'utf16le');
  const path = join(folder, 'cut.csv');
  await writeFile(path, bytes.subarray(0, bytes.length - 1));
  const summary = await importLog({ source: await logFile(path), photos: null, records, pool: null, dryRun: false });
  expect(summary.stored).toBe(2);
  await unharmed();
});
