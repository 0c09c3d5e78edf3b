import type { PhotoSource } from '../../src/log/node/photoSource.ts';

/** So many names are listed; the rest is counted. */
const MOST_NAMED = 20;

/** A source of photos that remembers which of them were asked for. */
export function watchPhotos(source: PhotoSource): { readonly source: PhotoSource; unnamed(): string[] } {
  const asked = new Set<string>();
  return {
    source: {
      ...source,
      files: source.files.map((file) => ({
        ...file,
        copyTo: (path) => {
          asked.add(file.innerPath);
          return file.copyTo(path);
        },
      })),
    },
    unnamed: () => source.files.map((file) => file.innerPath).filter((path) => !asked.has(path)),
  };
}

/** A sentence about photos that came with a log but stand in none of its rows; null when there are none. */
export function noteOnUnnamed(names: readonly string[]): string | null {
  if (names.length === 0) return null;
  const listed = names.slice(0, MOST_NAMED).map((name) => `"${name}"`);
  const rest = names.length > MOST_NAMED ? ` and ${names.length - MOST_NAMED} more` : '';
  const what = names.length === 1 ? 'One photo is' : `${names.length} photos are`;
  return `${what} named by no row and not kept: ${listed.join(', ')}${rest}. Send them on the sheet of their test.`;
}
