import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { crc32 } from 'node:zlib';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { ImportAnswer, LogPreviewAnswer } from '../../server/http/schemas.ts';
import { brokenBarPng } from './drawnPhotos.ts';
import { filesBelow, PROGRAM_DIR, type RunningLaboratory, runLaboratory } from './runningLaboratory.ts';

let laboratory: RunningLaboratory;
beforeEach(async () => {
  laboratory = await runLaboratory();
});
afterEach(() => laboratory.stop());

const HEADER =
  'specimen_id,test_date,material,heat,section,diameter_mm,torque_max_Nm,torque_direction,angle_deg,angle_u_deg,photo';
const LOG = [
  HEADER,
  'L-1,2026-03-01,C45E,H1,solid-round,12,85,ccw,44,1,L-1.png',
  'L-2,2026-03-01,C45E,H1,solid-round,-12,85,ccw,44,1,',
  'L-3,2026-03-01,C45E,H2,solid-round,12,0,ccw,,,',
  'L-4,2026-03-02,EN-GJL-250,H3,solid-round,10,40,cw,-45,1.5,missing.jpg',
].join('\n');

interface Sent {
  readonly name: string;
  readonly bytes: Uint8Array;
}

function form(log: string | null, photos: readonly Sent[] = []): FormData {
  const data = new FormData();
  if (log !== null) data.append('log', new Blob([log]), 'tests of March.csv');
  for (const { name, bytes } of photos) data.append('photo', new Blob([new Uint8Array(bytes)]), name);
  return data;
}

const send = (log: string | null, photos: readonly Sent[] = [], query = '') =>
  laboratory.sendForm(`/api/v1/logs${query}`, form(log, photos));

/** A zip archive with stored (not packed) entries. */
function zipOf(files: readonly Sent[]): Buffer {
  const parts: Buffer[] = [];
  const directory: Buffer[] = [];
  let offset = 0;
  for (const { name, bytes } of files) {
    const path = Buffer.from(name);
    const common = Buffer.alloc(26);
    common.writeUInt16LE(20, 0);
    common.writeUInt16LE(0x0800, 2);
    common.writeUInt32LE(crc32(bytes), 10);
    common.writeUInt32LE(bytes.length, 14);
    common.writeUInt32LE(bytes.length, 18);
    common.writeUInt16LE(path.length, 22);
    const local = Buffer.concat([Buffer.from('PK\x03\x04'), common, path, bytes]);
    const tail = Buffer.alloc(14);
    tail.writeUInt32LE(offset, 10);
    directory.push(Buffer.concat([Buffer.from('PK\x01\x02'), Buffer.from([20, 0]), common, tail, path]));
    parts.push(local);
    offset += local.length;
  }
  const central = Buffer.concat(directory);
  const end = Buffer.alloc(18);
  end.writeUInt16LE(files.length, 4);
  end.writeUInt16LE(files.length, 6);
  end.writeUInt32LE(central.length, 8);
  end.writeUInt32LE(offset, 12);
  return Buffer.concat([...parts, central, Buffer.from('PK\x05\x06'), end]);
}

async function measured(): Promise<void> {
  for (let i = 0; i < 1200; i++) {
    const { body } = await laboratory.ask('GET', '/api/v1/measuring');
    if (body.waiting + body.running === 0) return;
    await pause(100);
  }
  throw new Error('the queue did not end');
}

