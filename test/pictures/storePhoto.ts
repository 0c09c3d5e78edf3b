import sharp from 'sharp';
import { develop } from './develop.ts';
import type { PhotoPlan } from './photoScene.ts';
import type { Random } from './random.ts';
import { render } from './render.ts';

/** Turn of the stored pixels that an EXIF orientation undoes, degrees clockwise. */
const TURN_BEFORE_STORING = { 1: 0, 3: 180, 6: 270, 8: 90 } as const;

/** Renders, develops and stores a planned photo as JPEG bytes. */
export async function storePhoto(plan: PhotoPlan, random: Random): Promise<Uint8Array> {
  const picture = render(plan.scene);
  const pixels = develop(picture, plan.work, random);
  const { quality, orientation, sharpened, tellsFocalLength } = plan.storing;
  let upright = sharp(pixels, { raw: { width: picture.widthPx, height: picture.heightPx, channels: 3 } });
  if (sharpened) upright = upright.sharpen({ sigma: 1 });
  const turn = TURN_BEFORE_STORING[orientation];
  if (turn !== 0) upright = upright.rotate(turn);
  upright = upright.withMetadata({ orientation });
  if (tellsFocalLength) {
    const { widthPx, heightPx, focalPx } = plan.scene.camera;
    const on35mm = Math.round((36 * focalPx) / Math.max(widthPx, heightPx));
    upright = upright.withExifMerge({ IFD2: { FocalLengthIn35mmFilm: String(on35mm) } });
  }
  return upright.jpeg({ quality }).toBuffer();
}
