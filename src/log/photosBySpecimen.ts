import type { NamedPhoto } from './matchPhoto.ts';

/** Letters and digits in words parted by single hyphens: `GI 12_front` and `gi-12-Front` are the same. */
const fold = (text: string): string =>
  text
    .normalize('NFC')
    .toLowerCase()
    .replace(/[^\p{L}\p{N}]+/gu, '-')
    .replace(/^-|-$/g, '');

const stem = (name: string): string => name.replace(/\.[a-z0-9]{2,5}$/i, '');

/** Longer names are not looked through word by word. */
const MOST_WORDS = 24;

export type SpecimenMatch<T> = { readonly found: T } | { readonly found: null; readonly why: 'none' | 'several' };

/**
 * Finds the specimen whose id stands in a photo's file name as whole words: `GI-12 front.jpg` is of GI-12, not of GI-1. The
 * longest id wins; between several tests of one id, or several ids of one length, nothing is chosen.
 */
export function specimenFinder<T extends { readonly specimenId: string }>(
  specimens: readonly T[],
): (photo: NamedPhoto) => SpecimenMatch<T> {
  const byId = new Map<string, T | 'several'>();
  for (const specimen of specimens) {
    const id = fold(specimen.specimenId);
    if (id !== '') byId.set(id, byId.has(id) ? 'several' : specimen);
  }
  return ({ fileName }) => {
    const words = fold(stem(fileName)).split('-').slice(0, MOST_WORDS);
    for (let length = words.length; length >= 1; length--) {
      const found = new Set<T | 'several'>();
      for (let from = 0; from + length <= words.length; from++) {
        const specimen = byId.get(words.slice(from, from + length).join('-'));
        if (specimen !== undefined) found.add(specimen);
      }
      const [only] = found;
      if (found.size === 1 && only !== undefined && only !== 'several') return { found: only };
      if (found.size > 0) return { found: null, why: 'several' };
    }
    return { found: null, why: 'none' };
  };
}