describe('POST /api/v1/logs', () => {
  test('keeps the good rows, names the bad ones, keeps photos and measures them in the background', async () => {
    const photo = { name: 'L-1.png', bytes: await brokenBarPng() };
    const { status, body } = await send(LOG, [photo]);
    expect(status, JSON.stringify(body)).toBe(200);
    expect(() => ImportAnswer.parse(body)).not.toThrow();
    expect(body).toMatchObject({
      rows: 4,
      stored: 2,
      updated: 0,
      unchanged: 0,
      refused: 2,
      readingsAdded: 2,
      photosQueued: 1,
      photosMeasured: 0,
      dryRun: false,
    });
    expect(body.refusals).toMatchObject([
      { line: 3, column: 'diameter_mm', value: '-12', code: 'out-of-range' },
      { line: 4, column: 'torque_max_Nm', value: '0', code: 'out-of-range' },
    ]);
    expect(body.photoProblems).toMatchObject([{ line: 5, photo: 'missing.jpg', code: 'not-found' }]);
    await measured();
    const { body: page } = await laboratory.ask('GET', '/api/v1/tests?text=l-1');
    expect(page.tests).toMatchObject([
      { specimenId: 'L-1', photoCount: 1, readingCount: 2, mode: 'normal-stress', planeAngleDeg: 44 },
    ]);
    expect(await filesBelow(join(laboratory.dataDir, 'incoming'))).toEqual([]);
  });

  test('the same log again changes nothing', async () => {
    await send(LOG);
    expect((await send(LOG)).body).toMatchObject({
      stored: 0,
      updated: 0,
      unchanged: 2,
      refused: 2,
      readingsAdded: 0,
      photosQueued: 0,
    });
  });

  test('a dry run says the same and keeps nothing', async () => {
    const { body } = await send(LOG, [{ name: 'L-1.png', bytes: await brokenBarPng() }], '?dryRun=true');
    expect(body).toMatchObject({ rows: 4, stored: 2, refused: 2, dryRun: true });
    expect((await laboratory.ask('GET', '/api/v1/laboratory')).body.tests).toBe(0);
    expect(await filesBelow(join(laboratory.dataDir, 'photos'))).toEqual([]);
  });

  test('refused rows are fetched as CSV, mended and imported', async () => {
    const { body } = await send(LOG);
    const refused = await laboratory.ask('GET', `/api/v1/logs/${body.id}/refused.csv`);
    expect(refused.status).toBe(200);
    expect(refused.headers.get('content-type')).toMatch(/^text\/csv/);
    expect(refused.headers.get('content-disposition')).toContain("filename*=UTF-8''tests%20of%20March-refused.csv");
    expect(refused.text).toContain('L-2,2026-03-01');
    expect(refused.text).not.toContain('L-1,');
    const mended = refused.text
      .replace('solid-round,-12,', 'solid-round,12,')
      .replace('solid-round,12,0,', 'solid-round,12,70,');
    expect((await send(mended)).body).toMatchObject({ rows: 2, stored: 2, refused: 0 });
    expect((await laboratory.ask('GET', '/api/v1/laboratory')).body.tests).toBe(4);
  });

  test('photos of a zip archive and single ones', async () => {
    const log = [
      HEADER,
      'Z-1,2026-03-01,,,solid-round,12,85,ccw,,,a.png',
      'Z-2,2026-03-01,,,solid-round,12,85,ccw,,,b.png',
    ].join('\n');
    const [a, b] = await Promise.all([brokenBarPng({ seed: 1 }), brokenBarPng({ seed: 2 })]);
    const archive = zipOf([
      { name: 'march/a.png', bytes: a },
      { name: '../../evil.png', bytes: a },
    ]);
    const { body } = await send(log, [
      { name: 'photos.zip', bytes: archive },
      { name: 'b.png', bytes: b },
    ]);
    expect(body).toMatchObject({ stored: 2, photosQueued: 2, photoProblems: [] });
    expect(body.notes.join(' ')).toContain('evil.png');
    await measured();
    const { body: page } = await laboratory.ask('GET', '/api/v1/tests?text=z-');
    expect(page.tests.map((one: { mode: string }) => one.mode)).toEqual(['normal-stress', 'normal-stress']);
  });

  test('a photo that no row names is said, not lost in silence', async () => {
    const photo = await brokenBarPng();
    const { body } = await send(LOG, [
      { name: 'L-1.png', bytes: photo },
      { name: 'other.png', bytes: photo },
    ]);
    expect(body.photosQueued).toBe(1);
    expect(body.notes.join(' ')).toContain('One photo is named by no row and not kept: "other.png"');
    expect((await send(LOG)).body.notes.join(' ')).not.toContain('named by no row');
  });

  test.each([
    ['no log', null, [], 422, 'invalid-request'],
    ['a log without rows that can be read', 'hello', [], 422, 'not-a-log'],
    ['an empty log', '', [], 422, 'not-a-log'],
    ['a photo in the place of the log', '\xff\xd8\xff\xe0 photo', [], 422, 'not-a-log'],
    [
      'an archive that is none',
      LOG,
      [{ name: 'photos.zip', bytes: new Uint8Array([80, 75, 3, 4, 0, 0]) }],
      422,
      'invalid-request',
    ],
  ])('refuses %s', async (_what, log, photos, status, code) => {
    expect(await send(log, photos)).toMatchObject({ status, body: { code } });
    expect((await laboratory.ask('GET', '/api/v1/laboratory')).body.tests).toBe(0);
    expect(await filesBelow(join(laboratory.dataDir, 'incoming'))).toEqual([]);
  });

  test('an import without refused rows, or that is none, has no CSV of them', async () => {
    const { body } = await send([HEADER, 'A,2026-03-01,,,solid-round,12,85,ccw,,,'].join('\n'));
    expect(await laboratory.ask('GET', `/api/v1/logs/${body.id}/refused.csv`)).toMatchObject({
      status: 404,
      body: { code: 'not-found' },
    });
    expect(await laboratory.ask('GET', '/api/v1/logs/nowhere/refused.csv')).toMatchObject({ status: 404 });
  });

  test('what is exported is imported unchanged', async () => {
    await send(LOG);
    const { text } = await laboratory.ask('GET', '/api/v1/exports/tests.csv');
    expect((await send(text)).body).toMatchObject({
      rows: 2,
      stored: 0,
      updated: 0,
      unchanged: 2,
      refused: 0,
      readingsAdded: 0,
    });
  });
});

