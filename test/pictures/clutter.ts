import type { Rgb, Surface } from './materials.ts';
import { speckleNoise } from './noiseTexture.ts';
import type { Random } from './random.ts';

/** A flat thing on the bench, in its own frame (u, v), radii of the specimen. */
export interface FlatThing {
  readonly name: string;
  readonly x: number;
  readonly y: number;
  readonly turnDeg: number;
  /** Half of its length and width. */
  readonly halfU: number;
  readonly halfV: number;
  /** Its height over the bench, which sets the width of its shadow. */
  readonly heightR: number;
  readonly round: boolean;
  paint(u: number, v: number, surface: Surface): void;
}

type Place = Pick<FlatThing, 'x' | 'y' | 'turnDeg'>;

const plain = (surface: Surface, rgb: Rgb, tone: number, gloss = 0, tightness = 30) => {
  surface.colour(rgb, tone);
  surface.gloss = gloss;
  surface.tightness = tightness;
  surface.metal = 0;
  surface.tipX = 0;
  surface.tipPhi = 0;
  surface.clear = 0;
};

/** A steel or plastic rule with marks; `unitR` is the length of a millimetre in radii. */
export function rule(place: Place, random: Random, unitR: number, lengthR: number): FlatThing {
  const steel = random.chance(0.5);
  const colour: Rgb = steel
    ? [0.5, 0.5, 0.51]
    : random.pick<Rgb>([
        [0.75, 0.7, 0.3],
        [0.78, 0.78, 0.76],
        [0.6, 0.45, 0.25],
      ]);
  const halfV = 8 * unitR + 0.3;
  const noise = speckleNoise();
  return {
    name: 'rule',
    ...place,
    halfU: lengthR / 2,
    halfV,
    heightR: 0.06,
    round: false,
    paint(u, v, surface) {
      plain(surface, colour, 1 + 0.02 * noise.at(u * 70, v * 70), steel ? 0.2 : 0.05, 25);
      if (steel) surface.metal = 0.3;
      const place = (u + lengthR / 2) / unitR;
      const mark = Math.round(place);
      const long = mark % 10 === 0 ? 5 : mark % 5 === 0 ? 3.8 : 2.6;
      const along = halfV - Math.abs(v);
      if (mark > 3 && Math.abs(place - mark) < 0.13 && (v > 0 || steel) && along < long * unitR)
        plain(surface, [0.03, 0.03, 0.03], 1);
      // Figures are drawn as short bars beside every tenth mark.
      const tenth = Math.abs(place - 10 * Math.round(place / 10));
      if (v > 0 && along > 5.6 * unitR && along < 7.6 * unitR && tenth > 0.3 && tenth < 1 && mark > 3)
        plain(surface, [0.05, 0.05, 0.05], 1);
    },
  };
}

/** A coin with a raised rim. */
export function coin(place: Place, random: Random, radius: number): FlatThing {
  const colour = random.pick<Rgb>([
    [0.45, 0.45, 0.44],
    [0.5, 0.3, 0.16],
    [0.6, 0.5, 0.25],
  ]);
  const noise = speckleNoise();
  return {
    name: 'coin',
    ...place,
    halfU: radius,
    halfV: radius,
    heightR: 0.12,
    round: true,
    paint(u, v, surface) {
      const rho = Math.hypot(u, v) / radius;
      const relief =
        rho > 0.9 ? 0.25 : 0.12 * Math.sin(9 * rho + 3 * Math.atan2(v, u)) + 0.06 * noise.at(u * 50, v * 50);
      plain(surface, colour, 0.9 + relief, 0.25, 12);
      surface.metal = 0.4;
    },
  };
}

/** A paper label with lines of writing. */
export function label(place: Place, random: Random, halfU: number, halfV: number): FlatThing {
  const colour = random.pick<Rgb>([
    [0.85, 0.85, 0.83],
    [0.85, 0.78, 0.3],
    [0.5, 0.68, 0.5],
  ]);
  const rows = random.integer(2, 4);
  const noise = speckleNoise();
  return {
    name: 'label',
    ...place,
    halfU,
    halfV,
    heightR: 0.02,
    round: false,
    paint(u, v, surface) {
      plain(surface, colour, 1);
      const row = ((v + halfV) / (2 * halfV)) * (rows + 0.6) - 0.3;
      const inRow = row - Math.floor(row);
      const word = noise.at(u * (5 / halfV), 31 * Math.floor(row));
      const stroke = noise.at(u * (60 / halfV), row * 9);
      if (
        row > 0 &&
        row < rows &&
        inRow > 0.3 &&
        inRow < 0.75 &&
        Math.abs(u) < 0.85 * halfU &&
        word > -0.9 &&
        stroke > 0.1
      )
        plain(surface, [0.06, 0.06, 0.1], 1);
    },
  };
}

/** A metal plate: a long rectangle that is no bar. */
export function plate(place: Place, random: Random, halfU: number, halfV: number): FlatThing {
  const tone = random.uniform(0.25, 0.6);
  const noise = speckleNoise();
  return {
    name: 'plate',
    ...place,
    halfU,
    halfV,
    heightR: random.uniform(0.15, 0.5),
    round: false,
    paint(u, v, surface) {
      plain(surface, [tone, tone, tone * 1.02], 1 + 0.06 * noise.at(u * 6, v * 110), 0.2, 20);
      surface.metal = 0.4;
    },
  };
}

/** A broken bar seen end-on: a granular disc with a bright rim. */
export function endOn(place: Place, random: Random, radius: number): FlatThing {
  const tone = random.uniform(0.15, 0.45);
  const noise = speckleNoise();
  const marks = random.integer(0, 14);
  return {
    name: 'end-on',
    ...place,
    halfU: radius,
    halfV: radius,
    heightR: 2.5,
    round: true,
    paint(u, v, surface) {
      const rho = Math.hypot(u, v) / radius;
      const grain = 0.15 * noise.at((u * 40) / radius, (v * 40) / radius);
      const radial = 0.15 * Math.sin(marks * Math.atan2(v, u) + 3 * rho) * rho;
      plain(surface, [tone, tone, tone], (rho > 0.95 ? 1.5 : 1) + grain + radial, 0.08, 12);
    },
  };
}

/** Flat things beside the specimen: a rule along it, a coin, a label. */
export function clutterBeside(random: Random, busy: boolean): FlatThing[] {
  const things: FlatThing[] = [];
  const side = random.sign();
  if (busy || random.chance(0.2)) {
    const turnDeg = random.normal(0, 3) + (random.chance(0.15) ? random.uniform(20, 160) : 0);
    const away = side * random.uniform(3, 4.5) + (Math.abs(turnDeg) > 15 ? side * 6 : 0);
    things.push(
      rule({ x: random.uniform(-2, 2), y: away, turnDeg }, random, random.uniform(0.08, 0.25), random.uniform(9, 30)),
    );
  }
  if (busy || random.chance(0.12))
    things.push(
      coin(
        { x: random.uniform(-6, 6), y: -side * random.uniform(3, 5), turnDeg: random.uniform(0, 360) },
        random,
        random.uniform(0.8, 1.9),
      ),
    );
  if (busy || random.chance(0.12)) {
    const place = { x: random.uniform(-7, 7), y: -side * random.uniform(3.5, 6), turnDeg: random.normal(0, 12) };
    things.push(label(place, random, random.uniform(1.4, 2.6), random.uniform(0.6, 1.1)));
  }
  return things;
}
