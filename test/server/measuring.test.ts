import { createHash } from 'node:crypto';
import { access, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { MeasuringAnswer } from '../../server/http/schemas.ts';
import { type MeasuringRunner, startMeasuring } from '../../server/measure/measuringRunner.ts';
import type { LaboratoryStore } from '../../server/store/laboratoryStore.ts';
import { MOST_TRIES } from '../../server/store/measuringQueue.ts';
import type { Urgency } from '../../server/store/measuringWork.ts';
import { openStore } from '../../server/store/openStore.ts';
import { ENGINE_VERSION, type MeasureJob, type MeasurePool } from '../../src/photo/measurement.ts';
import type { PhotoMeasurement } from '../../src/records/reading.ts';
import { runLaboratory, testInput } from './runningLaboratory.ts';

/** A pool that answers when it is told to, and remembers what it was asked. */
class WatchedPool implements MeasurePool {
  readonly asked: string[] = [];
  readonly faulty = new Set<string>();
  readonly broken = new Set<string>();
  #held: (() => void)[] | null = null;

  hold(): void {
    this.#held = [];
  }

  release(): void {
    for (const resume of this.#held ?? []) resume();
    this.#held = null;
  }

  async measure({ path }: MeasureJob): Promise<PhotoMeasurement> {
    const sha256 = path.split(/[/\\]/).at(-1) ?? '';
    this.asked.push(sha256);
    await access(path);
    if (this.broken.has(sha256)) throw new Error('the pool itself is at fault');
    if (this.#held) await new Promise<void>((resume) => this.#held?.push(resume));
    const code = this.faulty.has(sha256) ? 'fault' : 'no-fracture';
    return {
      outcome: 'not-measured',
      reason: { code, message: 'as the test wants it' },
      sha256,
      elapsedMs: 1,
      warnings: [],
    };
  }

  async close(): Promise<void> {}
}

let dataDir: string;
let store: LaboratoryStore;
let pool: WatchedPool;
let measuring: MeasuringRunner;
let testId: string;

const startRunner = (lanes = 1): MeasuringRunner =>
  startMeasuring({
    store,
    pool,
    lanes,
    onFault: (error) => {
      throw error;
    },
  });

beforeEach(async () => {
  dataDir = await mkdtemp(join(tmpdir(), 'breakplane-measuring-'));
  store = await openStore(dataDir);
  pool = new WatchedPool();
  measuring = startRunner();
  testId = (await store.createTest(testInput())).id;
});
afterEach(async () => {
  pool.release();
  await measuring.stop();
  await store.close();
  await rm(dataDir, { recursive: true, force: true });
});

async function addPhoto(content: string, urgency: Urgency = 'later'): Promise<string> {
  const sha256 = createHash('sha256').update(content).digest('hex');
  const path = join(dataDir, `file-${sha256}`);
  await writeFile(path, content);
  const photo = {
    sha256,
    testId,
    fileName: `${content}.jpg`,
    mediaType: 'image/jpeg',
    bytes: content.length,
    widthPx: null,
    heightPx: null,
  };
  await store.addPhoto(photo, path, urgency);
  return sha256;
}

async function until(what: () => Promise<boolean>): Promise<void> {
  for (let i = 0; i < 500; i++) {
    if (await what()) return;
    await pause(10);
  }
  throw new Error('it did not come to pass');
}

const measuredPhotos = async (): Promise<string[]> =>
  (await store.readingsOf(testId)).map((one) => one.photoSha256 ?? '');

describe('the measuring queue', () => {
  test('measures every photo once, with several lanes', async () => {
    const photos: string[] = [];
    for (let i = 0; i < 20; i++) photos.push(await addPhoto(`photo ${i}`));
    measuring = startRunner(4);
    await Promise.all(photos.map((sha256) => measuring.settled(testId, sha256)));
    expect(await measuring.progress()).toMatchObject({ waiting: 0, running: 0, done: 20 });
    expect([...pool.asked].sort()).toEqual([...photos].sort());
    expect((await measuredPhotos()).sort()).toEqual([...photos].sort());
  });

  test('a photo somebody waits for comes before those of an import', async () => {
    for (let i = 0; i < 3; i++) await addPhoto(`import ${i}`);
    const urgent = await addPhoto('urgent', 'now');
    await measuring.settled(testId, urgent);
    expect(pool.asked[0]).toBe(urgent);
  });

  test('paused, photos of imports wait, and a photo somebody waits for is measured', async () => {
    measuring.pause();
    const later = await addPhoto('later');
    await measuring.settled(testId, await addPhoto('urgent', 'now'));
    expect(await measuring.progress()).toMatchObject({
      waiting: 1,
      running: 0,
      done: 1,
      paused: true,
      secondsLeft: null,
    });
    measuring.resume();
    await measuring.settled(testId, later);
    expect(await measuring.progress()).toMatchObject({ waiting: 0, done: 2, paused: false });
  });

  test('paused, a photo of an import is measured once somebody asks for it', async () => {
    measuring.pause();
    const sha256 = await addPhoto('photo of an import');
    await store.measuring.add(testId, sha256, 'now');
    await measuring.settled(testId, sha256);
    const again = await addPhoto('second photo');
    await addPhoto('second photo', 'now');
    await measuring.settled(testId, again);
    expect(await measuring.progress()).toMatchObject({ waiting: 0, done: 2, paused: true });
  });

  test('cancelled, what waits is taken out, what runs is finished, the photos stay', async () => {
    pool.hold();
    for (let i = 0; i < 4; i++) await addPhoto(`photo ${i}`);
    measuring.wake();
    await until(async () => pool.asked.length === 1);
    expect(await measuring.cancel()).toBe(3);
    pool.release();
    await until(async () => (await store.measuring.counts()).done === 1);
    expect(await measuring.progress()).toMatchObject({ waiting: 0, running: 0, done: 1, cancelled: 3 });
    expect(await store.photosOf(testId)).toHaveLength(4);
  });

  test.each(['faulty', 'broken'] as const)(
    'a photo at which measuring fails (%s) is tried again, then set aside with the reason; the others are measured',
    async (how) => {
      const poisonous = await addPhoto('poison');
      const good = await addPhoto('good');
      pool[how].add(poisonous);
      await measuring.settled(testId, poisonous);
      await measuring.settled(testId, good);
      expect(pool.asked.filter((one) => one === poisonous)).toHaveLength(MOST_TRIES);
      expect(await measuring.progress()).toMatchObject({ waiting: 0, running: 0, done: 1, setAside: 1 });
      const [first] = (await store.readingsOf(testId)).filter((one) => one.photoSha256 === poisonous);
      expect(first?.result).toMatchObject({ outcome: 'not-measured', reason: { code: 'fault' } });
    },
  );

  test('what a crash interrupted is due again; a photo that ends the program every time is set aside', async () => {
    const poisonous = await addPhoto('poison');
    for (let i = 1; i <= MOST_TRIES; i++) {
      expect(await store.measuring.take()).toMatchObject({ photoSha256: poisonous, tries: i });
      // As if the program had been killed here and started again.
      await store.close();
      store = await openStore(dataDir);
    }
    expect(await store.measuring.take()).toBeNull();
    expect(await store.measuring.counts()).toMatchObject({ waiting: 0, running: 0, 'set-aside': 1 });
    const [reading] = await store.readingsOf(testId);
    expect(reading?.result).toMatchObject({ outcome: 'not-measured', reason: { code: 'fault' } });
    expect((await store.readRow(testId)).flags.map(({ code }) => code)).toEqual(['photo-not-measured']);
  });

  test('what a crash interrupted comes after the others, so that they are not blamed for the next crash', async () => {
    const [first, second] = [await addPhoto('first'), await addPhoto('second')];
    expect(await store.measuring.take()).toMatchObject({ photoSha256: first, tries: 1 });
    await store.close();
    store = await openStore(dataDir);
    expect(await store.measuring.take()).toMatchObject({ photoSha256: second, tries: 1 });
    expect(await store.measuring.take()).toMatchObject({ photoSha256: first, tries: 2 });
  });

  test('a photo is at its place before its measurement is due, however busy the queue is', async () => {
    measuring = startRunner(3);
    const photos: string[] = [];
    for (let i = 0; i < 30; i++) {
      photos.push(await addPhoto(`busy ${i}`));
      measuring.wake();
    }
    await Promise.all(photos.map((sha256) => measuring.settled(testId, sha256)));
    expect(await measuring.progress()).toMatchObject({ done: 30, setAside: 0 });
    expect(pool.asked).toHaveLength(30);
  });

  test('a measurement that was ended meanwhile is not kept a second time', async () => {
    const sha256 = await addPhoto('photo');
    const due = await store.measuring.take();
    if (!due) throw new Error('there must be one');
    const result = await pool.measure({ path: await store.photoPath(sha256) });
    const reading = {
      testId,
      method: 'photo-automatic',
      engineVersion: 'e',
      photoSha256: sha256,
      instrument: null,
      operator: null,
      remarks: null,
      setAside: false,
      result,
    } as const;
    expect(await store.measuring.keep(due, reading)).not.toBeNull();
    expect(await store.measuring.keep(due, reading)).toBeNull();
    expect(await store.readingsOf(testId)).toHaveLength(1);
  });

  test('with a newer engine all photos are measured again, and the old readings stay', async () => {
    const sha256 = await addPhoto('photo');
    await measuring.settled(testId, sha256);
    expect(await store.measuring.addOlderThan(ENGINE_VERSION)).toBe(0);
    expect(await store.measuring.addOlderThan('a later engine')).toBe(1);
    await measuring.settled(testId, sha256);
    expect((await store.readingsOf(testId)).map(({ setAside }) => setAside)).toEqual([true, false]);
  });
});

describe('over HTTP', () => {
  test('progress is told, asked for and as events; pause, resume, cancel and again are answered', async () => {
    const laboratory = await runLaboratory({ pool: new WatchedPool(), lanes: 1 });
    try {
      const { body } = await laboratory.ask('GET', '/api/v1/measuring');
      expect(MeasuringAnswer.parse(body)).toEqual(body);
      expect(await laboratory.ask('POST', '/api/v1/measuring/pause')).toMatchObject({
        status: 200,
        body: { paused: true },
      });
      const stop = new AbortController();
      const events = await fetch(`${laboratory.address}/api/v1/measuring/events`, { signal: stop.signal });
      expect(events.headers.get('content-type')).toMatch(/^text\/event-stream/);
      expect(events.headers.get('x-content-type-options')).toBe('nosniff');
      const reader = events.body?.getReader();
      const nextEvent = async () => {
        const { value } = (await reader?.read()) ?? {};
        return JSON.parse(/^data: (.*)$/m.exec(new TextDecoder().decode(value))?.[1] ?? '');
      };
      expect(await nextEvent()).toMatchObject({ paused: true });
      expect(await laboratory.ask('POST', '/api/v1/measuring/resume')).toMatchObject({ body: { paused: false } });
      expect(await nextEvent()).toMatchObject({ paused: false });
      stop.abort();
      // This one goes on listening while the service stops.
      await fetch(`${laboratory.address}/api/v1/measuring/events`);
      expect(await laboratory.ask('POST', '/api/v1/measuring/cancel')).toMatchObject({ body: { changed: 0 } });
      expect(await laboratory.ask('POST', '/api/v1/measuring/again')).toMatchObject({ body: { changed: 0 } });
    } finally {
      await laboratory.stop();
    }
  });
});
