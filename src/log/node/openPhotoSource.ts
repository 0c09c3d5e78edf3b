import { createReadStream, createWriteStream } from 'node:fs';
import { readdir, stat } from 'node:fs/promises';
import { basename, join } from 'node:path';
import { pipeline } from 'node:stream/promises';
import {
  isHidden,
  LARGEST_PHOTO_BYTES,
  MOST_PHOTOS,
  notPhotos,
  type PhotoFile,
  type PhotoSource,
  tooLarge,
} from './photoSource.ts';
import { openZipPhotos } from './zipPhotos.ts';

const DEEPEST_FOLDER = 8;

function fileAt(path: string, innerPath: string, bytes: number): PhotoFile {
  const fileName = basename(path);
  return {
    fileName,
    innerPath,
    bytes,
    async copyTo(to) {
      if (bytes > LARGEST_PHOTO_BYTES) throw tooLarge(fileName, bytes);
      await pipeline(createReadStream(path), createWriteStream(to, { flags: 'wx' }));
    },
  };
}

async function filesIn(folder: string, inner: string, depth: number, files: PhotoFile[]): Promise<void> {
  const entries = await readdir(folder, { withFileTypes: true });
  entries.sort((a, b) => (a.name < b.name ? -1 : 1));
  for (const entry of entries) {
    if (isHidden(entry.name) || files.length >= MOST_PHOTOS) continue;
    const path = join(folder, entry.name);
    const innerPath = inner === '' ? entry.name : `${inner}/${entry.name}`;
    if (entry.isDirectory() && depth < DEEPEST_FOLDER) await filesIn(path, innerPath, depth + 1, files);
    if (entry.isFile()) files.push(fileAt(path, innerPath, (await stat(path)).size));
  }
}

/**
 * Photos of a folder (with its sub-folders; links are not followed) or of a zip archive.
 * @throws LabError `invalid-request` for a path that is neither
 */
export async function openPhotoSource(path: string): Promise<PhotoSource> {
  const found = await stat(path).catch(() => null);
  if (!found) throw notPhotos(path, 'there is no such file');
  if (!found.isDirectory()) return openZipPhotos(path);
  const files: PhotoFile[] = [];
  await filesIn(path, '', 0, files);
  return { files, refused: [], close: () => {} };
}
