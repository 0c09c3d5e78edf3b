import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { restoreBackup } from '../../server/backup/restoreBackup.ts';
import { tarEnd, tarHeader, tarPadding } from '../../server/backup/tar.ts';
import { openStore } from '../../server/store/openStore.ts';
import { brokenBarPng } from './drawnPhotos.ts';
import { filesBelow, photoForm, type RunningLaboratory, runLaboratory, testInput } from './runningLaboratory.ts';

let laboratory: RunningLaboratory;
let folder: string;
beforeEach(async () => {
  laboratory = await runLaboratory();
  folder = await mkdtemp(join(tmpdir(), 'breakplane-backup-'));
});
afterEach(async () => {
  await laboratory.stop();
  await rm(folder, { recursive: true, force: true });
});

const sha256Of = (bytes: Uint8Array): string => createHash('sha256').update(bytes).digest('hex');

async function fetchBackup(): Promise<string> {
  const response = await fetch(`${laboratory.address}/api/v1/exports/backup.tar`);
  expect(response.status).toBe(200);
  expect(response.headers.get('content-type')).toBe('application/x-tar');
  const path = join(folder, 'backup.tar');
  await writeFile(path, Buffer.from(await response.arrayBuffer()));
  return path;
}

/** A laboratory with a photo, readings by hand, one set aside, and a changed test. */
async function fill(): Promise<string> {
  const { body } = await laboratory.ask('POST', '/api/v1/tests', testInput());
  const photo = await brokenBarPng({ planeAngleDeg: 45 });
  await laboratory.sendForm(`/api/v1/tests/${body.id}/photos`, photoForm({ name: 'a.png', bytes: photo }));
  const { body: added } = await laboratory.ask('POST', `/api/v1/tests/${body.id}/readings`, {
    method: 'instrument',
    planeAngleDeg: 40,
    expandedUncertaintyDeg: 3,
    instrument: 'protractor',
  });
  await laboratory.ask('POST', `/api/v1/readings/${added.reading.id}/set-aside`, { setAside: true, why: 'bent' });
  await laboratory.ask('PUT', `/api/v1/tests/${body.id}`, testInput({ heat: 'H8' }), { 'if-match': '"1"' });
  return body.id;
}

describe('a backup', () => {
  test('restores into an empty folder: same tests, readings, photos and history, same checksums', async () => {
    const id = await fill();
    const before = await laboratory.service.store.readDossier(id);
    const history = await laboratory.service.store.historyOf(id);
    const archive = await fetchBackup();
    const data = join(folder, 'restored');
    const restored = await restoreBackup(archive, data);
    expect(restored.files).toBe(2);
    expect(await filesBelow(join(data, 'photos'))).toEqual(await filesBelow(join(laboratory.dataDir, 'photos')));
    for (const file of await filesBelow(join(data, 'photos'))) {
      const bytes = await readFile(join(data, 'photos', file));
      expect(sha256Of(bytes)).toBe(file.split('/').at(-1));
    }
    const store = await openStore(data);
    try {
      expect(await store.readDossier(id)).toEqual(before);
      expect(await store.historyOf(id)).toEqual(history);
      expect(await store.readRow(id)).toEqual(await laboratory.service.store.readRow(id));
    } finally {
      await store.close();
    }
    expect(await filesBelow(join(laboratory.dataDir, 'incoming'))).toEqual([]);
  });

  test('is an archive that tar itself reads', async () => {
    await fill();
    const { status, stdout, stderr } = spawnSync('tar', ['-tvf', await fetchBackup()], { encoding: 'utf8' });
    expect(status, stderr).toBe(0);
    const names = stdout
      .trim()
      .split('\n')
      .map((line) => line.split(' ').at(-1));
    expect(names.slice(0, 2)).toEqual(['breakplane-backup.json', 'laboratory.sqlite']);
    expect(names).toHaveLength(3);
  });

  test('taken while rows are imported holds whole batches only', async () => {
    const { store } = laboratory.service;
    const batch = 50;
    let stop = false;
    const importing = (async () => {
      for (let b = 0; !stop; b++) {
        await store.upsertLogEntries(
          Array.from({ length: batch }, (_, i) => ({ test: testInput({ specimenId: `B${b}-${i}` }), reading: null })),
        );
      }
    })();
    await new Promise((resolve) => setTimeout(resolve, 100));
    const archive = await fetchBackup();
    stop = true;
    await importing;
    const data = join(folder, 'restored');
    await restoreBackup(archive, data);
    const restored = await openStore(data);
    try {
      const count = await restored.countTests();
      expect(count).toBeGreaterThan(0);
      expect(count % batch).toBe(0);
      expect(count).toBeLessThanOrEqual(await store.countTests());
    } finally {
      await restored.close();
    }
  });
});

