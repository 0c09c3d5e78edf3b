import type { Rgb, Surface } from './materials.ts';
import { cloudNoise, grainyNoise, speckleNoise } from './noiseTexture.ts';
import type { Random } from './random.ts';

/** What lies under the specimen: colour at a place of the bench, in radii of the specimen. */
export interface Background {
  readonly name: string;
  paint(u: number, v: number, surface: Surface): void;
}

type Make = (random: Random, pixelsPerRadius: number) => (u: number, v: number, surface: Surface) => void;

const tinted = (random: Random, rgb: Rgb, spread = 0.15): Rgb => {
  const tone = random.uniform(1 - spread, 1 + spread);
  return [rgb[0] * tone, rgb[1] * tone * random.uniform(0.98, 1.02), rgb[2] * tone * random.uniform(0.95, 1.05)];
};

/** Paper: tone of one colour, faint fibres. */
const paper =
  (rgb: Rgb): Make =>
  (random, pixelsPerRadius) => {
    const colour = tinted(random, rgb, 0.1);
    const grain = speckleNoise();
    const cloud = cloudNoise();
    const perRadius = Math.min(120, pixelsPerRadius / 2);
    return (u, v, surface) => {
      surface.colour(colour, 1 + 0.012 * grain.at(u * perRadius, v * perRadius) + 0.012 * cloud.at(u * 30, v * 30));
    };
  };

/** Share of a line of half-width `half` at distance `away`, with an edge `soft` wide. */
const line = (away: number, half: number, soft: number): number =>
  Math.min(1, Math.max(0, (half + soft / 2 - Math.abs(away)) / soft));

/** Signed distance from the nearest whole multiple of `step`. */
const fromMultiple = (value: number, step: number): number => value - step * Math.round(value / step);

