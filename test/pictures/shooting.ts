import type { CameraWork } from './develop.ts';
import type { Random } from './random.ts';

/** How a photo is stored: quality of JPEG compression and EXIF orientation. */
export interface Storing {
  readonly quality: number;
  readonly orientation: 1 | 3 | 6 | 8;
  readonly sharpened: boolean;
  /** Whether the file tells its focal length, as telephones do. */
  readonly tellsFocalLength: boolean;
}

/** Lens, sensor and hand of a usual photo; `scale` is the size of its pixels against 2 MP. */
export function cameraWork(random: Random, scale: number): CameraWork {
  const smeared = random.chance(0.1);
  return {
    blurPx: scale * random.logUniform(0.5, 1.5),
    smearPx: smeared ? scale * random.uniform(1.5, 4) : 0,
    smearDeg: random.uniform(0, 180),
    exposureStops: random.normal(0.15, 0.45),
    noise: random.logUniform(0.004, 0.03),
    vignette: random.uniform(0, 0.3),
    redGain: random.uniform(0.93, 1.08),
    blueGain: random.uniform(0.9, 1.08),
  };
}

/** How a usual photo is stored. */
export function storing(random: Random): Storing {
  return {
    quality: random.integer(62, 95),
    orientation: random.chance(0.8) ? 1 : random.pick([3, 6, 8] as const),
    sharpened: random.chance(0.35),
    tellsFocalLength: random.chance(0.4),
  };
}
