import { photoFinder } from '../matchPhoto.ts';
import { specimenFinder } from '../photosBySpecimen.ts';
import type { WantedPhoto } from './importPhotos.ts';
import type { PhotoFile } from './photoSource.ts';

/** A row that was kept: a photo may belong to it though it names none. */
export type KeptSpecimen = Omit<WantedPhoto, 'name'>;

/**
 * Photos that no row names, but whose file name holds the specimen id of one kept row.
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
      return found === null ? [] : [{ ...found, name: file.innerPath }];
    });
}
