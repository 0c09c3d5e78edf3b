import { createHash } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import { request } from 'node:http';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { filesBelow, testInput } from '../server/runningLaboratory.ts';
import { ask, type KillableService, killableService, noisePhoto } from './killableService.ts';
import { randomFrom } from './randomFrom.ts';

const REPEATS = 20;
let service: KillableService;

beforeAll(async () => {
  service = await killableService();
});
afterAll(() => service.remove());

/** Sends a share of an upload, then kills the service after `waitMs`; with `share` 1 and `waitMs` null after its answer. */
async function uploadAndKill(
  address: string,
  testId: string,
  photo: Buffer,
  share: number,
  waitMs: number | null,
): Promise<void> {
  const edge = 'edge-of-part';
  const body = Buffer.concat([
    Buffer.from(
      `--${edge}\r\ncontent-disposition: form-data; name="photo"; filename="p.png"\r\ncontent-type: image/png\r\n\r\n`,
    ),
    photo,
    Buffer.from(`\r\n--${edge}--\r\n`),
  ]);
  const call = request(`${address}/api/v1/tests/${testId}/photos`, {
    method: 'POST',
    headers: { 'content-type': `multipart/form-data; boundary=${edge}`, 'content-length': body.length },
  });
  const answered = new Promise<void>((resolve) => {
    call.on('response', (response) => {
      response.resume();
      response.on('end', resolve);
      response.on('error', () => resolve());
    });
    call.on('error', () => resolve());
  });
  await new Promise<void>((resolve) => call.write(body.subarray(0, Math.floor(body.length * share)), () => resolve()));
  if (share === 1) call.end();
  if (waitMs === null) await answered;
  else await pause(waitMs);
  await service.kill();
  await answered;
  call.destroy();
}

/** What the service says and what lies on the disk must agree. */
async function expectNothingHalf(address: string, testId: string): Promise<number> {
  for (let i = 0; i < 200; i++) {
    const { waiting, running: busy } = await ask(address, '/measuring');
    if (waiting + busy === 0) break;
    await pause(50);
  }
  const { photos, readings } = await ask(address, `/tests/${testId}`);
  const onDisk = await filesBelow(join(service.dataDir, 'photos'));
  const named = photos.map(({ sha256 }: { sha256: string }) => join(sha256.slice(0, 2), sha256.slice(2, 4), sha256));
  expect(onDisk).toEqual([...named].sort());
  for (const file of onDisk) {
    const bytes = await readFile(join(service.dataDir, 'photos', file));
    expect(createHash('sha256').update(bytes).digest('hex')).toBe(file.split('/').at(-1));
  }
  expect(await filesBelow(join(service.dataDir, 'incoming'))).toEqual([]);
  const measured = readings.map(({ photoSha256 }: { photoSha256: string }) => photoSha256).sort();
  expect(measured).toEqual(photos.map(({ sha256 }: { sha256: string }) => sha256).sort());
  return photos.length;
}

test(`killed ${REPEATS} times in the middle of an upload: no half record, no orphan file, every kept photo measured once`, async () => {
  const random = randomFrom(20260302);
  let address = await service.start();
  const { id } = await ask(address, '/tests', testInput());
  let kept = 0;
  for (let i = 0; i < REPEATS; i++) {
    const photo = await noisePhoto(i + 1, 200_000);
    const [share, waitMs] = [
      [random(), 5 * random()],
      [1, 2 * random()],
      [1, 120 * random()],
      [1, null],
    ][i % 4] as [number, number | null];
    await uploadAndKill(address, id, photo, share, waitMs);
    address = await service.start();
    const count = await expectNothingHalf(address, id);
    // What was answered is kept; what was cut off is not.
    if (i % 4 === 3) expect(count).toBe(kept + 1);
    if (i % 4 === 0) expect(count).toBe(kept);
    kept = count;
  }
  expect(kept).toBeGreaterThanOrEqual(REPEATS / 4);
}, 240_000);
