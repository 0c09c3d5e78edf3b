import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileTypeFromFile } from 'file-type';
import { LabError } from '../../errors.ts';
import { ENGINE_VERSION, type MeasurePool } from '../../photo/measurement.ts';
import type { LaboratoryRecords, Photo } from '../../records/laboratoryRecords.ts';
import type { PhotoProblem } from '../importSummary.ts';
import { photoFinder } from '../matchPhoto.ts';
import type { PhotoFile, PhotoSource } from './photoSource.ts';

/** A photo that a kept row names. */
export interface WantedPhoto {
  readonly line: number;
  readonly specimenId: string;
  readonly name: string;
  readonly testId: string;
  readonly diameterMm: number | null;
}

export interface ImportPhotos {
  readonly wanted: readonly WantedPhoto[];
  readonly source: PhotoSource;
  readonly records: LaboratoryRecords;
  /** Measures each new photo before the import returns; null: somebody else does it later (see `onPhotoKept`). */
  readonly pool: MeasurePool | null;
  readonly onPhotoKept?: (photo: Photo, testId: string) => void | Promise<void>;
  readonly onProblem: (problem: PhotoProblem) => void;
  readonly onProgress: (done: number, total: number) => void;
  readonly signal?: AbortSignal | undefined;
  /** Folder for the copies that are handed to the store; best on its own disk. */
  readonly temporaryDir?: string | undefined;
}

const MEDIA_TYPES = new Set(['image/jpeg', 'image/png', 'image/webp', 'image/tiff', 'image/heic', 'image/heif']);
const AT_ONCE = 4;

async function sha256Of(path: string): Promise<string> {
  const hash = createHash('sha256');
  for await (const chunk of createReadStream(path)) hash.update(chunk);
  return hash.digest('hex');
}

/** Copies one photo aside, checks that it is one, and gives the copy to the store; null when the test already has it. */
async function keepPhoto(
  file: PhotoFile,
  testId: string,
  records: LaboratoryRecords,
  copyPath: string,
): Promise<Photo | null> {
  await file.copyTo(copyPath);
  const type = await fileTypeFromFile(copyPath);
  if (!type || !MEDIA_TYPES.has(type.mime)) {
    throw new LabError(
      'not-a-photo',
      `photo must be JPEG, PNG, WebP, TIFF or HEIC, got ${type?.mime ?? 'no picture'} in "${file.fileName}"`,
      {
        input: 'photo',
        value: file.fileName,
      },
    );
  }
  const sha256 = await sha256Of(copyPath);
  const known = await records.photosOf(testId);
  if (known.some((photo) => photo.sha256 === sha256)) return null;
  const { fileName, bytes } = file;
  return records.addPhoto(
    { sha256, testId, fileName, mediaType: type.mime, bytes, widthPx: null, heightPx: null },
    copyPath,
  );
}

async function measurePhoto(work: ImportPhotos, photo: Photo, wanted: WantedPhoto): Promise<boolean> {
  if (!work.pool) return false;
  const { diameterMm } = wanted;
  const result = await work.pool.measure({
    path: await work.records.photoPath(photo.sha256),
    options: diameterMm === null ? {} : { diameterMm },
  });
  await work.records.addReading({
    testId: wanted.testId,
    method: 'photo-automatic',
    engineVersion: ENGINE_VERSION,
    photoSha256: photo.sha256,
    instrument: null,
    operator: null,
    remarks: null,
    setAside: false,
    result,
  });
  return result.outcome === 'measured';
}

const NO_MATCH = {
  none: 'photo must be in the folder or archive, got no file of this name',
  several: 'photo must be named so that one file fits, got several of this name; give its path inside the folder',
} as const;

/** Keeps and measures the photos that rows name; a photo that cannot be kept is a problem of its own, not of the import. */
export async function importPhotos(work: ImportPhotos): Promise<{ queued: number; measured: number }> {
  const find = photoFinder(work.source.files);
  const folder = await mkdtemp(join(work.temporaryDir ?? tmpdir(), 'breakplane-import-'));
  const count = { queued: 0, measured: 0, done: 0 };
  let next = 0;

  const one = async (wanted: WantedPhoto, copyPath: string): Promise<void> => {
    const match = find(wanted.name);
    if (!match.found) throw new LabError('not-found', NO_MATCH[match.why], { input: 'photo', value: wanted.name });
    const photo = await keepPhoto(match.found, wanted.testId, work.records, copyPath);
    if (!photo) return;
    count.queued++;
    await work.onPhotoKept?.(photo, wanted.testId);
    if (await measurePhoto(work, photo, wanted)) count.measured++;
  };

  const lane = async (): Promise<void> => {
    for (let i = next++; i < work.wanted.length; i = next++) {
      const wanted = work.wanted[i];
      if (!wanted || work.signal?.aborted) return;
      const copyPath = join(folder, String(i));
      try {
        await one(wanted, copyPath);
      } catch (error) {
        if (!(error instanceof LabError)) throw error;
        const { line, specimenId, name } = wanted;
        work.onProblem({ line, specimenId, photo: name, code: error.code, message: error.message });
      } finally {
        await rm(copyPath, { force: true });
      }
      work.onProgress(++count.done, work.wanted.length);
    }
  };

  try {
    await Promise.all(Array.from({ length: AT_ONCE }, lane));
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
  return { queued: count.queued, measured: count.measured };
}
