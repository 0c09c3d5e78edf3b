import { BACKGROUND_NAMES, makeBackground } from './backgrounds.ts';
import type { Bar } from './bar.ts';
import { helix } from './breaks.ts';
import type { CameraRecipe } from './camera.ts';
import { clutterBeside, endOn, type FlatThing, plate, rule } from './clutter.ts';
import { MATERIAL_NAMES, makeMaterial } from './finishes.ts';
import { Fracture } from './fracture.ts';
import { focalLength, pictureSize, viewFrom } from './framing.ts';
import { LIGHT_NAMES, lightOf } from './lights.ts';
import type { Material, Rgb } from './materials.ts';
import { pencilMaterial } from './pencil.ts';
import type { NoBreakTruth, PhotoPlan } from './photoScene.ts';
import type { Random } from './random.ts';
import type { Scene } from './sceneTracer.ts';
import { cameraWork, storing } from './shooting.ts';

/** Pictures a bench produces that hold no break to measure. */
export const NEGATIVE_NAMES = [
  'intact bar',
  'empty bench',
  'plate',
  'crossing bars',
  'end-on view',
  'rule alone',
  'pencil alone',
  'taped bar',
  'marked bar',
  'two bars side by side',
  'threaded rod',
  'break out of the picture',
] as const;
export type NegativeName = (typeof NEGATIVE_NAMES)[number];

const ENDLESS = 70;

interface Contents {
  readonly bars?: readonly Bar[];
  readonly things?: readonly FlatThing[];
  readonly clutter?: boolean;
}

function intact(material: Material, change: Partial<Bar> = {}): Bar {
  const whole = { position: { x: 0, y: 0, z: 0 }, yawDeg: 0, radiusR: 1, bore: 0, fromX: -ENDLESS, toX: ENDLESS };
  return { ...whole, fracture: null, halves: 'both', material, ...change };
}

/** A band of tape round the bar, its edges slightly askew. */
function taped(base: Material, random: Random): Material {
  const colour = random.pick<Rgb>([
    [0.03, 0.03, 0.03],
    [0.75, 0.73, 0.68],
    [0.6, 0.5, 0.3],
    [0.05, 0.15, 0.5],
  ]);
  const half = random.uniform(0.4, 1.8);
  const askew = random.normal(0, 0.05);
  return {
    ...base,
    outer(x, phi, surface) {
      base.outer(x, phi, surface);
      const away = half - Math.abs(x - askew * phi);
      if (away < 0) return;
      surface.colour(colour, away < 0.03 ? 0.7 : 1);
      surface.gloss = 0.12;
      surface.tightness = 30;
      surface.metal = 0;
      surface.tipX = 0;
      surface.tipPhi = 0;
      surface.clear = 0;
    },
  };
}

/** Gauge marks of a pen round the bar, a line along it, and a number. */
function marked(base: Material, random: Random): Material {
  const ink = random.pick<Rgb>([
    [0.02, 0.02, 0.02],
    [0.35, 0.02, 0.02],
    [0.02, 0.04, 0.3],
  ]);
  const rounds = Array.from({ length: random.integer(1, 3) }, () => ({
    x: random.uniform(-4, 4),
    askew: random.normal(0, 0.04),
    half: random.uniform(0.015, 0.05),
  }));
  const alongPhi = random.uniform(-0.8, 0.8);
  const hasAlong = random.chance(0.7);
  return {
    ...base,
    outer(x, phi, surface) {
      base.outer(x, phi, surface);
      const onRound = rounds.some((r) => Math.abs(x - r.x - r.askew * phi - 0.02 * Math.sin(5 * phi)) < r.half);
      const onAlong = hasAlong && Math.abs(phi - alongPhi - 0.01 * Math.sin(x)) < 0.03;
      if (!onRound && !onAlong) return;
      surface.blend(ink, 0.8);
      surface.gloss *= 0.4;
    },
  };
}

function threaded(base: Material, pitchR: number): Material {
  return {
    ...base,
    outer(x, phi, surface) {
      base.outer(x, phi, surface);
      const turn = (x + (pitchR * phi) / (2 * Math.PI)) / pitchR;
      const place = turn - Math.floor(turn);
      surface.tipX = place < 0.5 ? 0.75 : -0.75;
      if (place < 0.12) surface.blend([0.02, 0.02, 0.02], 0.6);
    },
  };
}

