import { BACKGROUND_NAMES, makeBackground } from './backgrounds.ts';
import type { Bar } from './bar.ts';
import { type BreakCourse, type BreakKind, breakOfKind } from './breaks.ts';
import { Camera, type CameraRecipe } from './camera.ts';
import { clutterBeside } from './clutter.ts';
import type { CameraWork } from './develop.ts';
import { Fracture } from './fracture.ts';
import { MATERIAL_NAMES, type Material, makeMaterial } from './materials.ts';
import { pencilBeside } from './pencil.ts';
import type { Random } from './random.ts';
import type { Lamp, Scene } from './render.ts';
import { type TraceProfile, turned } from './traceProfile.ts';
import {
  axisPx,
  facing,
  type HalfTrace,
  lipGapPx,
  roughTrace,
  silhouetteWidthPx,
  tracePx,
  visibleFrontThetaDeg,
  visiblePart,
  visibleSegments,
} from './truth.ts';

export type View = 'pair' | 'half';

/** What the caller may fix; the rest is drawn from the seed. */
export interface PhotoWish {
  readonly view: View;
  readonly kind: BreakKind;
  readonly material?: string;
  readonly background?: string;
  readonly light?: LightName;
  readonly megapixels?: number;
  /** Diameter wanted, px of a 2 MP photo; made smaller where the break would not fit. */
  readonly diameterPx?: number;
}

/** How a photo is stored: quality of JPEG compression and EXIF orientation. */
export interface Storing {
  readonly quality: number;
  readonly orientation: 1 | 3 | 6 | 8;
  readonly sharpened: boolean;
  /** Whether the file tells its focal length, as telephones do. */
  readonly tellsFocalLength: boolean;
}

export interface PhotoPlan {
  readonly scene: Scene;
  readonly work: CameraWork;
  readonly storing: Storing;
  readonly truth: Readonly<Record<string, unknown>>;
}

export const LIGHT_NAMES = ['hard shadow', 'diffuse', 'two lamps', 'highlight', 'window'] as const;
export type LightName = (typeof LIGHT_NAMES)[number];

const round = (value: number, digits = 2): number => Number(value.toFixed(digits));

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

export function storing(random: Random): Storing {
  return {
    quality: random.integer(62, 95),
    orientation: random.chance(0.8) ? 1 : random.pick([3, 6, 8] as const),
    sharpened: random.chance(0.35),
    tellsFocalLength: random.chance(0.4),
  };
}

export function pictureSize(random: Random, megapixels: number): { widthPx: number; heightPx: number } {
  const ratio = random.pick([4 / 3, 3 / 2, 16 / 9]);
  const wide = Math.round(Math.sqrt(megapixels * 1e6 * ratio));
  const high = Math.round(wide / ratio);
  return random.chance(0.72) ? { widthPx: wide, heightPx: high } : { widthPx: high, heightPx: wide };
}

interface Specimen {
  readonly bars: Bar[];
  readonly halves: HalfTrace[];
  readonly gapR: number;
  readonly roughnessR: number;
}

function specimen(
  wish: PhotoWish,
  course: BreakCourse,
  material: Material,
  random: Random,
  radiusPx: number,
): Specimen {
  const wideOpen = wish.view === 'pair' ? random.pick(['crack', 'small', 'small', 'small', 'wide'] as const) : 'none';
  const gapPx = {
    none: 0,
    crack: random.uniform(1.8, 3),
    small: random.uniform(3, 9),
    wide: random.uniform(0.12, 0.5) * radiusPx,
  }[wideOpen];
  const roughnessR = material.roughnessR * random.uniform(0.6, 1.5);
  const recipe = {
    profile: course.profile,
    gapR: gapPx / radiusPx,
    gapTaper: wideOpen === 'none' ? 0 : random.normal(0, 0.12) * (gapPx / radiusPx),
    roughnessR,
    granularity: Math.min(1, Math.max(0, material.granularity + random.uniform(-0.15, 0.15))),
    wanderRad: random.uniform(0.01, 0.045),
    taper: random.uniform(0.7, 1.3),
    offsetU: random.uniform(0, 512),
    offsetV: random.uniform(0, 512),
  };
  const bore = random.chance(material.name.includes('tube') ? 1 : 0.15) ? random.uniform(0.5, 0.88) : 0;
  const cutAt = () => (random.chance(0.5) ? 60 : random.uniform(4, 10));
  const shared = { radiusR: 1, bore, material };
  const fracture = new Fracture(recipe);
  const fromX = fracture.fromX - cutAt();
  const toX = fracture.toX + cutAt();
  const a = { ...shared, position: { x: 0, y: 0, z: 0 }, yawDeg: 0, fromX, toX, fracture };
  if (wish.view === 'half') {
    const bar: Bar = { ...a, halves: 'a' };
    return { bars: [bar], halves: [{ bar, half: 'a', turnRad: 0 }], gapR: 0, roughnessR };
  }
  // Halves joined by a step in view lie as they broke: turned or shifted, they would run into one another.
  if (random.chance(0.55) || stepShows(course)) {
    const bar: Bar = { ...a, halves: 'both' };
    const halves = (['a', 'b'] as const).map((half): HalfTrace => ({ bar, half, turnRad: 0 }));
    return { bars: [bar], halves, gapR: recipe.gapR, roughnessR };
  }
  // The second half was laid down a little turned, shifted or askew. It is moved apart as far as that needs room.
  const turnRad = random.normal(0, 0.035);
  const yawDeg = random.normal(0, 0.5);
  const shift = random.normal(0, 0.02);
  const room = roomToTurn(course.profile, turnRad) + Math.abs(yawDeg * 0.0175) + 0.5 * Math.abs(shift);
  const bar: Bar = { ...a, halves: 'a' };
  const second: Bar = {
    ...shared,
    position: { x: room, y: shift + random.normal(0, 0.005), z: 0 },
    yawDeg,
    fromX,
    toX,
    fracture: new Fracture({ ...recipe, profile: turned(course.profile, turnRad) }),
    halves: 'b',
  };
  return {
    bars: [bar, second],
    halves: [
      { bar, half: 'a', turnRad: 0 },
      { bar: second, half: 'b', turnRad },
    ],
    gapR: recipe.gapR + room,
    roughnessR,
  };
}

