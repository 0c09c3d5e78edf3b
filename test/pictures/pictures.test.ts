import { describe, expect, it } from 'vitest';
import type { Bar } from './bar.ts';
import { type BreakCourse, helix, longitudinal, mixed, obliquePlane } from './breaks.ts';
import { Camera, type CameraRecipe } from './camera.ts';
import { Fracture } from './fracture.ts';
import type { Material } from './materials.ts';
import { planSet } from './photoSet.ts';
import { render } from './render.ts';
import type { Scene } from './sceneTracer.ts';
import {
  axisPx,
  type HalfTrace,
  onSurface,
  roughTrace,
  silhouetteWidthPx,
  tracePx,
  visibleFrontThetaDeg,
  visiblePart,
  visibleSegments,
} from './truth.ts';

const squareOn: CameraRecipe = {
  widthPx: 601,
  heightPx: 401,
  distanceR: 40,
  focalPx: 40 * 60,
  tiltDeg: 0,
  elevationDeg: 0,
  rollDeg: 0,
  originPx: { xPx: 300, yPx: 200 },
  distortion: 0,
};

/** White outside and black inside, without any gloss: the rim is where white ends. */
const blackAndWhite: Material = {
  name: 'black and white',
  roughnessR: 0,
  granularity: 0,
  outer: (_x, _phi, surface) =>
    Object.assign(surface, { red: 1, green: 1, blue: 1, gloss: 0, metal: 0, clear: 0, tipX: 0, tipPhi: 0 }),
  inner: (_x, _y, _z, surface) =>
    Object.assign(surface, { red: 0, green: 0, blue: 0, gloss: 0, metal: 0, clear: 0, tipX: 0, tipPhi: 0 }),
  sawn: (_y, _z, surface) =>
    Object.assign(surface, { red: 0, green: 0, blue: 0, gloss: 0, metal: 0, clear: 0, tipX: 0, tipPhi: 0 }),
};

function barOf(
  course: BreakCourse,
  change: { roughnessR?: number; wanderRad?: number; gapR?: number; halves?: Bar['halves'] } = {},
): Bar {
  const { roughnessR = 0, wanderRad = 0, gapR = 0, halves = 'a' } = change;
  const fracture = new Fracture({
    profile: course.profile,
    gapR,
    gapTaper: 0,
    roughnessR,
    granularity: 0.4,
    wanderRad,
    taper: 1,
    offsetU: 12,
    offsetV: 34,
  });
  const position = { x: 0, y: 0, z: 0 };
  return { position, yawDeg: 0, radiusR: 1, bore: 0, fromX: -40, toX: 40, fracture, halves, material: blackAndWhite };
}

const halvesOf = (bar: Bar): HalfTrace[] =>
  bar.halves === 'both'
    ? [
        { bar, half: 'a', turnRad: 0 },
        { bar, half: 'b', turnRad: 0 },
      ]
    : [{ bar, half: bar.halves, turnRad: 0 }];

const slopeDeg = (course: BreakCourse, recipe = squareOn, change = {}) =>
  visibleFrontThetaDeg(halvesOf(barOf(course, change)), course.pieces, new Camera(recipe)) as number;

describe('camera', () => {
  // Pinhole: a length at distance D appears focal / D times as large.
  it('shows a radius at the distance of the axis as focal length over distance', () => {
    const camera = new Camera(squareOn);
    expect(camera.project({ x: 1, y: 0, z: 0 }).xPx).toBeCloseTo(360, 6);
    expect(camera.project({ x: 0, y: 1, z: 0 }).yPx).toBeCloseTo(140, 6);
    expect(camera.project({ x: 1, y: 0, z: 1 }).xPx).toBeCloseTo(300 + 2400 / 39, 6);
  });

  it('turns the specimen counter-clockwise in the picture by its roll', () => {
    const { xPx, yPx } = new Camera({ ...squareOn, rollDeg: 90 }).project({ x: 1, y: 0, z: 0 });
    expect(xPx).toBeCloseTo(300, 6);
    expect(yPx).toBeCloseTo(140, 6);
  });

  it.each([0, 3.5, -5])('stands out of square by the wanted tilt (%s°)', (tiltDeg) => {
    const camera = new Camera({ ...squareOn, tiltDeg, originPx: { xPx: 250, yPx: 180 }, rollDeg: 20, elevationDeg: 5 });
    const { x, y, z } = camera.position;
    const sine = -x / Math.hypot(x, y, z);
    expect((Math.asin(sine) * 180) / Math.PI).toBeCloseTo(tiltDeg, 6);
    const origin = camera.project({ x: 0, y: 0, z: 0 });
    expect(origin.xPx).toBeCloseTo(250, 4);
    expect(origin.yPx).toBeCloseTo(180, 4);
  });

  it('sends the ray of a pixel through the points that appear there, with distortion', () => {
    const camera = new Camera({ ...squareOn, tiltDeg: 4, rollDeg: -33, elevationDeg: 7, distortion: 0.012 });
    const direction = new Float64Array(3);
    for (const [xPx, yPx] of [
      [3, 5],
      [590, 20],
      [300, 200],
      [120, 390],
    ] as const) {
      camera.ray(xPx, yPx, direction);
      const at = (axis: 'x' | 'y' | 'z', i: number) => camera.position[axis] + 37 * (direction[i] as number);
      const back = camera.project({ x: at('x', 0), y: at('y', 1), z: at('z', 2) });
      expect(back.xPx).toBeCloseTo(xPx, 3);
      expect(back.yPx).toBeCloseTo(yPx, 3);
    }
  });
});

