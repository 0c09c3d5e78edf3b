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

interface Finish {
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

const shade = (random: Random, rgb: Rgb, spread = 0.12): Rgb => {
  const tone = random.uniform(1 - spread, 1 + spread);
  return [
    Math.min(0.95, rgb[0] * tone * random.uniform(0.97, 1.03)),
    Math.min(0.95, rgb[1] * tone),
    Math.min(0.95, rgb[2] * tone * random.uniform(0.97, 1.03)),
  ];
};

/** A material from its finish; `random` places its pattern. */
function finished(finish: Finish, random: Random): Material {
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
function patched(base: Material, name: string, patch: Rgb, share: number, random: Random): Material {
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

type Make = (random: Random, pixelsPerRadius: number) => Material;

// A ring must span at least three pixels, or the picture would show a moiré no camera shows.
const pitch = (random: Random, pixelsPerRadius: number) => Math.max(random.uniform(0.03, 0.09), 3 / pixelsPerRadius);

const MAKERS: Readonly<Record<string, Make>> = {
  chalk: (random) =>
    finished(
      {
        name: 'chalk',
        colour: shade(
          random,
          random.pick<Rgb>([
            [0.82, 0.81, 0.78],
            [0.8, 0.62, 0.6],
            [0.55, 0.66, 0.78],
            [0.84, 0.8, 0.5],
          ]),
        ),
        inside: shade(random, [0.86, 0.85, 0.82]),
        roughnessR: 0.022,
        granularity: 0.75,
        clouds: 0.025,
        grain: 0.03,
        insideGrain: 0.06,
      },
      random,
    ),
  'grey cast iron': (random) =>
    finished(
      {
        name: 'grey cast iron',
        colour: shade(random, [0.16, 0.155, 0.15], 0.25),
        inside: shade(random, [0.2, 0.2, 0.2], 0.2),
        roughnessR: 0.025,
        granularity: 0.8,
        gloss: 0.12,
        tightness: 9,
        metal: 0.3,
        clouds: 0.1,
        grain: 0.12,
        insideGrain: 0.22,
      },
      random,
    ),
  'ground steel': (random) =>
    finished(
      {
        name: 'ground steel',
        colour: shade(random, [0.52, 0.52, 0.53]),
        inside: shade(random, [0.33, 0.33, 0.33]),
        roughnessR: 0.012,
        granularity: 0.6,
        gloss: 0.6,
        tightness: 34,
        metal: 0.8,
        rings: 0.05,
        ringPitchR: 0.021,
        clouds: 0.02,
        insideGrain: 0.12,
      },
      random,
    ),
  'turned steel': (random, pixelsPerRadius) =>
    finished(
      {
        name: 'turned steel',
        colour: shade(random, [0.46, 0.46, 0.47]),
        inside: shade(random, [0.3, 0.3, 0.31]),
        roughnessR: 0.012,
        granularity: 0.55,
        gloss: 0.55,
        tightness: 24,
        metal: 0.75,
        rings: random.uniform(0.12, 0.3),
        ringPitchR: pitch(random, pixelsPerRadius),
        insideGrain: 0.12,
      },
      random,
    ),
  'black oxide steel': (random) =>
    finished(
      {
        name: 'black oxide steel',
        colour: shade(random, [0.035, 0.036, 0.042], 0.25),
        inside: shade(random, [0.34, 0.34, 0.34]),
        roughnessR: 0.012,
        granularity: 0.55,
        gloss: 0.22,
        tightness: 22,
        metal: 0.1,
        clouds: 0.08,
        insideGrain: 0.14,
      },
      random,
    ),
  brass: (random, pixelsPerRadius) =>
    finished(
      {
        name: 'brass',
        colour: shade(random, [0.66, 0.47, 0.17]),
        inside: shade(random, [0.55, 0.42, 0.2]),
        roughnessR: 0.01,
        granularity: 0.5,
        gloss: 0.6,
        tightness: 30,
        metal: 0.8,
        rings: random.chance(0.5) ? random.uniform(0.05, 0.18) : 0,
        ringPitchR: pitch(random, pixelsPerRadius),
        lines: 0.05,
        clouds: 0.03,
      },
      random,
    ),
  copper: (random) =>
    finished(
      {
        name: 'copper',
        colour: shade(random, [0.62, 0.31, 0.19]),
        inside: shade(random, [0.5, 0.24, 0.15]),
        roughnessR: 0.012,
        granularity: 0.4,
        gloss: 0.5,
        tightness: 25,
        metal: 0.75,
        lines: 0.08,
        clouds: 0.06,
      },
      random,
    ),
  aluminium: (random, pixelsPerRadius) =>
    finished(
      {
        name: 'aluminium',
        colour: shade(random, [0.7, 0.71, 0.72]),
        inside: shade(random, [0.55, 0.55, 0.56]),
        roughnessR: 0.012,
        granularity: 0.45,
        gloss: 0.45,
        tightness: 16,
        metal: 0.7,
        lines: random.chance(0.5) ? 0.07 : 0,
        rings: random.chance(0.4) ? 0.12 : 0,
        ringPitchR: pitch(random, pixelsPerRadius),
      },
      random,
    ),
  'PMMA, coloured': (random) =>
    finished(
      {
        name: 'PMMA, coloured',
        colour: shade(
          random,
          random.pick<Rgb>([
            [0.5, 0.04, 0.04],
            [0.05, 0.18, 0.5],
            [0.8, 0.8, 0.8],
            [0.06, 0.3, 0.1],
          ]),
        ),
        inside: shade(random, [0.6, 0.55, 0.55]),
        roughnessR: 0.01,
        granularity: 0.2,
        gloss: 0.35,
        tightness: 180,
      },
      random,
    ),
  'PMMA, clear': (random) =>
    finished(
      {
        name: 'PMMA, clear',
        colour: shade(random, [0.5, 0.54, 0.55]),
        inside: shade(random, [0.8, 0.82, 0.83]),
        roughnessR: 0.012,
        granularity: 0.25,
        gloss: 0.4,
        tightness: 200,
        clear: 0.7,
      },
      random,
    ),
  'timber dowel': (random) =>
    finished(
      {
        name: 'timber dowel',
        colour: shade(
          random,
          random.pick<Rgb>([
            [0.62, 0.45, 0.27],
            [0.5, 0.3, 0.16],
            [0.72, 0.58, 0.4],
          ]),
        ),
        inside: shade(random, [0.7, 0.54, 0.34]),
        roughnessR: 0.03,
        granularity: 0.5,
        gloss: 0.03,
        lines: random.uniform(0.05, 0.13),
        linesPerTurn: 40,
        grain: 0.02,
        insideGrain: 0.16,
      },
      random,
    ),
  ceramic: (random) =>
    finished(
      {
        name: 'ceramic',
        colour: shade(
          random,
          random.pick<Rgb>([
            [0.84, 0.82, 0.76],
            [0.78, 0.72, 0.62],
            [0.25, 0.25, 0.27],
          ]),
        ),
        inside: shade(random, [0.8, 0.78, 0.74]),
        roughnessR: 0.014,
        granularity: 0.5,
        gloss: 0.12,
        tightness: 60,
        clouds: 0.01,
        insideGrain: 0.05,
      },
      random,
    ),
  'rusted bar': (random) => {
    const steel = finished(
      {
        name: 'steel',
        colour: shade(random, [0.3, 0.29, 0.28]),
        inside: shade(random, [0.34, 0.33, 0.32]),
        roughnessR: 0.018,
        granularity: 0.6,
        gloss: 0.3,
        tightness: 14,
        metal: 0.5,
        grain: 0.06,
        insideGrain: 0.15,
      },
      random,
    );
    return patched(steel, 'rusted bar', shade(random, [0.25, 0.105, 0.045], 0.2), random.uniform(-0.2, 1.1), random);
  },
  'painted tube': (random) => {
    const paint = finished(
      {
        name: 'painted tube',
        colour: shade(
          random,
          random.pick<Rgb>([
            [0.05, 0.16, 0.42],
            [0.5, 0.36, 0.03],
            [0.42, 0.05, 0.04],
            [0.1, 0.24, 0.12],
            [0.55, 0.56, 0.56],
          ]),
        ),
        inside: shade(random, [0.4, 0.4, 0.4]),
        roughnessR: 0.014,
        granularity: 0.4,
        gloss: 0.16,
        tightness: 70,
      },
      random,
    );
    return random.chance(0.4)
      ? patched(paint, 'painted tube', [0.3, 0.29, 0.28], random.uniform(-1.9, -1.2), random)
      : paint;
  },
};

export const MATERIAL_NAMES = Object.keys(MAKERS);

/** @throws Error when no material has that name */
export function makeMaterial(name: string, random: Random, pixelsPerRadius: number): Material {
  const make = MAKERS[name];
  if (!make) throw new Error(`no material "${name}"; expected one of ${MATERIAL_NAMES.join(', ')}`);
  return make(random, pixelsPerRadius);
}