function contents(name: NegativeName, random: Random, pixelsPerRadius: number): Contents {
  const material = () => makeMaterial(random.pick(MATERIAL_NAMES), random, pixelsPerRadius);
  const middle = { x: random.normal(0, 0.5), y: random.normal(0, 0.5), turnDeg: random.normal(0, 8) };
  switch (name) {
    case 'intact bar':
      return { bars: [intact(material())], clutter: true };
    case 'empty bench':
      return { clutter: true };
    case 'plate':
      return { things: [plate(middle, random, random.uniform(3, 8), random.uniform(0.8, 2.5))] };
    case 'crossing bars':
      return {
        bars: [
          intact(material()),
          intact(material(), {
            position: { x: random.normal(0, 1), y: 0, z: 1.9 },
            yawDeg: random.sign() * random.uniform(25, 90),
            radiusR: random.uniform(0.6, 1),
          }),
        ],
      };
    case 'end-on view':
      return { things: [endOn(middle, random, random.uniform(1.5, 3))] };
    case 'rule alone':
      return { things: [rule(middle, random, random.uniform(0.08, 0.2), random.uniform(12, 60))] };
    case 'pencil alone':
      return {
        bars: [intact(pencilMaterial(material(), random), { radiusR: 0.5, position: { x: 0, y: 0, z: -0.5 } })],
        clutter: true,
      };
    case 'taped bar':
      return { bars: [intact(taped(material(), random))] };
    case 'marked bar':
      return { bars: [intact(marked(material(), random))], clutter: true };
    case 'two bars side by side':
      return {
        bars: [
          intact(material()),
          intact(material(), {
            position: { x: 0, y: random.sign() * random.uniform(2.1, 3.5), z: 0 },
            yawDeg: random.normal(0, 1.5),
          }),
        ],
      };
    case 'threaded rod':
      return {
        bars: [
          intact(threaded(makeMaterial('ground steel', random, pixelsPerRadius), Math.max(0.16, 8 / pixelsPerRadius))),
        ],
      };
    case 'break out of the picture': {
      // A half whose broken end lies beyond the border.
      const course = helix(random.sign() * 45, Math.PI, 0.1);
      const fracture = new Fracture({
        profile: course.profile,
        gapR: 0,
        gapTaper: 0,
        roughnessR: 0.02,
        granularity: 0.5,
        wanderRad: 0.02,
        taper: 1,
        offsetU: 1,
        offsetV: 2,
      });
      return {
        bars: [intact(material(), { position: { x: 40, y: 0, z: 0 }, fracture, halves: 'a', fromX: -ENDLESS - 40 })],
      };
    }
  }
}

/** A photo without a measurable break: the right answer is a refusal. */
export function planPhotoWithoutBreak(
  name: NegativeName,
  random: Random,
  wantedMegapixels?: number,
): PhotoPlan<NoBreakTruth> {
  const megapixels = wantedMegapixels ?? random.uniform(1, 3);
  const scale = Math.sqrt(megapixels / 2);
  const size = pictureSize(random, megapixels);
  const diameterPx = scale * random.logUniform(90, 400);
  const camera: CameraRecipe = {
    ...size,
    ...viewFrom(focalLength(random), size, diameterPx),
    tiltDeg: Math.max(-5, Math.min(5, random.normal(0, 1.8))),
    elevationDeg: random.normal(0, 5),
    rollDeg: random.chance(0.6) ? random.normal(0, 7) : random.uniform(-180, 180),
    originPx: {
      xPx: size.widthPx * (0.5 + random.normal(0, 0.06)),
      yPx: size.heightPx * (0.5 + random.normal(0, 0.06)),
    },
    distortion: random.uniform(-0.012, 0.012),
  };
  const background = random.pick(BACKGROUND_NAMES);
  const light = random.pick(LIGHT_NAMES);
  const { bars = [], things = [], clutter = false } = contents(name, random, diameterPx / 2);
  const scene: Scene = {
    camera,
    bars,
    benchZ: bars.length > 0 && random.chance(0.5) ? -random.uniform(1.2, 2.2) : -1.005,
    background: makeBackground(background, random, diameterPx / 2),
    things: [...things, ...(clutter ? clutterBeside(random, random.chance(0.5)) : [])],
    ...lightOf(light, random),
  };
  const stored = storing(random);
  return {
    scene,
    work: cameraWork(random, scale),
    storing: stored,
    truth: {
      view: name,
      kind: 'none',
      visibleFrontThetaDeg: null,
      material: bars[0]?.material.name ?? null,
      background,
      light,
      exifOrientation: stored.orientation,
      rendered: true,
    },
  };
}