test('POST /api/v1/demo-laboratory loads the samples; the photos are measured in the background', async () => {
  const rows = (await readFile(join(PROGRAM_DIR, 'samples', 'logs', 'demo.csv'), 'utf8')).trim().split('\n').length - 1;
  const before = await laboratory.ask('GET', '/api/v1/laboratory');
  expect(before.body).toMatchObject({ tests: 0, demoAvailable: true });
  const { status, body } = await laboratory.ask('POST', '/api/v1/demo-laboratory', {});
  expect(status, JSON.stringify(body)).toBe(201);
  expect(body).toMatchObject({ rows, stored: rows, refused: 0, photoProblems: [] });
  expect(body.photosQueued).toBeGreaterThan(0);
  expect((await laboratory.ask('GET', '/api/v1/laboratory')).body.tests).toBe(rows);
  await laboratory.ask('POST', '/api/v1/measuring/cancel');
  expect((await laboratory.ask('POST', '/api/v1/demo-laboratory', {})).body).toMatchObject({
    stored: 0,
    unchanged: rows,
  });
});

test('an import ends in good order when the service stops, and the same import again goes on', async () => {
  const rows = Array.from({ length: 20_000 }, (_, i) => `S-${i},2026-03-01,,,solid-round,12,85,ccw,,,`);
  const log = [HEADER, ...rows].join('\n');
  const importing = send(log);
  for (let i = 0; i < 500 && (await laboratory.service.store.countTests()) === 0; i++) await pause(10);
  const closing = laboratory.app.close();
  const { status, body } = await importing;
  expect(status).toBe(200);
  expect(body.stoppedAtLine).toBeGreaterThan(1);
  expect(body.rows).toBe(body.stoppedAtLine - 2);
  await closing;
  expect(await laboratory.service.store.countTests()).toBe(body.stored);
});

describe('columns mapped by hand', () => {
  const OWN = ['Nr;wann;Ø unten (mm);M', 'H-1;2026-05-04;12,5;85', 'H-2;2026-05-04;12,5;-80'].join('\n');
  const MAPPING = [
    { header: 'Nr', column: 'specimen_id' },
    { header: 'wann', column: 'test_date' },
    { header: 'Ø unten (mm)', column: 'diameter_mm' },
    { header: 'M', column: 'torque_max_Nm', unit: 'N·m' },
  ];
  const ask = (path: string, mapping?: unknown) => {
    const data = form(OWN);
    if (mapping !== undefined) data.append('mapping', typeof mapping === 'string' ? mapping : JSON.stringify(mapping));
    return laboratory.sendForm(path, data);
  };

  test('a preview shows how the log is read and keeps nothing', async () => {
    const { status, body } = await ask('/api/v1/logs/preview', MAPPING);
    expect(status, JSON.stringify(body)).toBe(200);
    expect(LogPreviewAnswer.parse(body)).toEqual(body);
    expect(body).toMatchObject({
      delimiter: ';',
      decimalMark: 'comma',
      headers: ['Nr', 'wann', 'Ø unten (mm)', 'M'],
      remembered: false,
      rows: [
        ['H-1', '2026-05-04', '12,5', '85'],
        ['H-2', '2026-05-04', '12,5', '-80'],
      ],
    });
    expect(body.columns.map(({ column }: { column: string }) => column)).toEqual([
      'specimen_id',
      'test_date',
      'diameter_mm',
      'torque_max_Nm',
    ]);
    expect((await laboratory.ask('GET', '/api/v1/laboratory')).body.tests).toBe(0);
  });

  test('an import follows them, and the next log of this kind is read the same way', async () => {
    expect((await ask('/api/v1/logs', MAPPING)).body).toMatchObject({ rows: 2, stored: 2, refused: 0 });
    const { body: page } = await laboratory.ask('GET', '/api/v1/tests?text=h-2');
    expect(page.tests).toMatchObject([{ geometry: { diameterMm: 12.5 }, torqueMaxNm: 80, torqueDirection: 'cw' }]);
    expect((await ask('/api/v1/logs/preview')).body).toMatchObject({ remembered: true });
    expect((await ask('/api/v1/logs')).body).toMatchObject({ rows: 2, stored: 0, unchanged: 2 });
  });

  test('a mapping that cannot be is refused', async () => {
    expect(await ask('/api/v1/logs', '{')).toMatchObject({
      status: 422,
      body: { code: 'invalid-request', input: 'mapping' },
    });
    expect(await ask('/api/v1/logs', [{ header: 'Nr', column: 'colour' }])).toMatchObject({
      status: 422,
      body: { input: '0.column' },
    });
    expect(await ask('/api/v1/logs/preview', [{ ...MAPPING[3], unit: 'furlong' }])).toMatchObject({
      status: 422,
      body: { code: 'unknown-unit' },
    });
  });
});
