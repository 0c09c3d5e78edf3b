import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { azimuthOfHeight, frameFromAxis, heightOfAzimuth, toPhoto, toSurface } from '../../src/photo/unroll.ts';
import { Camera } from '../pictures/camera.ts';

const frames = fc
  .record({
    x: fc.double({ min: 100, max: 900, noNaN: true }),
    y: fc.double({ min: 100, max: 900, noNaN: true }),
    direction: fc.double({ min: 0, max: 2 * Math.PI, noNaN: true }),
    diameterPx: fc.double({ min: 40, max: 600, noNaN: true }),
    taper: fc.double({ min: -0.01, max: 0.01, noNaN: true }),
    cameraDistanceRadii: fc.oneof(fc.constant(Number.POSITIVE_INFINITY), fc.double({ min: 8, max: 100, noNaN: true })),
  })
  .map(({ x, y, direction, diameterPx, taper, cameraDistanceRadii }) =>
    frameFromAxis(
      { xPx: x, yPx: y },
      { xPx: x + 200 * Math.cos(direction), yPx: y + 200 * Math.sin(direction) },
      diameterPx,
      { taper, cameraDistanceRadii, photoMiddlePx: { xPx: 500, yPx: 400 } },
    ),
  );

describe('unrolling', () => {
  it('leads back to the same point of the surface', () => {
    fc.assert(
      fc.property(
        frames,
        fc.double({ min: -3, max: 3, noNaN: true }),
        fc.double({ min: -1.3, max: 1.3, noNaN: true }),
        (frame, x, phi) => {
          const back = toSurface(frame, toPhoto(frame, { x, phi }));
          expect(back.x).toBeCloseTo(x, 8);
          expect(back.phi).toBeCloseTo(phi, 8);
        },
      ),
    );
  });

  it('puts the silhouette where the line of sight touches the cylinder, cos φ = 1/k', () => {
    for (const k of [6, 20, 80]) {
      expect(heightOfAzimuth(Math.acos(1 / k), k)).toBeCloseTo(1, 12);
      expect(azimuthOfHeight(1, k)).toBeCloseTo(Math.acos(1 / k), 9);
    }
    expect(heightOfAzimuth(Math.PI / 2, Number.POSITIVE_INFINITY)).toBe(1);
  });

  // The camera of the picture generator is written without the unrolling: a plain pinhole in space.
  it.each([10, 24, 60])('agrees with a pinhole camera %s radii away', (distanceR) => {
    const radiusPx = 110;
    const focalPx = radiusPx * Math.sqrt(distanceR ** 2 - 1);
    for (const rollDeg of [0, 35, 170, -90]) {
      const camera = new Camera({
        widthPx: 1001,
        heightPx: 801,
        distanceR,
        focalPx,
        tiltDeg: 0,
        elevationDeg: 0,
        rollDeg,
        originPx: { xPx: 500, yPx: 400 },
        distortion: 0,
      });
      const from = camera.project({ x: -2, y: 0, z: 0 });
      const to = camera.project({ x: 3, y: 0, z: 0 });
      const frame = frameFromAxis(from, to, 2 * radiusPx, {
        cameraDistanceRadii: distanceR,
        photoMiddlePx: { xPx: 500, yPx: 400 },
      });
      for (const x of [-2, 0, 1.7]) {
        for (const phi of [-1.2, -0.4, 0, 0.9]) {
          const seen = camera.project({ x, y: Math.sin(phi), z: Math.cos(phi) });
          const found = toSurface(frame, seen);
          // The origin of the frame is the middle of the two axis points, in units of the projected radius.
          const scale = focalPx / distanceR / radiusPx;
          expect(found.phi).toBeCloseTo(phi, 6);
          expect(found.x / scale).toBeCloseTo(x - 0.5, 2);
        }
      }
    }
  });

  it('refuses an axis without direction and a diameter of nothing', () => {
    const at = { xPx: 5, yPx: 5 };
    expect(() => frameFromAxis(at, at, 100)).toThrow(/apart/);
    expect(() => frameFromAxis(at, { xPx: 50, yPx: 5 }, 0)).toThrow(/diameterPx/);
    expect(() => frameFromAxis(at, { xPx: 50, yPx: 5 }, Number.NaN)).toThrow(/diameterPx/);
  });
});
