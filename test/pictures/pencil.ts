import type { Bar } from './bar.ts';
import { makeMaterial } from './finishes.ts';
import type { Material, Rgb } from './materials.ts';
import type { Random } from './random.ts';

/** Painted flats of a six-sided pencil over any other material. */
export function pencilMaterial(base: Material, random: Random): Material {
  const paint = random.pick<Rgb>([
    [0.7, 0.42, 0.02],
    [0.45, 0.03, 0.03],
    [0.03, 0.2, 0.1],
  ]);
  return {
    ...base,
    outer(_x, phi, surface) {
      const side = Math.round(phi / (Math.PI / 3)) * (Math.PI / 3);
      surface.colour(paint, 1);
      surface.gloss = 0.12;
      surface.tightness = 25;
      surface.metal = 0;
      surface.clear = 0;
      surface.tipX = 0;
      // The six flats: the normal of a flat is that of its middle.
      surface.tipPhi = Math.tan(side - phi);
    },
  };
}

/** A pencil on the bench beside a specimen that lies along x. */
export function pencilBeside(random: Random, benchZ: number): Bar {
  const radiusR = random.uniform(0.3, 0.6);
  const side = random.sign();
  return {
    position: { x: random.uniform(-3, 3), y: side * random.uniform(2.6, 5), z: benchZ + radiusR },
    yawDeg: random.chance(0.6) ? random.normal(0, 4) : random.normal(0, 25),
    radiusR,
    bore: 0,
    fromX: -random.uniform(8, 25),
    toX: random.uniform(8, 25),
    fracture: null,
    halves: 'both',
    material: pencilMaterial(makeMaterial('timber dowel', random, 60), random),
  };
}
