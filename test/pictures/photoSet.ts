import { BACKGROUND_NAMES } from './backgrounds.ts';
import type { BreakKind } from './breaks.ts';
import { MATERIAL_NAMES } from './finishes.ts';
import type { View } from './framing.ts';
import { LIGHT_NAMES } from './lights.ts';
import { type PhotoPlan, type PhotoWish, planBreakPhoto } from './photoScene.ts';
import { Random } from './random.ts';
import { NEGATIVE_NAMES, planPhotoWithoutBreak } from './withoutBreak.ts';

export interface SetWish {
  readonly count: number;
  readonly negatives: number;
  readonly seed: number;
  readonly prefix: string;
  readonly megapixels?: number | undefined;
}

export interface PlannedPhoto {
  readonly name: string;
  make(): { readonly plan: PhotoPlan; readonly random: Random };
}

/** Views and kinds in turn: two pairs to one half, helices most often, as on the bench. */
const ROUND: readonly (readonly [View, BreakKind])[] = [
  ['pair', 'helix'],
  ['half', 'helix'],
  ['pair', 'transverse'],
  ['pair', 'oblique-plane'],
  ['pair', 'mixed'],
  ['half', 'transverse'],
  ['pair', 'helix'],
  ['pair', 'longitudinal'],
  ['half', 'oblique-plane'],
  ['pair', 'transverse'],
  ['half', 'helix'],
  ['pair', 'oblique-plane'],
];

/** Every value of a list equally often, in a seeded order. */
function shuffledRepeat<T>(values: readonly T[], count: number, random: Random): T[] {
  const all = Array.from({ length: count }, (_, i) => values[i % values.length] as T);
  for (let i = all.length - 1; i > 0; i--) {
    const j = random.integer(0, i);
    [all[i], all[j]] = [all[j] as T, all[i] as T];
  }
  return all;
}

/** The photos of a set, each with a generator of its own, so that one can be made without the others. */
export function planSet({ count, negatives, seed, prefix, megapixels }: SetWish): PlannedPhoto[] {
  const random = new Random(seed);
  const breaks = count - negatives;
  const materials = shuffledRepeat(MATERIAL_NAMES, breaks, random);
  const backgrounds = shuffledRepeat([...BACKGROUND_NAMES, 'clutter'], breaks, random);
  const lights = shuffledRepeat(LIGHT_NAMES, breaks, random);
  const broken = Array.from({ length: breaks }, (_, i): PlannedPhoto => {
    const [view, kind] = ROUND[i % ROUND.length] as (typeof ROUND)[number];
    const wish: PhotoWish = {
      view,
      kind,
      material: materials[i] as string,
      background: backgrounds[i] as string,
      light: lights[i] as (typeof LIGHT_NAMES)[number],
      ...(megapixels === undefined ? {} : { megapixels }),
    };
    return {
      name: `${prefix}${String(i).padStart(3, '0')}`,
      make: () => {
        const own = new Random(seed * 100_003 + i);
        return { plan: planBreakPhoto(wish, own), random: own };
      },
    };
  });
  const without = Array.from({ length: negatives }, (_, i): PlannedPhoto => {
    const name = NEGATIVE_NAMES[i % NEGATIVE_NAMES.length] as (typeof NEGATIVE_NAMES)[number];
    return {
      name: `${prefix}n${String(i).padStart(2, '0')}`,
      make: () => {
        const own = new Random(seed * 100_003 + 50_000 + i);
        return { plan: planPhotoWithoutBreak(name, own, megapixels), random: own };
      },
    };
  });
  return [...broken, ...without];
}
