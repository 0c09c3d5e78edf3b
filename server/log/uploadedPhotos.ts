import { copyFile } from 'node:fs/promises';
import { fileTypeFromFile } from 'file-type';
import { openPhotoSource } from '../../src/log/node/openPhotoSource.ts';
import type { PhotoFile, PhotoSource } from '../../src/log/node/photoSource.ts';
import type { UploadedFile } from '../http/uploads.ts';

const asPhotoFile = (file: UploadedFile): PhotoFile => ({
  fileName: file.fileName,
  innerPath: file.fileName,
  bytes: file.bytes,
  copyTo: (path) => copyFile(file.path, path),
});

/** The photos of a form: single ones, zip archives, or both; null when it holds none. @throws LabError for an archive that is none */
export async function uploadedPhotos(files: readonly UploadedFile[]): Promise<PhotoSource | null> {
  if (files.length === 0) return null;
  const archives: PhotoSource[] = [];
  const close = (): void => {
    for (const archive of archives) archive.close();
  };
  const single: PhotoFile[] = [];
  try {
    for (const file of files) {
      const type = await fileTypeFromFile(file.path).catch(() => undefined);
      if (type?.mime === 'application/zip' || /\.zip$/i.test(file.fileName))
        archives.push(await openPhotoSource(file.path));
      else single.push(asPhotoFile(file));
    }
  } catch (error) {
    close();
    throw error;
  }
  return {
    files: [...single, ...archives.flatMap((archive) => archive.files)],
    refused: archives.flatMap((archive) => archive.refused),
    close,
  };
}