describe('a backup that is not whole is refused, and leaves nothing behind', () => {
  const data = () => join(folder, 'restored');
  const expectNothing = async () =>
    expect((await readdir(folder)).filter((name) => name.includes('restor'))).toEqual([]);

  test('cut short', async () => {
    await fill();
    const archive = await fetchBackup();
    const bytes = await readFile(archive);
    for (const share of [0, 0.001, 0.3, 0.9, 0.99]) {
      await writeFile(archive, bytes.subarray(0, Math.floor(bytes.length * share)));
      await expect(restoreBackup(archive, data())).rejects.toMatchObject({ code: 'invalid-request' });
      await expectNothing();
    }
  });

  test('one bit turned, anywhere', async () => {
    await fill();
    const archive = await fetchBackup();
    const bytes = await readFile(archive);
    for (const share of [0.0002, 0.05, 0.5, 0.97]) {
      const turned = Buffer.from(bytes);
      const at = Math.floor(bytes.length * share);
      turned[at] = (turned[at] ?? 0) ^ 1;
      await writeFile(archive, turned);
      const restored = await restoreBackup(archive, data()).then(
        () => 'restored',
        (error: { code?: string }) => error.code,
      );
      // A bit in the padding behind a file belongs to nothing.
      if (restored === 'restored') await rm(data(), { recursive: true });
      else expect(restored).toBe('invalid-request');
      await expectNothing();
    }
  });

  test('a path that leads out of the folder, a file that is not listed, no archive at all', async () => {
    const archive = join(folder, 'made.tar');
    const entry = (path: string, content: string) => {
      const bytes = Buffer.from(content);
      return Buffer.concat([tarHeader({ path, bytes: bytes.length }, 0), bytes, tarPadding(bytes.length)]);
    };
    const manifest = (files: object[]) =>
      entry(
        'breakplane-backup.json',
        JSON.stringify({ format: 'breakplane-backup-1', madeAt: '', programVersion: '', files }),
      );
    const listed = { path: '../outside', bytes: 1, sha256: sha256Of(Buffer.from('x')) };
    for (const parts of [
      [manifest([listed]), entry('../outside', 'x')],
      [manifest([]), entry('laboratory.sqlite', 'x')],
      [entry('laboratory.sqlite', 'x')],
      [Buffer.from('x'.repeat(2000))],
    ]) {
      await writeFile(archive, Buffer.concat([...parts, tarEnd()]));
      await expect(restoreBackup(archive, data())).rejects.toMatchObject({ code: 'invalid-request' });
      await expectNothing();
    }
    await expect(restoreBackup(join(folder, 'nowhere.tar'), data())).rejects.toMatchObject({ code: 'not-found' });
  });

  test('a folder that holds something is left alone', async () => {
    const archive = await fetchBackup();
    await expect(restoreBackup(archive, laboratory.dataDir)).rejects.toMatchObject({ code: 'already-exists' });
    expect(await laboratory.service.store.countTests()).toBe(0);
  });
});

describe('exports', () => {
  test('tests as CSV under the canonical headers; text that looks like a formula is defused, numbers are not', async () => {
    await laboratory.ask(
      'POST',
      '/api/v1/tests',
      testInput({ specimenId: '=HYPERLINK("x")', remarks: 'a, "b"\nc', axialForceN: -5 }),
    );
    const { text, headers } = await laboratory.ask('GET', '/api/v1/exports/tests.csv');
    expect(headers.get('content-type')).toMatch(/^text\/csv/);
    const [header = '', row = ''] = text.split('\r\n');
    expect(header).toMatch(/^specimen_id,test_date,material,heat,section,diameter_mm,/);
    expect(row).toMatch(/^"'=HYPERLINK\(""x""\)",2026-03-02,/);
    expect(row).toContain(',-5,');
    expect(text).toContain('"a, ""b""\nc"');
  });

  test('more tests than are read at once all come, narrowed like the list', async () => {
    const { store } = laboratory.service;
    await store.upsertLogEntries(
      Array.from({ length: 1100 }, (_, i) => ({
        test: testInput({ specimenId: `S${i}`, heat: i % 2 ? 'A' : 'B' }),
        reading: null,
      })),
    );
    const all = await laboratory.ask('GET', '/api/v1/exports/tests.csv');
    expect(new Set(all.text.trim().split('\r\n')).size).toBe(1101);
    const half = await laboratory.ask('GET', '/api/v1/exports/tests.jsonl?heat=a');
    const lines = half.text
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line));
    expect(lines).toHaveLength(550);
    expect(lines[0]).toMatchObject({ test: { heat: 'A' }, readings: [], photos: [] });
  });
});
