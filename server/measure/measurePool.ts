import { createHash } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import { availableParallelism, totalmem } from 'node:os';
import { Piscina } from 'piscina';
import type { MeasureJob, MeasurePool } from '../../src/photo/measurement.ts';
import type { PhotoMeasurement, PhotoNotMeasured } from '../../src/records/reading.ts';
import { type ProgramPart, programPart } from '../programPart.ts';

/** Memory one measurement may take at its largest: the decoded photo, its working copies and the worker itself, MB. */
const MEMORY_A_WORKER_MB = 900;
/** Share of the machine's memory that measuring may take. */
const MEMORY_SHARE = 0.5;
/** Largest heap of a worker, MB; a worker that wants more is ended and its photo not measured. */
const HEAP_A_WORKER_MB = 1024;
/** A photo that takes longer is given up, ms: the usual one takes well below a second. */
const LONGEST_MEASUREMENT_MS = 120_000;
/** A worker with nothing to do is ended after this, ms. */
const IDLE_MS = 60_000;

export interface MeasurePoolOptions {
  /** Number of workers; by default as many as cores and memory allow. */
  readonly size?: number;
  /** The worker's entry; by default the one that measures photos. For tests of the pool itself. */
  readonly worker?: ProgramPart;
  readonly longestMeasurementMs?: number;
  /** Largest heap of a worker, MB. */
  readonly heapMb?: number;
}

/** As many workers as there are cores, but never more than fit into half the memory of the machine; at least 1. */
export function poolSize(cores: number, memoryBytes: number): number {
  const fitting = Math.floor((memoryBytes * MEMORY_SHARE) / (MEMORY_A_WORKER_MB * 1024 * 1024));
  return Math.max(1, Math.min(cores, fitting));
}

async function sha256Of(path: string): Promise<string> {
  try {
    return createHash('sha256')
      .update(await readFile(path))
      .digest('hex');
  } catch {
    return '';
  }
}

async function fault(path: string, message: string, startedMs: number): Promise<PhotoNotMeasured> {
  return {
    outcome: 'not-measured',
    reason: { code: 'fault', message },
    sha256: await sha256Of(path),
    elapsedMs: Math.round(performance.now() - startedMs),
    warnings: [],
  };
}

/**
 * Starts a pool of measuring workers. Whatever happens in a worker (an exception, running out of memory, a crash, no end)
 * costs only its own photo, which then is `not-measured` with code `fault`.
 */
export function createMeasurePool(options: MeasurePoolOptions = {}): MeasurePool {
  const worker = options.worker ?? programPart('measureWorker.js', '../src/photo/node/measureWorker.ts');
  if (!worker) throw new Error('the measuring worker is missing; build the program again');
  const longestMs = options.longestMeasurementMs ?? LONGEST_MEASUREMENT_MS;
  const size = options.size ?? poolSize(availableParallelism(), totalmem());
  const piscina = new Piscina<MeasureJob, PhotoMeasurement>({
    filename: worker.url.href,
    minThreads: 0,
    maxThreads: size,
    idleTimeout: IDLE_MS,
    resourceLimits: { maxOldGenerationSizeMb: options.heapMb ?? HEAP_A_WORKER_MB },
    execArgv: [...worker.execArgv],
  });
  // A worker that dies is replaced; its photo gets its answer below.
  piscina.on('error', () => {});

  // Photos wait here, not in the pool, so that the time of a photo runs only while it is measured.
  const waiting: (() => void)[] = [];
  let busy = 0;
  const takeWorker = async (): Promise<void> => {
    if (busy < size) {
      busy++;
      return;
    }
    await new Promise<void>((resolve) => waiting.push(resolve));
  };
  const giveWorkerBack = (): void => {
    const next = waiting.shift();
    if (next) next();
    else busy--;
  };

  return {
    async measure(job) {
      await takeWorker();
      const startedMs = performance.now();
      const giveUp = new AbortController();
      const timer = setTimeout(() => giveUp.abort(), longestMs);
      try {
        return await piscina.run(job, { signal: giveUp.signal });
      } catch (error) {
        const reason = error instanceof Error ? error.message : String(error);
        const why = giveUp.signal.aborted ? `it took longer than ${longestMs / 1000} s` : reason;
        return await fault(job.path, `measuring this photo failed: ${why}; measure it by hand`, startedMs);
      } finally {
        clearTimeout(timer);
        giveWorkerBack();
      }
    },
    async close() {
      await piscina.destroy();
    },
  };
}
