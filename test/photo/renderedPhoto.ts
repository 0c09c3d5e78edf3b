import sharp, { type Sharp } from 'sharp';
import { develop } from '../pictures/develop.ts';
import { type PhotoPlan, type PhotoWish, planBreakPhoto } from '../pictures/photoScene.ts';
import { Random } from '../pictures/random.ts';
import { render } from '../pictures/render.ts';

export interface RenderedPhoto {
  readonly plan: PhotoPlan;
  readonly trueDeg: number;
  /** The upright photo, ready to be stored in any format. */
  upright(): Sharp;
}

/** The first seed whose pair is wide and open enough that any measurement should manage it, rendered. */
export function easyPair(change: Partial<PhotoWish> = {}): RenderedPhoto {
  for (let seed = 1; ; seed++) {
    const random = new Random(seed);
    const wish = {
      material: 'chalk',
      background: 'black paper',
      light: 'diffuse',
      megapixels: 0.5,
      diameterPx: 240,
    } as const;
    const plan = planBreakPhoto({ view: 'pair', kind: 'helix', ...wish, ...change }, random);
    const { diameterPx, lipGapPx, visibleFrontThetaDeg, segments } = plan.truth;
    if (lipGapPx === undefined || visibleFrontThetaDeg === null) continue;
    if (lipGapPx.median < 3 || lipGapPx.median > 12 || diameterPx < 110 || Math.abs(visibleFrontThetaDeg) < 30)
      continue;
    if (segments.some(({ closingStep }) => closingStep)) continue;
    const picture = render(plan.scene);
    const pixels = develop(picture, { ...plan.work, smearPx: 0, noise: 0.006 }, random);
    const raw = { width: picture.widthPx, height: picture.heightPx, channels: 3 } as const;
    return { plan, trueDeg: visibleFrontThetaDeg, upright: () => sharp(pixels, { raw }) };
  }
}
