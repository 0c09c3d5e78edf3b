/** What a photo is found by. */
export interface NamedPhoto {
  readonly fileName: string;
  /** Name with its folders, parted by "/". */
  readonly innerPath: string;
}

export type PhotoMatch<P extends NamedPhoto> =
  | { readonly found: P }
  | { readonly found: null; readonly why: 'none' | 'several' };

const lastPart = (path: string): string => path.split('/').at(-1) ?? path;
const stem = (name: string): string => name.replace(/\.[a-z0-9]{2,5}$/i, '');
const fold = (name: string): string => name.normalize('NFC').toLowerCase();

/**
 * Finds the photo a log names: by its path inside the folder, by its name, by its name without extension, in that order.
 * Small and capital letters are the same. Two photos of one name are never chosen between.
 */
export function photoFinder<P extends NamedPhoto>(files: readonly P[]): (name: string) => PhotoMatch<P> {
  const indexes = [
    (file: P) => fold(file.innerPath),
    (file: P) => fold(file.fileName),
    (file: P) => fold(stem(file.fileName)),
  ].map((keyOf) => {
    const index = new Map<string, P[]>();
    for (const file of files) {
      const key = keyOf(file);
      const same = index.get(key);
      if (same) same.push(file);
      else index.set(key, [file]);
    }
    return index;
  });
  const [byPath, byName, byStem] = indexes;
  return (name) => {
    const path = fold(name.trim().replaceAll('\\', '/').replace(/^\.\//, ''));
    const candidates = byPath?.get(path) ?? byName?.get(lastPart(path)) ?? byStem?.get(lastPart(path)) ?? [];
    const [only] = candidates;
    if (candidates.length === 1 && only) return { found: only };
    return { found: null, why: candidates.length === 0 ? 'none' : 'several' };
  };
}
