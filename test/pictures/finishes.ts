import { finished, type Material, patched, type Rgb, shade } from './materials.ts';
import type { Random } from './random.ts';

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
