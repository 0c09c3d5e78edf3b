import { LabError } from '../../src/errors.ts';
import { isRound } from '../../src/mechanics/sections/registry.ts';
import { ENGINE_VERSION, type MeasurePool } from '../../src/photo/measurement.ts';
import type { PhotoMeasurement } from '../../src/records/reading.ts';
import type { LaboratoryStore } from '../store/laboratoryStore.ts';
import { type DueMeasurement, MOST_TRIES } from '../store/measuringQueue.ts';

/** Where the measuring of photos stands. */
export interface MeasuringProgress {
  readonly waiting: number;
  readonly running: number;
  readonly done: number;
  readonly setAside: number;
  readonly cancelled: number;
  readonly paused: boolean;
  /** Photos a minute, over the last ones; null before there is one. */
  readonly photosPerMinute: number | null;
  /** Time until nothing waits, at that rate; null when it is not known. */
  readonly secondsLeft: number | null;
}

export interface MeasuringRunner {
  /** Says that something may be due. */
  wake(): void;
  /** Resolves when no measurement of this photo is due any more. */
  settled(testId: string, sha256: string): Promise<void>;
  progress(): Promise<MeasuringProgress>;
  /** Photos of imports wait; a photo that somebody has just sent is measured all the same. */
  pause(): void;
  resume(): void;
  cancel(): Promise<number>;
  /** Called after every change; returns how to stop listening. */
  onChange(listener: () => void): () => void;
  /** Takes nothing new; resolves when what runs has ended. */
  stop(): Promise<void>;
}

interface RunnerOptions {
  readonly store: LaboratoryStore;
  readonly pool: MeasurePool;
  /** Photos measured at the same time. */
  readonly lanes: number;
  readonly clock?: () => number;
  /** Told of faults of the program; the queue goes on. */
  readonly onFault: (error: unknown) => void;
}

/** Rate and time left are those of the last minute. */
const RATE_WINDOW_MS = 60_000;
const keyOf = (testId: string, sha256: string): string => `${testId}/${sha256}`;

/** Works the measuring queue of the store off: what is due survives the program, what is done is kept once. */
export function startMeasuring({ store, pool, lanes, clock = Date.now, onFault }: RunnerOptions): MeasuringRunner {
  const waiters = new Map<string, (() => void)[]>();
  const listeners = new Set<() => void>();
  const ends: number[] = [];
  const lanesRunning = new Set<Promise<void>>();
  let paused = false;
  let stopping = false;
  let calls = 0;

  const changed = (): void => {
    for (const listener of listeners) listener();
  };

  const settle = (testId: string, sha256: string): void => {
    const key = keyOf(testId, sha256);
    for (const resolve of waiters.get(key) ?? []) resolve();
    waiters.delete(key);
  };

  const measure = async (due: DueMeasurement): Promise<PhotoMeasurement> => {
    const test = await store.readTest(due.testId);
    const options = isRound(test.geometry) ? { diameterMm: test.geometry.diameterMm } : {};
    return pool.measure({ path: await store.photoPath(due.photoSha256), options });
  };

  /** Whatever goes wrong with one photo is an answer about this photo; the queue goes on. */
  const measureOrFault = (due: DueMeasurement): Promise<PhotoMeasurement> =>
    measure(due).catch((error: unknown) => ({
      outcome: 'not-measured',
      reason: {
        code: 'fault',
        message: `measuring this photo failed: ${error instanceof Error ? error.message : String(error)}`,
      },
      sha256: due.photoSha256,
      elapsedMs: 0,
      warnings: [],
    }));

  const work = async (due: DueMeasurement): Promise<void> => {
    const result = await measureOrFault(due);
    const fault = result.outcome === 'not-measured' && result.reason.code === 'fault' ? result.reason.message : null;
    if (fault !== null && stopping) return;
    if (fault !== null && due.tries < MOST_TRIES) return store.measuring.giveBack(due, fault);
    await store.measuring.keep(
      due,
      {
        testId: due.testId,
        method: 'photo-automatic',
        engineVersion: ENGINE_VERSION,
        photoSha256: due.photoSha256,
        instrument: null,
        operator: null,
        remarks: null,
        setAside: false,
        result,
      },
      fault,
    );
    const nowMs = clock();
    ends.push(nowMs);
    while (ends[0] !== undefined && ends[0] < nowMs - RATE_WINDOW_MS) ends.shift();
    settle(due.testId, due.photoSha256);
  };

  const lane = async (): Promise<void> => {
    while (!stopping) {
      const seen = calls;
      const due = await store.measuring.take(paused ? 'now' : 'later');
      if (!due) {
        if (seen === calls) return;
        continue;
      }
      changed();
      await work(due);
      changed();
    }
  };

  const start = (): void => {
    while (!stopping && lanesRunning.size < lanes) {
      const run = lane()
        .catch((error: unknown) => {
          onFault(error);
          for (const key of waiters.keys()) {
            const [testId = '', sha256 = ''] = key.split('/');
            settle(testId, sha256);
          }
        })
        .finally(() => lanesRunning.delete(run));
      lanesRunning.add(run);
    }
  };

  const wake = (): void => {
    calls++;
    start();
  };

  const photosPerMinute = (): number | null => {
    const [first] = ends;
    const last = ends.at(-1);
    if (first === undefined || last === undefined || ends.length < 2 || last === first) return null;
    return ((ends.length - 1) * 60_000) / (last - first);
  };

  return {
    wake,
    async settled(testId, sha256) {
      if (stopping)
        throw new LabError('busy', 'the service is stopping; the photo is kept and measured at its next start');
      const done = new Promise<void>((resolve) => {
        const key = keyOf(testId, sha256);
        waiters.set(key, [...(waiters.get(key) ?? []), resolve]);
      });
      if (!(await store.measuring.isDue(testId, sha256))) settle(testId, sha256);
      wake();
      return done;
    },
    async progress() {
      const counts = await store.measuring.counts();
      const rate = photosPerMinute();
      return {
        waiting: counts.waiting,
        running: counts.running,
        done: counts.done,
        setAside: counts['set-aside'],
        cancelled: counts.cancelled,
        paused,
        photosPerMinute: rate,
        secondsLeft: rate === null || paused ? null : Math.round(((counts.waiting + counts.running) / rate) * 60),
      };
    },
    pause() {
      paused = true;
      changed();
    },
    resume() {
      paused = false;
      wake();
      changed();
    },
    async cancel() {
      const count = await store.measuring.cancel();
      for (const key of [...waiters.keys()]) {
        const [testId = '', sha256 = ''] = key.split('/');
        if (!(await store.measuring.isDue(testId, sha256))) settle(testId, sha256);
      }
      changed();
      return count;
    },
    onChange(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    async stop() {
      stopping = true;
      for (const key of [...waiters.keys()]) {
        const [testId = '', sha256 = ''] = key.split('/');
        if (!(await store.measuring.isDue(testId, sha256))) settle(testId, sha256);
      }
      await Promise.allSettled([...lanesRunning]);
    },
  };
}
