import type { Random } from './random.ts';
import type { Lamp, Scene } from './sceneTracer.ts';

export const LIGHT_NAMES = ['hard shadow', 'diffuse', 'two lamps', 'highlight', 'window'] as const;
export type LightName = (typeof LIGHT_NAMES)[number];

function lamp(azimuthDeg: number, heightDeg: number, strength: number, penumbra: number, warmth: number): Lamp {
  const azimuth = (azimuthDeg * Math.PI) / 180;
  const height = (heightDeg * Math.PI) / 180;
  return {
    x: Math.cos(height) * Math.cos(azimuth),
    y: Math.cos(height) * Math.sin(azimuth),
    z: Math.sin(height),
    colour: [strength * (1 + warmth), strength, strength * (1 - warmth)],
    penumbra,
  };
}

/** Lamps and sky of a named light; azimuth is taken from the specimen's axis. */
export function lightOf(name: LightName, random: Random): Pick<Scene, 'lamps' | 'sky'> {
  const warmth = random.uniform(-0.06, 0.12);
  const grey = (level: number): [number, number, number] => [level, level, level * (1 + random.uniform(-0.03, 0.08))];
  const anywhere = () => random.uniform(0, 360);
  switch (name) {
    case 'hard shadow':
      return {
        lamps: [lamp(anywhere(), random.uniform(28, 62), random.uniform(0.8, 1.2), random.uniform(0.01, 0.05), warmth)],
        sky: grey(random.uniform(0.18, 0.35)),
      };
    case 'diffuse':
      return { lamps: [lamp(anywhere(), random.uniform(50, 80), 0.15, 0.9, warmth)], sky: grey(0.85) };
    case 'two lamps': {
      const first = anywhere();
      return {
        lamps: [
          lamp(first, random.uniform(35, 60), random.uniform(0.4, 0.7), random.uniform(0.03, 0.25), warmth),
          lamp(first + random.uniform(120, 220), random.uniform(35, 60), random.uniform(0.3, 0.6), 0.15, -warmth),
        ],
        sky: grey(random.uniform(0.2, 0.4)),
      };
    }
    case 'highlight':
      // A lamp high above and square to the axis: its mirror image runs along the specimen.
      return {
        lamps: [lamp(90 + random.sign() * random.uniform(0, 25), random.uniform(62, 85), 1.1, 0.08, warmth)],
        sky: grey(random.uniform(0.2, 0.35)),
      };
    case 'window':
      return {
        lamps: [lamp(anywhere(), random.uniform(30, 50), random.uniform(0.5, 0.8), random.uniform(0.3, 0.6), -warmth)],
        sky: grey(random.uniform(0.3, 0.5)),
      };
  }
}
