import { cloudNoise, grainyNoise, speckleNoise } from './noiseTexture.ts';
import type { Random } from './random.ts';

/** Linear red, green, blue; 1 = a perfect white. */
export type Rgb = readonly [number, number, number];

/** How a point of a surface answers light; one object is reused for every point. */
export class Surface {
  red = 0;
  green = 0;
  blue = 0;
  /** Share of mirror-like light, 0 to 1, and how tight its lobe is (exponent of Blinn and Phong). */
  gloss = 0;
  tightness = 20;
  /** 1 = the mirrored light takes the colour of the metal and little is scattered. */
  metal = 0;
  /** Turn of the normal along the axis and round it, radians. */
  tipX = 0;
  tipPhi = 0;
  /** Share of what lies behind that shows through, 0 to 1. */
  clear = 0;

  colour(rgb: Rgb, tone: number): void {
    this.red = rgb[0] * tone;
    this.green = rgb[1] * tone;
    this.blue = rgb[2] * tone;
  }

  /** Mixes in another colour by `share`. */
  blend(rgb: Rgb, share: number): void {
    this.red += (rgb[0] - this.red) * share;
    this.green += (rgb[1] - this.green) * share;
    this.blue += (rgb[2] - this.blue) * share;
  }
}

/** Look of a specimen: its outer surface by axis position x (radii) and azimuth φ, and its broken or sawn ends. */
export interface Material {
  readonly name: string;
  /** Usual size of the roughness of its breaks, radii, and how granular they are. */
  readonly roughnessR: number;
  readonly granularity: number;
  outer(x: number, phi: number, surface: Surface): void;
  inner(x: number, y: number, z: number, surface: Surface): void;
  sawn(y: number, z: number, surface: Surface): void;
}

export interface Finish {
  readonly name: string;
  readonly colour: Rgb;
  readonly inside: Rgb;
  readonly roughnessR: number;
  readonly granularity: number;
  readonly gloss?: number;
  readonly tightness?: number;
  readonly metal?: number;
  readonly clear?: number;
  /** Uneven tone: share of large clouds and of fine grain. */
  readonly clouds?: number;
  readonly grain?: number;
  /** Marks round the bar, as from turning: tip of the normal, radians, and pitch, radii. */
  readonly rings?: number;
  readonly ringPitchR?: number;
  /** Lines along the bar, as from drawing or of timber. */
  readonly lines?: number;
  readonly linesPerTurn?: number;
  readonly insideGrain?: number;
}

/** A colour of the kind, a little lighter, darker or tinted. */
export const shade = (random: Random, rgb: Rgb, spread = 0.12): Rgb => {
  const tone = random.uniform(1 - spread, 1 + spread);
  return [
    Math.min(0.95, rgb[0] * tone * random.uniform(0.97, 1.03)),
    Math.min(0.95, rgb[1] * tone),
    Math.min(0.95, rgb[2] * tone * random.uniform(0.97, 1.03)),
  ];
};

/** A material from its finish; `random` places its pattern. */
export function finished(finish: Finish, random: Random): Material {
  const { colour, inside, gloss = 0, tightness = 20, metal = 0, clear = 0 } = finish;
  const { clouds = 0, grain = 0, rings = 0, ringPitchR = 0.05, lines = 0, linesPerTurn = 60 } = finish;
  const insideGrain = finish.insideGrain ?? 0.1;
  const u0 = random.uniform(0, 512);
  const v0 = random.uniform(0, 512);
  const cloud = cloudNoise();
  const grainy = grainyNoise();
  const speckle = speckleNoise();
  return {
    name: finish.name,
    roughnessR: finish.roughnessR,
    granularity: finish.granularity,
    outer(x, phi, surface) {
      let tone = 1;
      if (clouds > 0) tone += clouds * cloud.at(u0 + 60 * x, v0 + 60 * phi);
      if (grain > 0) tone += grain * speckle.at(u0 + 130 * x, v0 + 130 * phi);
      surface.tipX = 0;
      surface.tipPhi = 0;
      if (rings > 0) {
        const wave = (x / ringPitchR) * 2 * Math.PI;
        const uneven = grainy.at(v0 + 170 * x, u0 + 3 * phi);
        surface.tipX = rings * (0.6 * Math.sin(wave) + 0.6 * uneven);
        tone *= 1 + 0.25 * rings * uneven;
      }
      if (lines > 0) {
        const uneven = grainy.at(u0 + 2.2 * x, v0 + (linesPerTurn * 8 * phi) / (2 * Math.PI));
        tone *= 1 + lines * uneven;
        if (metal > 0) surface.tipPhi = 0.4 * lines * uneven;
      }
      surface.colour(colour, Math.max(0.05, tone));
      surface.gloss = gloss;
      surface.tightness = tightness;
      surface.metal = metal;
      surface.clear = clear;
    },
    inner(x, y, z, surface) {
      const tone =
        1 + insideGrain * (grainy.at(u0 + 110 * y, v0 + 110 * z) + 0.6 * speckle.at(v0 + 90 * x, u0 + 90 * y));
      surface.colour(inside, Math.max(0.1, tone));
      surface.gloss = 0.4 * gloss;
      surface.tightness = 12;
      surface.metal = 0.3 * metal;
      surface.tipX = 0;
      surface.tipPhi = 0;
      surface.clear = 0.5 * clear;
    },
    sawn(y, z, surface) {
      const marks = grainy.at(u0 + 140 * y + 20 * z, v0 + 8 * z);
      surface.colour(inside, Math.max(0.1, 1 + 0.12 * marks));
      surface.gloss = 0.5 * gloss;
      surface.tightness = 15;
      surface.metal = 0.5 * metal;
      surface.tipX = 0;
      surface.tipPhi = 0;
      surface.clear = 0.3 * clear;
    },
  };
}

/** Adds patches of another colour, as of rust or flaked paint. */
export function patched(base: Material, name: string, patch: Rgb, share: number, random: Random): Material {
  const u0 = random.uniform(0, 512);
  const v0 = random.uniform(0, 512);
  const cloud = cloudNoise();
  const speckle = speckleNoise();
  return {
    ...base,
    name,
    outer(x, phi, surface) {
      base.outer(x, phi, surface);
      const level = cloud.at(u0 + 55 * x, v0 + 55 * phi) + 0.15 * speckle.at(v0 + 120 * x, u0 + 120 * phi);
      const cover = Math.min(1, Math.max(0, (level + share) * 2.2));
      const tone = 1 + 0.18 * speckle.at(u0 + 150 * x, v0 + 150 * phi);
      surface.blend([patch[0] * tone, patch[1] * tone, patch[2] * tone], cover);
      surface.gloss *= 1 - cover;
      surface.metal *= 1 - cover;
    },
  };
}