const BACKGROUNDS: Readonly<Record<string, Make>> = {
  'white paper': paper([0.8, 0.8, 0.79]),
  'grey paper': paper([0.3, 0.3, 0.31]),
  'black paper': paper([0.03, 0.03, 0.032]),
  'ruled paper': (random, pixelsPerRadius) => {
    const base = paper([0.8, 0.79, 0.76])(random, pixelsPerRadius);
    const step = random.uniform(0.7, 1.6);
    const ink: Rgb = random.pick<Rgb>([
      [0.35, 0.45, 0.65],
      [0.5, 0.5, 0.5],
      [0.6, 0.4, 0.4],
    ]);
    const squared = random.chance(0.5);
    return (u, v, surface) => {
      base(u, v, surface);
      const soft = 1.2 / pixelsPerRadius;
      const across = line(fromMultiple(v, step), 0.012, soft);
      const along = squared ? line(fromMultiple(u, step), 0.012, soft) : 0;
      surface.blend(ink, 0.6 * Math.max(across, along));
    };
  },
  'wood grain': (random) => {
    const light = tinted(
      random,
      random.pick<Rgb>([
        [0.55, 0.38, 0.22],
        [0.36, 0.2, 0.1],
        [0.62, 0.5, 0.34],
      ]),
    );
    const dark: Rgb = [light[0] * 0.55, light[1] * 0.5, light[2] * 0.45];
    const cloud = cloudNoise();
    const grain = grainyNoise();
    const scale = random.uniform(1.5, 3.5);
    const shift = random.uniform(0, 512);
    const board = random.uniform(7, 14);
    return (u, v, surface) => {
      const plank = Math.floor(v / board);
      const warp = cloud.at(shift + u * 6 + 131 * plank, v * 14 + 57 * plank);
      const rings = Math.sin((v * scale + 1.5 * warp) * 2 * Math.PI * 0.7);
      const pores = grain.at(shift + u * 5, v * 95);
      surface.colour(light, 1 + 0.05 * pores);
      surface.blend(dark, 0.35 * Math.max(0, rings) ** 2 + 0.12 * Math.max(0, pores - 0.6));
      surface.blend([0.02, 0.015, 0.01], 0.85 * line(fromMultiple(v, board), 0.03, 0.03));
    };
  },
  'cloth weave': (random, pixelsPerRadius) => {
    const colour = tinted(
      random,
      random.pick<Rgb>([
        [0.12, 0.14, 0.3],
        [0.4, 0.38, 0.34],
        [0.28, 0.05, 0.06],
        [0.05, 0.12, 0.08],
        [0.6, 0.58, 0.52],
      ]),
    );
    // A thread must span at least four pixels.
    const thread = Math.max(random.uniform(0.06, 0.14), 4 / pixelsPerRadius);
    const cloud = cloudNoise();
    const grain = speckleNoise();
    return (u, v, surface) => {
      const bend = 0.4 * cloud.at(u * 10, v * 10);
      const a = u / thread + bend;
      const b = v / thread - bend;
      const over = (Math.floor(a) + Math.floor(b)) % 2 === 0;
      const across = over ? a - Math.floor(a) : b - Math.floor(b);
      const round = Math.sin(Math.PI * across);
      const folds = 0.09 * cloud.at(u * 14 + 99, v * 14);
      surface.colour(colour, (0.62 + 0.45 * round + (over ? 0.06 : 0)) * (1 + folds + 0.1 * grain.at(u * 90, v * 90)));
    };
  },
  'cutting mat': (random, pixelsPerRadius) => {
    const colour = tinted(
      random,
      random.pick<Rgb>([
        [0.03, 0.13, 0.1],
        [0.04, 0.08, 0.2],
        [0.06, 0.06, 0.065],
      ]),
    );
    const ink: Rgb = random.pick<Rgb>([
      [0.75, 0.75, 0.7],
      [0.8, 0.7, 0.2],
    ]);
    const step = random.uniform(1.2, 3.2);
    const slanted = random.chance(0.35);
    const grain = speckleNoise();
    return (u, v, surface) => {
      surface.colour(colour, 1 + 0.06 * grain.at(u * 80, v * 80));
      const soft = 1.2 / pixelsPerRadius;
      const wide = 0.018;
      let cover = Math.max(line(fromMultiple(u, step), wide, soft), line(fromMultiple(v, step), wide, soft));
      cover = Math.max(
        cover,
        0.6 * line(fromMultiple(u, step / 5), 0.006, soft) * (Math.abs(fromMultiple(v, step)) < 0.12 ? 1 : 0),
      );
      cover = Math.max(
        cover,
        0.6 * line(fromMultiple(v, step / 5), 0.006, soft) * (Math.abs(fromMultiple(u, step)) < 0.12 ? 1 : 0),
      );
      if (slanted) cover = Math.max(cover, 0.8 * line((u - v) / Math.SQRT2 - 2, wide, soft));
      surface.blend(ink, 0.75 * cover);
    };
  },
  'scratched steel plate': (random, pixelsPerRadius) => {
    const colour = tinted(random, [0.42, 0.42, 0.43]);
    const grain = grainyNoise();
    const cloud = cloudNoise();
    const scratches = Array.from({ length: random.integer(15, 45) }, () => {
      const angle = random.uniform(0, Math.PI);
      return {
        u: random.uniform(-12, 12),
        v: random.uniform(-9, 9),
        cosine: Math.cos(angle),
        sine: Math.sin(angle),
        half: random.uniform(0.5, 5),
        bright: random.chance(0.6) ? 1.6 : 0.45,
        wide: random.uniform(0.004, 0.012),
      };
    });
    return (u, v, surface) => {
      let tone = 1 + 0.05 * grain.at(u * 4, v * 130) + 0.07 * cloud.at(u * 16, v * 16);
      const soft = 1.3 / pixelsPerRadius;
      for (const scratch of scratches) {
        const du = u - scratch.u;
        const dv = v - scratch.v;
        const across = -du * scratch.sine + dv * scratch.cosine;
        if (Math.abs(across) > 0.06 || Math.abs(du * scratch.cosine + dv * scratch.sine) > scratch.half) continue;
        tone *= 1 + (scratch.bright - 1) * line(across, scratch.wide, soft);
      }
      surface.colour(colour, tone);
      surface.gloss = 0.12;
      surface.tightness = 14;
      surface.metal = 0.3;
    };
  },
  cardboard: (random) => {
    const colour = tinted(random, [0.45, 0.31, 0.19]);
    const pitch = random.uniform(0.35, 0.8);
    const grain = grainyNoise();
    const speckle = speckleNoise();
    return (u, v, surface) => {
      const flute = Math.cos((u / pitch) * 2 * Math.PI);
      surface.colour(
        colour,
        1 + 0.05 * flute + 0.035 * grain.at(u * 60, v * 25) + (speckle.at(u * 60, v * 60) > 2.2 ? -0.3 : 0),
      );
    };
  },
  'granite plate': (random) => {
    const colour = tinted(random, [0.16, 0.16, 0.17], 0.3);
    const grain = grainyNoise();
    const speckle = speckleNoise();
    return (u, v, surface) => {
      const level = speckle.at(u * 42, v * 42) + 0.3 * grain.at(u * 70, v * 70);
      surface.colour(colour, Math.max(0.25, 1 + 0.28 * level));
      surface.gloss = 0.05;
      surface.tightness = 40;
    };
  },
};

export const BACKGROUND_NAMES = Object.keys(BACKGROUNDS);

/** @throws Error when no background has that name */
export function makeBackground(name: string, random: Random, pixelsPerRadius: number): Background {
  const make = BACKGROUNDS[name];
  if (!make) throw new Error(`no background "${name}"; expected one of ${BACKGROUND_NAMES.join(', ')}`);
  const paintTurned = make(random, pixelsPerRadius);
  const angle = random.uniform(0, 2 * Math.PI);
  const cosine = Math.cos(angle);
  const sine = Math.sin(angle);
  const u0 = random.uniform(-3, 3);
  const v0 = random.uniform(-3, 3);
  return {
    name,
    paint(u, v, surface) {
      surface.gloss = 0;
      surface.metal = 0;
      surface.clear = 0;
      surface.tipX = 0;
      surface.tipPhi = 0;
      paintTurned(cosine * u + sine * v + u0, cosine * v - sine * u + v0, surface);
    },
  };
}