describe('truth', () => {
  it.each([-60, -45, -20, 0.001, 30, 45, 64])('a smooth helix of %s° has that slope from any side', (theta) => {
    for (const elevationDeg of [0, 8]) {
      expect(slopeDeg(helix(theta, Math.PI, 0.1), { ...squareOn, elevationDeg })).toBeCloseTo(theta, 2);
    }
  });

  it.each([-0.7, 0, 0.9])('a closing step in view at %s rad does not change the slope of the helix', (stepPhi) => {
    expect(slopeDeg(helix(-52, stepPhi, 0.15))).toBeCloseTo(-52, 2);
  });

  it('a flat cut has the mean slope of its sine over ±60°', () => {
    // Least squares of a·sin φ on φ over (−c, c): a · 3 (sin c − c cos c) / c³.
    const c = Math.PI / 3;
    const a = Math.tan((40 * Math.PI) / 180);
    const expected = (Math.atan((a * 3 * (Math.sin(c) - c * Math.cos(c))) / c ** 3) * 180) / Math.PI;
    expect(slopeDeg(obliquePlane(40, Math.PI / 2))).toBeCloseTo(expected, 2);
    expect(slopeDeg(obliquePlane(40, 0))).toBeCloseTo(0, 6);
  });

  it.each([84, 88, -86.5])('a split at %s° keeps its slope though square pieces join it', (theta) => {
    expect(slopeDeg(longitudinal(theta, 0.2, 4))).toBeCloseTo(theta, 2);
  });

  it('a mirrored course has the opposite slope', () => {
    const there = slopeDeg(helix(41, 2.6, 0.1));
    expect(slopeDeg(helix(-41, -2.6, 0.1))).toBeCloseTo(-there, 6);
  });

  it('names the visible pieces of a mixed break with their shares of length', () => {
    const course = mixed(45, 0, true);
    const [flat, inclined, ...rest] = visibleSegments(
      halvesOf(barOf(course))[0] as HalfTrace,
      course.pieces,
      new Camera(squareOn),
    );
    expect(rest).toEqual([]);
    expect(flat?.thetaDeg).toBeCloseTo(0, 6);
    // The rise is over π − 0.1 of the half turn.
    expect(inclined?.thetaDeg).toBeCloseTo(45, 6);
    expect(flat?.share).toBeCloseTo(1 / (1 + Math.SQRT2), 1);
  });

  it('gives the width between the silhouettes, the tangents from the camera', () => {
    const bar = barOf(helix(45, Math.PI, 0.1));
    // 2 f r / √(D² − r²) for a cylinder seen square-on.
    expect(silhouetteWidthPx(bar, 0, new Camera(squareOn))).toBeCloseTo((2 * 2400) / Math.sqrt(40 ** 2 - 1), 2);
  });

  it('lays the axis through the picture', () => {
    const [from, to] = axisPx(barOf(helix(45, Math.PI, 0.1)), new Camera(squareOn));
    expect(from.yPx).toBeCloseTo(200, 6);
    expect(to.yPx).toBeCloseTo(200, 6);
    expect(from.xPx).toBeLessThan(15);
    expect(to.xPx).toBeGreaterThan(585);
  });
});

