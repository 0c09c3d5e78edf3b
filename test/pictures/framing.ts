import type { BreakCourse } from './breaks.ts';
import { Camera, type CameraRecipe } from './camera.ts';
import type { Random } from './random.ts';

export type View = 'pair' | 'half';

/** A usual shape of picture of about the wanted size, lying or standing. */
export function pictureSize(random: Random, megapixels: number): { widthPx: number; heightPx: number } {
  const ratio = random.pick([4 / 3, 3 / 2, 16 / 9]);
  const wide = Math.round(Math.sqrt(megapixels * 1e6 * ratio));
  const high = Math.round(wide / ratio);
  return random.chance(0.72) ? { widthPx: wide, heightPx: high } : { widthPx: high, heightPx: wide };
}

/** Focal length over the long side of the picture: a telephone's main lens to a camera's longest usual lens or a crop. */
export const focalLength = (random: Random): number => random.logUniform(0.75, 3.2);

/** Camera distance that shows the wanted diameter, but never nearer than seven diameters. */
export function viewFrom(
  focalOverLongSide: number,
  size: { readonly widthPx: number; readonly heightPx: number },
  diameterPx: number,
): Pick<CameraRecipe, 'distanceR' | 'focalPx'> {
  const focalPx = focalOverLongSide * Math.max(size.widthPx, size.heightPx);
  const distanceR = Math.max(14, (2 * focalPx) / diameterPx);
  return { distanceR, focalPx: (diameterPx / 2) * distanceR };
}

/** Where the specimen lies in the picture: turned any way, as large as the wish and the break allow. */
export function frameBreak(
  course: BreakCourse,
  view: View,
  random: Random,
  size: { widthPx: number; heightPx: number },
  wantedDiameterPx: number,
): CameraRecipe {
  const any = random.uniform(-180, 180);
  // Most photographers lay the specimen along the picture.
  const along = size.widthPx > size.heightPx ? 0 : 90;
  const rollDeg = random.chance(0.7) ? along + random.normal(0, 7) + (random.chance(0.5) ? 180 : 0) : any;
  const focalOverLongSide = focalLength(random);
  const shiftX = random.normal(0, 0.06);
  const shiftY = random.normal(0, 0.06);
  const tiltDeg = random.normal(0, 1.8);
  const elevationDeg = random.normal(0, 6);
  let from = Number.POSITIVE_INFINITY;
  let to = Number.NEGATIVE_INFINITY;
  for (let phi = -Math.PI / 2; phi <= Math.PI / 2; phi += 0.05) {
    from = Math.min(from, course.profile.x(phi));
    to = Math.max(to, course.profile.x(phi));
  }
  // One half alone must show its whole tongue, also the part that grows from the back.
  if (view === 'half') to = course.profile.highestX;
  const margin = random.uniform(1.6, 3.2);
  const bounded = Math.max(-5, Math.min(5, tiltDeg));
  for (let diameterPx = wantedDiameterPx; ; diameterPx *= 0.94) {
    const camera = {
      ...size,
      ...viewFrom(focalOverLongSide, size, diameterPx),
      tiltDeg: bounded,
      elevationDeg,
      rollDeg,
      originPx: { xPx: size.widthPx * (0.5 + shiftX), yPx: size.heightPx * (0.5 + shiftY) },
      distortion: random.uniform(-0.012, 0.012),
    };
    const eye = new Camera(camera);
    const fits = [from - margin, to + (view === 'half' ? 0.8 : margin)].every((x) =>
      [-1.1, 1.1].every((y) => {
        const { xPx, yPx } = eye.project({ x, y, z: 0 });
        return xPx > 4 && yPx > 4 && xPx < size.widthPx - 4 && yPx < size.heightPx - 4;
      }),
    );
    if (fits || diameterPx < 40) return camera;
  }
}
