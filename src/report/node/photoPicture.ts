import sharp from 'sharp';
import { type OverlayScene, photoOverlay, windowAroundBreak } from '../../figures/photoOverlay.ts';

/** Width of a printed photo, px: 80 mm at 300 dpi. */
const PRINTED_WIDTH_PX = 960;
const ASPECT = 1.5;

/** The part of a photo round the break, upright, with the overlay burnt in, as JPEG; null when it cannot be decoded. */
export async function printedPhoto(path: string, scene: OverlayScene): Promise<Uint8Array | null> {
  try {
    const meta = await sharp(path).metadata();
    const widthPx = meta.autoOrient?.width ?? meta.width;
    const heightPx = meta.autoOrient?.height ?? meta.height;
    const window = windowAroundBreak(scene, { widthPx, heightPx }, ASPECT);
    const scale = Math.min(1, PRINTED_WIDTH_PX / window.widthPx);
    const picture = await sharp(path)
      .autoOrient()
      .extract({ left: window.leftPx, top: window.topPx, width: window.widthPx, height: window.heightPx })
      .resize({ width: Math.max(1, Math.round(window.widthPx * scale)) })
      .flatten({ background: '#ffffff' })
      .toColourspace('srgb')
      .png()
      .toBuffer({ resolveWithObject: true });
    const overlay = await sharp(Buffer.from(photoOverlay(scene, window, picture.info.width / window.widthPx)))
      .resize(picture.info.width, picture.info.height, { fit: 'fill' })
      .png()
      .toBuffer();
    return await sharp(picture.data)
      .composite([{ input: overlay }])
      .jpeg({ quality: 88 })
      .toBuffer();
  } catch {
    return null;
  }
}