describe('rendered rim against projected truth', () => {
  const scene = (bar: Bar, camera: CameraRecipe): Scene => ({
    camera,
    bars: [bar],
    benchZ: -4,
    background: {
      name: 'black',
      paint: (_u, _v, surface) => Object.assign(surface, { red: 0, green: 0, blue: 0, gloss: 0 }),
    },
    things: [],
    lamps: [],
    sky: [1, 1, 1],
  });

  /** Where white turns black on the way along the axis through a point, px from the point; null without a change. */
  function rimOffset(pictureRow: (x: number, y: number) => number, x: number, y: number, ux: number, uy: number) {
    const level = pictureRow(x - 6 * ux, y - 6 * uy) / 2;
    let last = pictureRow(x - 6 * ux, y - 6 * uy);
    for (let t = -5.75; t <= 6; t += 0.25) {
      const here = pictureRow(x + t * ux, y + t * uy);
      if (last > level && here <= level) return t - 0.25 + (0.25 * (last - level)) / (last - here);
      last = here;
    }
    return null;
  }

  it.each([
    ['helix', helix(45, Math.PI, 0.1), 0.015, 0.02],
    ['helix, right-hand', helix(-38, 3.4, 0.2), 0.01, 0.03],
    ['flat cut', obliquePlane(35, 1), 0.01, 0],
    ['transverse', obliquePlane(2, 4), 0.02, 0],
  ] as const)(
    '%s: the trace lies on the edge of the picture to half a pixel',
    (_name, course, roughnessR, wanderRad) => {
      const recipe = { ...squareOn, tiltDeg: 3, rollDeg: 12, elevationDeg: -5, distortion: 0.01 };
      const camera = new Camera(recipe);
      const bar = barOf(course, { roughnessR, wanderRad });
      const { rgb, widthPx } = render(scene(bar, recipe));
      const value = (x: number, y: number) => {
        const x0 = Math.floor(x);
        const y0 = Math.floor(y);
        const at = (column: number, row: number) => rgb[3 * (row * widthPx + column) + 1] as number;
        const fx = x - x0;
        const fy = y - y0;
        return (
          (at(x0, y0) * (1 - fx) + at(x0 + 1, y0) * fx) * (1 - fy) +
          (at(x0, y0 + 1) * (1 - fx) + at(x0 + 1, y0 + 1) * fx) * fy
        );
      };
      const [from, to] = axisPx(bar, camera);
      const length = Math.hypot(to.xPx - from.xPx, to.yPx - from.yPx);
      const front = visiblePart(roughTrace(bar, 'a'), bar, camera).filter(({ phi }) => Math.abs(phi) < 1.1);
      const offsets = tracePx(front, bar, camera, 80)
        .map(({ xPx, yPx }) => rimOffset(value, xPx, yPx, (to.xPx - from.xPx) / length, (to.yPx - from.yPx) / length))
        .filter((offset) => offset !== null);
      expect(offsets.length).toBeGreaterThan(60);
      const sizes = offsets.map(Math.abs).sort((p, q) => p - q);
      expect(sizes[Math.floor(sizes.length / 2)]).toBeLessThan(0.5);
      expect(sizes[Math.floor(0.9 * sizes.length)]).toBeLessThan(1.2);
      const mean = offsets.reduce((sum, offset) => sum + offset, 0) / offsets.length;
      expect(Math.abs(mean)).toBeLessThan(0.3);
    },
  );

  it('shows the opening of a pair between its two lips', () => {
    const bar = barOf(helix(45, Math.PI, 0.1), { gapR: 0.15, halves: 'both' });
    const camera = new Camera(squareOn);
    const { rgb, widthPx } = render(scene(bar, squareOn));
    const lips = (['a', 'b'] as const).map((half) =>
      visiblePart(roughTrace(bar, half), bar, camera).find(({ phi }) => phi >= 0),
    );
    const [a, b] = lips.map((point) => camera.project(onSurface(bar, 0, point?.x ?? Number.NaN)));
    const green = (x: number, y: number) => rgb[3 * (Math.round(y) * widthPx + Math.round(x)) + 1] as number;
    const middle = ((a?.xPx ?? 0) + (b?.xPx ?? 0)) / 2;
    expect(b?.xPx).toBeGreaterThan((a?.xPx ?? 0) + 5);
    expect(green(middle, 200)).toBeLessThan(0.1);
    expect(green((a?.xPx ?? 0) - 4, 200)).toBeGreaterThan(0.8);
    expect(green((b?.xPx ?? 0) + 4, 200)).toBeGreaterThan(0.8);
  });
});

describe('set of photos', () => {
  const plans = (seed: number) =>
    planSet({ count: 10, negatives: 2, seed, prefix: 'p', megapixels: 0.2 }).map(({ make }) => make().plan.truth);

  it('is the same for the same seed and another for another', () => {
    expect(plans(3)).toEqual(plans(3));
    expect(plans(3)).not.toEqual(plans(4));
  });

  it('keeps every visible trace of a break inside its picture', () => {
    for (const { make } of planSet({ count: 24, negatives: 0, seed: 8, prefix: 'p', megapixels: 0.5 })) {
      const { plan } = make();
      const { widthPx, heightPx } = plan.scene.camera;
      if (plan.truth.kind === 'none') throw new Error('a set without negatives holds breaks only');
      const points = plan.truth.traceImagePx.flat();
      expect(points.length).toBeGreaterThan(20);
      for (const [x, y] of points) {
        expect(x).toBeGreaterThan(0);
        expect(x).toBeLessThan(widthPx);
        expect(y).toBeGreaterThan(0);
        expect(y).toBeLessThan(heightPx);
      }
    }
  });
});
