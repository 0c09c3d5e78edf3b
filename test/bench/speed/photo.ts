import sharp from 'sharp';
import { planBreakPhoto } from '../../pictures/photoScene.ts';
import { Random } from '../../pictures/random.ts';
import { storePhoto } from '../../pictures/storePhoto.ts';
import { loadMeasurePhoto } from '../photos/measurement.ts';
import type { Benchmark } from './benchmark.ts';

/** A rendered pair with a helical break, wide enough to measure, as a JPEG of the wanted size. */
async function helicalPair(megapixels: number): Promise<Uint8Array> {
  const wish = { view: 'pair', kind: 'helix', background: 'black paper', light: 'diffuse', megapixels } as const;
  for (let seed = 1; ; seed++) {
    const random = new Random(seed);
    const plan = planBreakPhoto({ ...wish, material: 'chalk', diameterPx: 260 }, random);
    const { lipGapPx, diameterPx } = plan.truth;
    if (lipGapPx !== undefined && lipGapPx.median > 4 && diameterPx > 200) return storePhoto(plan, random);
  }
}

function photoBenchmark(name: string, megapixels: number, rounds: number): Benchmark {
  return {
    name,
    about: `Whole measurement of a ${megapixels} MP photo, warm, against decoding the same JPEG to RGB.`,
    async prepare() {
      const bytes = await helicalPair(megapixels);
      const measurePhoto = await loadMeasurePhoto();
      const result = await measurePhoto(bytes);
      if (result.outcome !== 'measured')
        throw new Error(`the photo of the benchmark was not measured: ${result.reason.code}, ${result.reason.message}`);
      return {
        rounds,
        works: {
          'decode to RGB': () => sharp(bytes).removeAlpha().raw().toBuffer(),
          'measure the photo': () => measurePhoto(bytes),
        },
      };
    },
  };
}

export const photo2Megapixels = photoBenchmark('photo, 2 MP', 2, 11);
export const photo12Megapixels = photoBenchmark('photo, 12 MP', 12, 7);
