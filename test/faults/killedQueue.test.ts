import { setTimeout as pause } from 'node:timers/promises';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { ask, type KillableService, killableService, noisePhoto } from './killableService.ts';
import { randomFrom } from './randomFrom.ts';

const PHOTOS = 200;
const KILLS = 3;
let service: KillableService;

beforeAll(async () => {
  service = await killableService();
});
afterAll(() => service.remove());

/** A log of tests, each with a photo, as one form. */
async function importForm(): Promise<FormData> {
  const rows = Array.from({ length: PHOTOS }, (_, i) => `Q-${i},2026-04-01,solid-round,12,85,ccw,${i}.png`);
  const log = ['specimen_id,test_date,section,diameter_mm,torque_max_Nm,torque_direction,photo', ...rows].join('\n');
  const form = new FormData();
  form.append('log', new Blob([log]), 'queue.csv');
  for (let i = 0; i < PHOTOS; i++)
    form.append('photo', new Blob([new Uint8Array(await noisePhoto(i + 1))]), `${i}.png`);
  return form;
}

test(`${PHOTOS} photos of an import, the service killed ${KILLS} times while it measures: each is measured once, none is lost`, async () => {
  const random = randomFrom(41);
  let address = await service.start();
  await ask(address, '/measuring/pause', {});
  const response = await fetch(`${address}/api/v1/logs`, { method: 'POST', body: await importForm() });
  expect(await response.json()).toMatchObject({ stored: PHOTOS, refused: 0, photosQueued: PHOTOS, photoProblems: [] });
  await ask(address, '/measuring/resume', {});
  let killedAtWork = 0;
  for (let i = 0; i < KILLS; i++) {
    await pause(30 + 300 * random());
    await service.kill();
    address = await service.start();
    const { waiting, running } = await ask(address, '/measuring');
    if (waiting + running > 0) killedAtWork++;
  }
  expect(killedAtWork).toBeGreaterThan(0);
  for (let i = 0; i < 1200; i++) {
    const { waiting, running } = await ask(address, '/measuring');
    if (waiting + running === 0) break;
    await pause(100);
  }
  expect(await ask(address, '/measuring')).toMatchObject({ waiting: 0, running: 0, done: PHOTOS, setAside: 0 });
  const { tests, total } = await ask(address, '/tests?limit=500');
  expect(total).toBe(PHOTOS);
  const counts = tests.map(({ photoCount, readingCount }: { photoCount: number; readingCount: number }) => [
    photoCount,
    readingCount,
  ]);
  expect(counts).toEqual(Array.from({ length: PHOTOS }, () => [1, 1]));
}, 240_000);
