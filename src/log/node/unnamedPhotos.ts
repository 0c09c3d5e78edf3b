import { photoFinder } from '../matchPhoto.ts';
import { specimenFinder } from '../photosBySpecimen.ts';
import type { WantedPhoto } from './importPhotos.ts';
import type { PhotoFile } from './photoSource.ts';

/** A row that was kept. */
export type KeptSpecimen = Omit<WantedPhoto, 'name'> & {
  /** True for a row that names its photos: no other is given to it. */
  readonly namesPhotos: boolean;
};

/**
 * Photos that no row names, but whose file name holds the specimen id of one kept row that names none.
 * @returns the photos with the row they belong to; `name` is their path in the folder or archive
 */
export function photosFoundBySpecimen(
  files: readonly PhotoFile[],
  named: readonly WantedPhoto[],
  kept: readonly KeptSpecimen[],
): WantedPhoto[] {
  const find = photoFinder(files);
  const claimed = new Set(named.flatMap(({ name }) => find(name).found?.innerPath ?? []));
  const specimenOf = specimenFinder(kept);
  return files
    .filter((file) => !claimed.has(file.innerPath))
    .flatMap((file) => {
      const { found } = specimenOf(file);
      if (found === null || found.namesPhotos) return [];
      const { line, specimenId, testId, diameterMm } = found;
      return [{ line, specimenId, testId, diameterMm, name: file.innerPath }];
    });
}
