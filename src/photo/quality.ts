import type { Picture } from './picture.ts';
import { type SpecimenFrame, toPhoto } from './unroll.ts';

/** Pixels across that a good photo has (design 3b) and below which nothing is measured. */
export const WANTED_PX_ACROSS = 120;
export const LEAST_PX_ACROSS = 24;

/** What a photo's quality was measured to be. */
export interface PhotoQuality {
  readonly [name: string]: number;
  /** Diameter of the specimen, px of the full-resolution photo. */
  readonly pxAcross: number;
  /** Mean lightness of the visible face, 0 to 255. */
  readonly lightness: number;
  /** Share of the visible face that is white beyond recovery. */
  readonly overExposedShare: number;
  /** Share that is black beyond recovery. */
  readonly tooDarkShare: number;
}

export function qualityOf(
  picture: Picture,
  frame: SpecimenFrame,
  fromX: number,
  toX: number,
  scale: number,
): PhotoQuality {
  let n = 0;
  let sum = 0;
  let white = 0;
  let black = 0;
  for (let i = 0; i < 120; i++) {
    for (let k = -6; k <= 6; k++) {
      const p = toPhoto(frame, { x: fromX + ((i + 0.5) * (toX - fromX)) / 120, phi: k * 0.18 });
      const x = Math.round(p.xPx);
      const y = Math.round(p.yPx);
      if (x < 0 || y < 0 || x >= picture.widthPx || y >= picture.heightPx) continue;
      const v = picture.planes[0][y * picture.widthPx + x] as number;
      n += 1;
      sum += v;
      if (v > 253) white += 1;
      if (v < 3) black += 1;
    }
  }
  const m = Math.max(1, n);
  return {
    pxAcross: (2 * frame.radiusPx) / scale,
    lightness: sum / m,
    overExposedShare: white / m,
    tooDarkShare: black / m,
  };
}
