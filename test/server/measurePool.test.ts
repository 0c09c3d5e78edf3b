import { createHash } from 'node:crypto';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest';
import { createMeasurePool, poolSize } from '../../server/measure/measurePool.ts';
import type { MeasurePool } from '../../src/photo/measurement.ts';
import { brokenBarPng } from './drawnPhotos.ts';

const HOSTILE = { url: new URL('./workers/hostile.mjs', import.meta.url), execArgv: [] };
let folder: string;
let pool: MeasurePool | null = null;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'breakplane-pool-'));
});
afterAll(() => rm(folder, { recursive: true, force: true }));
afterEach(async () => {
  await pool?.close();
  pool = null;
});

async function photoNamed(name: string): Promise<string> {
  const path = join(folder, name);
  await writeFile(path, `bytes of ${name}`);
  return path;
}

describe('a fault in a worker costs only its own photo', () => {
  test.each(['throws', 'exits', 'loops', 'eats'])(
    'a photo whose worker %s is not measured, with code fault',
    async (what) => {
      pool = createMeasurePool({
        size: 1,
        worker: HOSTILE,
        longestMeasurementMs: what === 'loops' ? 500 : 60_000,
        heapMb: 64,
      });
      const path = await photoNamed(`${what}.jpg`);
      const result = await pool.measure({ path });
      expect(result).toMatchObject({ outcome: 'not-measured', reason: { code: 'fault' } });
      expect(result.sha256).toBe(createHash('sha256').update(`bytes of ${what}.jpg`).digest('hex'));
      const next = await pool.measure({ path: await photoNamed('plain.jpg') });
      expect(next).toMatchObject({ outcome: 'not-measured', reason: { code: 'no-specimen' } });
    },
  );

  test('photos that wait behind a poisonous one are measured', async () => {
    pool = createMeasurePool({ size: 1, worker: HOSTILE });
    const paths = await Promise.all(['a', 'exits', 'b', 'throws', 'c'].map((name) => photoNamed(`${name}.jpg`)));
    const results = await Promise.all(paths.map((path) => pool?.measure({ path })));
    const codes = results.map((result) => (result?.outcome === 'not-measured' ? result.reason.code : null));
    expect(codes).toEqual(['no-specimen', 'fault', 'no-specimen', 'fault', 'no-specimen']);
  });
});

test('a photo that is not there is not measured, with code fault and no checksum', async () => {
  pool = createMeasurePool({ size: 1 });
  const result = await pool.measure({ path: join(folder, 'nowhere.jpg') });
  expect(result).toMatchObject({ outcome: 'not-measured', reason: { code: 'fault' }, sha256: '' });
});

test('the real worker measures a drawn helix of 45 degrees', async () => {
  pool = createMeasurePool({ size: 1 });
  const path = join(folder, 'helix.png');
  await writeFile(path, await brokenBarPng({ planeAngleDeg: 45 }));
  const result = await pool.measure({ path });
  expect(result.outcome, JSON.stringify(result)).toBe('measured');
  if (result.outcome !== 'measured') return;
  expect(Math.abs(result.planeAngleDeg - 45)).toBeLessThanOrEqual(2);
  expect(result.hand).toBe('left');
});

describe('memory bounds how many photos are measured at once', () => {
  const GB = 1024 ** 3;
  test.each([
    [8, 64 * GB, 8],
    [8, 4 * GB, 2],
    [16, 1 * GB, 1],
    [1, 64 * GB, 1],
  ])('%i cores and %i bytes of memory: %i workers', (cores, memoryBytes, workers) => {
    expect(poolSize(cores, memoryBytes)).toBe(workers);
  });
});