const stepShows = ({ profile }: BreakCourse): boolean =>
  profile.steep.some(([from, to]) => Math.cos((from + to) / 2) > -0.2);

/** How far the second half must move along the axis so that its turned rim clears the first, radii. */
function roomToTurn(profile: TraceProfile, turnRad: number): number {
  let room = 0;
  for (let phi = -Math.PI / 2; phi <= Math.PI / 2; phi += 0.02) {
    room = Math.max(room, profile.x(phi) - profile.x(phi - turnRad));
  }
  return room;
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
function frameBreak(
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

/** A photo of a broken specimen with its truth, drawn from the generator's state. */
export function planBreakPhoto(wish: PhotoWish, random: Random): PhotoPlan {
  const megapixels = wish.megapixels ?? (random.chance(0.06) ? 12 : random.uniform(1, 3));
  const scale = Math.sqrt(megapixels / 2);
  const course = breakOfKind(wish.kind, random);
  const size = pictureSize(random, megapixels);
  const wanted = scale * (wish.diameterPx ?? random.logUniform(80, 600));
  const recipe = frameBreak(course, wish.view, random, size, wanted);
  const radiusPx = recipe.focalPx / recipe.distanceR;
  const material = makeMaterial(wish.material ?? random.pick(MATERIAL_NAMES), random, radiusPx);
  const busy = wish.background === 'clutter' || (wish.background === undefined && random.chance(0.12));
  const backgroundName =
    wish.background === undefined || wish.background === 'clutter' ? random.pick(BACKGROUND_NAMES) : wish.background;
  const light = wish.light ?? random.pick(LIGHT_NAMES);
  const { bars, halves, gapR, roughnessR } = specimen(wish, course, material, random, radiusPx);
  const benchZ = random.chance(0.65) ? -1.005 : -random.uniform(1.2, 2.5);
  const scene: Scene = {
    camera: recipe,
    bars: busy && random.chance(0.5) ? [...bars, pencilBeside(random, benchZ)] : bars,
    benchZ,
    background: makeBackground(backgroundName, random, radiusPx),
    things: clutterBeside(random, busy),
    ...lightOf(light, random),
  };
  const camera = new Camera(recipe);
  const first = halves[0] as HalfTrace;
  const visible = halves.map(({ bar, half }) => visiblePart(roughTrace(bar, half), bar, camera));
  const lips = halves.map(({ bar }, i) => tracePx(visible[i] ?? [], bar, camera));
  const [lipA, lipB] = lips;
  const theta = visibleFrontThetaDeg(halves, course.pieces, camera);
  const stored = storing(random);
  return {
    scene,
    work: cameraWork(random, scale),
    storing: stored,
    truth: {
      view: wish.view,
      kind: course.kind,
      thetaDeg: course.thetaDeg === null ? null : round(course.thetaDeg, 3),
      visibleFrontThetaDeg: theta === null ? null : round(theta, 3),
      betaDeg: course.betaDeg === null ? null : round(course.betaDeg, 3),
      segments: visibleSegments(first, course.pieces, camera)
        .filter((segment) => segment.share > 0.01)
        .map((segment) => ({
          thetaDeg: round(segment.thetaDeg),
          phiDeg: segment.phiDeg.map((phi) => round(phi, 1)),
          share: round(segment.share, 3),
          closingStep: segment.closingStep,
        })),
      traceImagePx: lips.map((lip) => lip.map(({ xPx, yPx }) => [round(xPx), round(yPx)])),
      axisImagePx: axisPx(first.bar, camera).map(({ xPx, yPx }) => [round(xPx), round(yPx)]),
      diameterPx: round(silhouetteWidthPx(first.bar, 0, camera)),
      ...(lipA && lipB ? { lipGapPx: roundedGap(lipGapPx(lipA, lipB)) } : {}),
      hollow: first.bar.bore > 0,
      material: material.name,
      background: busy ? 'clutter' : backgroundName,
      light,
      cameraTiltDeg: round(recipe.tiltDeg),
      cameraDistanceD: round(recipe.distanceR / 2, 1),
      faceAzimuthDeg: round((facing(first.bar, camera).phi * 180) / Math.PI, 1),
      gapFractionD: round(gapR / 2, 4),
      roughnessFractionD: round(roughnessR / 2, 4),
      exifOrientation: stored.orientation,
      rendered: true,
    },
  };
}

const roundedGap = (gap: { median: number; shareAbove1px: number }) => ({
  median: round(gap.median),
  shareAbove1px: round(gap.shareAbove1px),
});
