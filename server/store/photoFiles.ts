import { createHash, randomUUID } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { access, copyFile, link, mkdir, open, readdir, rename, rm } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import { LabError } from '../../src/errors.ts';
import type { DataFolder } from './dataFolder.ts';

/** A file in `incoming` under the name of its content, as long as its record is not written. */
export interface IncomingPhoto {
  readonly sha256: string;
  readonly path: string;
}

const KEEP = /^([0-9a-f]{64})\.[0-9a-f-]+\.keep$/;
const SHA256 = /^[0-9a-f]{64}$/;

/** Where the bytes with this SHA-256 lie. */
export const photoFilePath = (folder: DataFolder, sha256: string): string =>
  join(folder.photos, sha256.slice(0, 2), sha256.slice(2, 4), sha256);

export async function sha256OfFile(path: string): Promise<string> {
  const hash = createHash('sha256');
  for await (const chunk of createReadStream(path, { highWaterMark: 1024 * 1024 })) hash.update(chunk);
  return hash.digest('hex');
}

async function toDisk(path: string): Promise<void> {
  const handle = await open(path, 'r');
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

async function moveOrCopy(from: string, to: string): Promise<void> {
  try {
    await rename(from, to);
  } catch (error) {
    if (!(error instanceof Error && 'code' in error && error.code === 'EXDEV')) throw error;
    await copyFile(from, to);
    await rm(from, { force: true });
  }
}

/**
 * Takes a finished file into `incoming`, on the disk of the data folder and written out to it.
 * @throws LabError `contradiction` when the bytes are not those of the SHA-256
 */
export async function takeIn(folder: DataFolder, sha256: string, from: string): Promise<IncomingPhoto> {
  if (!SHA256.test(sha256)) {
    throw new LabError('invalid-request', `sha256 must be 64 hexadecimal digits, got "${sha256}"`, {
      input: 'sha256',
      value: sha256,
    });
  }
  const path = join(folder.incoming, `${sha256}.${randomUUID()}.keep`);
  await moveOrCopy(from, path);
  try {
    const found = await sha256OfFile(path);
    if (found !== sha256) {
      throw new LabError('contradiction', `the photo's bytes must have the SHA-256 ${sha256}, got ${found}`, {
        input: 'sha256',
        value: sha256,
      });
    }
    await toDisk(path);
  } catch (error) {
    await rm(path, { force: true });
    throw error;
  }
  return { sha256, path };
}

/**
 * Puts a taken-in file at its place; it stays in `incoming` too, until its record is written (`forget`): so that after a
 * crash in between the file at its place is known to belong to nothing.
 * @returns whether it was not there yet
 */
export async function putInPlace(folder: DataFolder, incoming: IncomingPhoto): Promise<boolean> {
  const place = photoFilePath(folder, incoming.sha256);
  if (await hasPhotoFile(folder, incoming.sha256)) return false;
  await mkdir(dirname(place), { recursive: true });
  try {
    await link(incoming.path, place);
  } catch {
    // Not every file system knows links; a copy becomes visible whole as well.
    const copy = `${incoming.path}.copy`;
    await copyFile(incoming.path, copy);
    await toDisk(copy);
    await rename(copy, place);
  }
  await toDisk(dirname(place));
  return true;
}

/** Takes a file whose record was not written away from its place. */
export const takeAway = (folder: DataFolder, sha256: string): Promise<void> =>
  rm(photoFilePath(folder, sha256), { force: true });

/** Takes a file out of `incoming`, once its record is written or given up. */
export const forget = (incoming: IncomingPhoto): Promise<void> => rm(incoming.path, { force: true });

/**
 * Ends what a crash interrupted: a file whose record was written is at its place, every other one is thrown away.
 * @param hasRecord whether the store knows a photo with this SHA-256
 */
export async function recoverIncoming(
  folder: DataFolder,
  hasRecord: (sha256: string) => Promise<boolean>,
): Promise<void> {
  for (const name of await readdir(folder.incoming)) {
    const path = join(folder.incoming, name);
    const sha256 = KEEP.exec(name)?.[1];
    if (sha256 !== undefined) {
      if (!(await hasRecord(sha256))) await takeAway(folder, sha256);
      else if ((await sha256OfFile(path)) === sha256) await putInPlace(folder, { sha256, path });
    }
    await rm(path, { recursive: true, force: true });
  }
}

export async function hasPhotoFile(folder: DataFolder, sha256: string): Promise<boolean> {
  return access(photoFilePath(folder, sha256)).then(
    () => true,
    () => false,
  );
}
