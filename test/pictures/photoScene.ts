import { BACKGROUND_NAMES, makeBackground } from './backgrounds.ts';
import { type BreakKind, breakOfKind } from './breaks.ts';
import { breakSpecimen } from './brokenSpecimen.ts';
import { Camera, type PixelPoint } from './camera.ts';
import { clutterBeside } from './clutter.ts';
import type { CameraWork } from './develop.ts';
import { MATERIAL_NAMES, makeMaterial } from './finishes.ts';
import { frameBreak, pictureSize, type View } from './framing.ts';
import { LIGHT_NAMES, type LightName, lightOf } from './lights.ts';
import { pencilBeside } from './pencil.ts';
import type { Random } from './random.ts';
import type { Scene } from './sceneTracer.ts';
import { cameraWork, type Storing, storing } from './shooting.ts';
import {
  axisPx,
  facing,
  type HalfTrace,
  lipGapPx,
  roughTrace,
  silhouetteWidthPx,
  type TrueSegment,
  tracePx,
  visibleFrontThetaDeg,
  visiblePart,
  visibleSegments,
} from './truth.ts';

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

type Px = readonly [number, number];

/** What is true of a photo of a break; pixels are those of the upright photo. */
export interface BreakTruth {
  readonly view: View;
  readonly kind: BreakKind;
  /** Nominal plane angle; null for a mixed break. */
  readonly thetaDeg: number | null;
  /** Least-squares slope of the rough trace over ±60° of the visible face; null for a mixed break. */
  readonly visibleFrontThetaDeg: number | null;
  /** Tilt of a flat break; null for the others. */
  readonly betaDeg: number | null;
  readonly segments: readonly TrueSegment[];
  /** Visible trace of each half. */
  readonly traceImagePx: readonly (readonly Px[])[];
  readonly axisImagePx: readonly [Px, Px];
  readonly diameterPx: number;
  /** Distance between the lips of a pair. */
  readonly lipGapPx?: { readonly median: number; readonly shareAbove1px: number };
  readonly hollow: boolean;
  readonly material: string;
  readonly background: string;
  readonly light: LightName;
  readonly cameraTiltDeg: number;
  readonly cameraDistanceD: number;
  /** Azimuth of the middle of the visible face. */
  readonly faceAzimuthDeg: number;
  readonly gapFractionD: number;
  readonly roughnessFractionD: number;
  readonly exifOrientation: number;
  readonly rendered: true;
}

/** What is true of a photo without a break. */
export interface NoBreakTruth {
  readonly view: string;
  readonly kind: 'none';
  readonly visibleFrontThetaDeg: null;
  readonly material: string | null;
  readonly background: string;
  readonly light: LightName;
  readonly exifOrientation: number;
  readonly rendered: true;
}

/** Everything needed to render, develop and store a photo, and its truth. */
export interface PhotoPlan<Truth extends BreakTruth | NoBreakTruth = BreakTruth | NoBreakTruth> {
  readonly scene: Scene;
  readonly work: CameraWork;
  readonly storing: Storing;
  readonly truth: Truth;
}

const round = (value: number, digits = 2): number => Number(value.toFixed(digits));

/** A photo of a broken specimen with its truth, drawn from the generator's state. */
export function planBreakPhoto(wish: PhotoWish, random: Random): PhotoPlan<BreakTruth> {
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
  const { bars, halves, gapR, roughnessR } = breakSpecimen(wish.view, course, material, random, radiusPx);
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
  const [from, to] = axisPx(first.bar, camera);
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
        .map(roundedSegment),
      traceImagePx: lips.map((lip) => lip.map(roundedPx)),
      axisImagePx: [roundedPx(from), roundedPx(to)],
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

const roundedPx = ({ xPx, yPx }: PixelPoint): Px => [round(xPx), round(yPx)];

const roundedSegment = ({ thetaDeg, share, phiDeg, closingStep }: TrueSegment): TrueSegment => ({
  thetaDeg: round(thetaDeg),
  phiDeg: [round(phiDeg[0], 1), round(phiDeg[1], 1)],
  share: round(share, 3),
  closingStep,
});
