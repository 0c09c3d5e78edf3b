import { Piscina } from 'piscina';
import { LabError } from '../../src/errors.ts';
import { programPart } from '../programPart.ts';
import type { UprightAnswer, UprightJob } from './uprightWorker.ts';

/** Photos with more are not shown: as many as are measured. */
const MOST_PIXELS = 60_000_000;
/** Finished pictures are kept up to this, bytes: the page asks for the same ones again and again. */
const CACHE_BYTES = 48 * 1024 * 1024;
const LONGEST_MS = 30_000;

export interface UprightPhotos {
  /** JPEG of the upright photo, at most `widthPx` wide. @throws LabError `not-a-photo` when it cannot be shown */
  jpeg(sha256: string, path: string, widthPx: number): Promise<Uint8Array>;
  close(): Promise<void>;
}

/** Makes photos fit to be shown, away from the service's own thread. */
export function createUprightPhotos(): UprightPhotos {
  const worker = programPart('uprightWorker.js', 'photos/uprightWorker.ts');
  if (!worker) throw new Error('the worker that shows photos is missing; build the program again');
  const piscina = new Piscina<UprightJob, UprightAnswer>({
    filename: worker.url.href,
    minThreads: 0,
    maxThreads: 1,
    idleTimeout: 60_000,
    execArgv: [...worker.execArgv],
  });
  piscina.on('error', () => {});
  const cache = new Map<string, Uint8Array>();
  let cachedBytes = 0;

  const remember = (key: string, jpeg: Uint8Array): void => {
    cache.set(key, jpeg);
    cachedBytes += jpeg.length;
    for (const [oldest, bytes] of cache) {
      if (cachedBytes <= CACHE_BYTES) break;
      cache.delete(oldest);
      cachedBytes -= bytes.length;
    }
  };

  return {
    async jpeg(sha256, path, widthPx) {
      const key = `${sha256}/${widthPx}`;
      const known = cache.get(key);
      if (known) {
        cache.delete(key);
        cache.set(key, known);
        return known;
      }
      const answer = await piscina
        .run({ path, widthPx, mostPixels: MOST_PIXELS }, { signal: AbortSignal.timeout(LONGEST_MS) })
        .catch((error: unknown) => ({ ok: false, message: String(error) }) as const);
      if (!answer.ok) {
        throw new LabError(
          'not-a-photo',
          `the photo must be one that can be shown, got "${sha256}": ${answer.message}`,
          {
            input: 'sha256',
            value: sha256,
          },
        );
      }
      remember(key, answer.jpeg);
      return answer.jpeg;
    },
    close: () => piscina.destroy(),
  };
}
