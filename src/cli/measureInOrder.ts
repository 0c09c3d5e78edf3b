import { access, constants, stat } from 'node:fs/promises';
import type { MeasureJob, MeasurePool } from '../photo/measurement.ts';
import type { PhotoMeasurement, PhotoNotMeasured } from '../records/reading.ts';

/** The result of one photo, with its name as it was typed. */
export interface MeasuredPhoto {
  readonly file: string;
  readonly measurement: PhotoMeasurement;
}

export interface MeasureInOrder {
  readonly photos: readonly string[];
  readonly pool: MeasurePool;
  readonly options: NonNullable<MeasureJob['options']>;
  /** How many photos are handed to the pool ahead of the one that is waited for. */
  readonly atOnce: number;
  /** Called when any photo is done, in whatever order. */
  readonly onDone: () => void;
  /** Called for each photo in the order given, as soon as its turn has come. */
  readonly onResult: (photo: MeasuredPhoto) => void;
  /** True when nobody reads the results any more. */
  readonly stop: () => boolean;
}

const notMeasured = (code: 'not-a-photo' | 'fault', message: string): PhotoNotMeasured => ({
  outcome: 'not-measured',
  reason: { code, message },
  sha256: '',
  elapsedMs: 0,
  warnings: [],
});

const WHY: Readonly<Record<string, string>> = {
  ENOENT: 'there is no such file',
  ENOTDIR: 'there is no such file',
  EACCES: 'reading it is not permitted',
  EPERM: 'reading it is not permitted',
};

async function whyUnreadable(path: string): Promise<string | null> {
  try {
    const found = await stat(path);
    if (found.isDirectory()) return 'it is a folder';
    if (!found.isFile()) return 'it is not a regular file';
    await access(path, constants.R_OK);
    return null;
  } catch (error) {
    const code = error instanceof Error && 'code' in error ? String(error.code) : 'unreadable';
    return WHY[code] ?? code;
  }
}

async function measureOne(
  path: string,
  pool: MeasurePool,
  options: MeasureInOrder['options'],
): Promise<PhotoMeasurement> {
  const why = await whyUnreadable(path);
  if (why !== null) return notMeasured('not-a-photo', `photo must be a file that can be read, got "${path}": ${why}`);
  try {
    return await pool.measure({ path, options });
  } catch (error) {
    // One poisonous photo must not cost the others their lines.
    return notMeasured(
      'fault',
      `measuring "${path}" failed: ${error instanceof Error ? error.message : String(error)}`,
    );
  }
}

/** Measures photos at the same time but hands the results on in the order given; every photo gets a result. */
export async function measureInOrder(work: MeasureInOrder): Promise<void> {
  const running: Promise<MeasuredPhoto>[] = [];
  let next = 0;
  const startOne = (): void => {
    const file = work.photos[next++];
    if (file === undefined) return;
    running.push(
      measureOne(file, work.pool, work.options).then((measurement) => {
        work.onDone();
        return { file, measurement };
      }),
    );
  };
  while (running.length < work.atOnce && next < work.photos.length) startOne();
  for (let first = running.shift(); first !== undefined; first = running.shift()) {
    const photo = await first;
    if (work.stop()) return;
    work.onResult(photo);
    startOne();
  }
}
