import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { planeAngleDistanceDeg } from '../../src/angle.ts';
import { type CameraBow, fitTrace, type TraceFit } from '../../src/photo/traceFit.ts';
import type { SurfacePoint } from '../../src/photo/unroll.ts';
import { Random } from '../pictures/random.ts';
import { mirrored, tracedThrough, traceOf, upsideDown } from './syntheticTrace.ts';

const squareOn: CameraBow = { mean: 0, sigma: 0.02 };
const slope = (deg: number) => Math.tan((deg * Math.PI) / 180);
const helix = (deg: number) => (phi: number) => slope(deg) * phi;
const flatCut = (tiltDeg: number, azimuth: number) => (phi: number) =>
  slope(tiltDeg) * (Math.sin(azimuth) * Math.sin(phi) + Math.cos(azimuth) * Math.cos(phi));

function fitted(trace: readonly SurfacePoint[], bow = squareOn): TraceFit {
  const fit = fitTrace(trace, bow);
  if (!fit) throw new Error('the trace was not fitted');
  return fit;
}

describe('helix', () => {
  it('returns the angle a straight trace was drawn with', () => {
    fc.assert(
      fc.property(fc.double({ min: -64, max: 64, noNaN: true }), (deg) => {
        fc.pre(Math.abs(deg) > 25);
        const fit = fitted(traceOf(helix(deg)));
        expect(fit.planeAngleDeg).toBeCloseTo(deg, 1);
        expect(fit.shape).toBe('helix');
      }),
      { numRuns: 60 },
    );
  });

  it('changes sign in the mirror, keeps it upside down, and forgets where it lies', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -80, max: 80, noNaN: true }),
        fc.integer({ min: 1, max: 1e6 }),
        fc.double({ min: -20, max: 20, noNaN: true }),
        (deg, seed, shift) => {
          const trace = traceOf(helix(deg), new Random(seed));
          const fit = fitted(trace);
          const mirror = fitted(mirrored(trace));
          expect(planeAngleDistanceDeg(mirror.planeAngleDeg, -fit.planeAngleDeg)).toBeLessThan(1e-6);
          expect(mirror.shape).toBe(fit.shape);
          const turned = fitted(upsideDown(trace));
          expect(planeAngleDistanceDeg(turned.planeAngleDeg, fit.planeAngleDeg)).toBeLessThan(1e-6);
          expect(turned.shape).toBe(fit.shape);
          const moved = fitted(trace.map(({ x, phi }) => ({ x: x + shift, phi })));
          expect(planeAngleDistanceDeg(moved.planeAngleDeg, fit.planeAngleDeg)).toBeLessThan(1e-4);
        },
      ),
      { numRuns: 60 },
    );
  });

  it('does not care in which direction the trace was followed', () => {
    for (const deg of [-72, -45, 3, 38]) {
      const trace = traceOf(helix(deg), new Random(9));
      expect(fitted(trace.toReversed()).planeAngleDeg).toBeCloseTo(fitted(trace).planeAngleDeg, 6);
    }
  });

  it.each([45, -45, 52])('of %s° keeps its angle beside a closing step, which is marked', (deg) => {
    const rise = slope(deg);
    const step = 2 * Math.PI * rise;
    const trace = tracedThrough([
      { phi: -1.35, x: rise * -1.35 },
      { phi: 0.75, x: rise * 0.75 },
      { phi: 0.83, x: rise * 0.75 - 0.5 * step },
      { phi: 1.35, x: rise * 1.35 - 0.5 * step - rise * 0.08 },
    ]);
    const fit = fitted(trace);
    expect(fit.planeAngleDeg).toBeCloseTo(deg, -0.3);
    expect(Math.abs(fit.planeAngleDeg - deg)).toBeLessThan(2);
    expect(fit.segments.some((segment) => segment.closingStep)).toBe(true);
    expect(fit.shape).toBe('helix');
  });
});

describe('flat cut', () => {
  it('has the same tilt from every side', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 15, max: 50, noNaN: true }),
        fc.double({ min: -Math.PI, max: Math.PI, noNaN: true }),
        (tiltDeg, azimuth) => {
          const fit = fitted(traceOf(flatCut(tiltDeg, azimuth)), { mean: 0, sigma: 1e-3 });
          // Seen from where the cut shows no bow at all, it may still be taken for a helix of that slope.
          fc.pre(fit.shape === 'plane');
          expect(Math.abs((fit.planeTiltDeg ?? Number.NaN) - tiltDeg)).toBeLessThan(0.5);
        },
      ),
      { numRuns: 80 },
    );
  });

  it('is recognised from most sides', () => {
    const sides = Array.from({ length: 24 }, (_, i) => (i * Math.PI) / 12);
    const flat = sides.filter((azimuth) => fitted(traceOf(flatCut(35, azimuth), new Random(4))).shape === 'plane');
    expect(flat.length).toBeGreaterThanOrEqual(22);
  });

  it('has the least-squares slope of its sine over ±60° as plane angle', () => {
    // Least squares of a·sin φ on φ over (−c, c): a · 3 (sin c − c cos c) / c³.
    const c = Math.PI / 3;
    const factor = (3 * (Math.sin(c) - c * Math.cos(c))) / c ** 3;
    const fit = fitted(traceOf(flatCut(40, Math.PI / 2)));
    const expected = (Math.atan(slope(40) * factor) * 180) / Math.PI;
    expect(Math.abs(fit.planeAngleDeg - expected)).toBeLessThan(0.4);
  });

  it('shows the camera out of square as such when the bow is known', () => {
    const bow = 0.06;
    const bowed = traceOf((phi) => bow * Math.cos(phi));
    const blamed = fitted(bowed, { mean: bow, sigma: 0.003 });
    expect(blamed.planeTiltDeg ?? 0).toBeLessThan(0.5);
  });
});

describe('steep traces', () => {
  it('pass 90° without a jump', () => {
    for (let deg = 80; deg <= 100; deg += 0.5) {
      // Drawn along the axis: φ(x), as a split runs.
      const wanted = deg > 90 ? deg - 180 : deg;
      const trace = Array.from({ length: 160 }, (_, i) => {
        const x = -2 + (4 * i) / 159;
        return { x, phi: x * Math.tan(((90 - deg) * Math.PI) / 180) + 0.004 * Math.sin(17 * i) };
      });
      const fit = fitted(trace);
      expect(planeAngleDistanceDeg(fit.planeAngleDeg, wanted)).toBeLessThan(0.6);
      expect(fit.shape).toBe('longitudinal');
      expect(fit.planeAngleDeg).toBeGreaterThan(-90);
      expect(fit.planeAngleDeg).toBeLessThanOrEqual(90);
    }
  });

  it('a split with square ends is longitudinal', () => {
    const trace = tracedThrough([
      { phi: -1.35, x: -1.5 },
      { phi: -0.05, x: -1.5 },
      { phi: 0.05, x: 1.5 },
      { phi: 1.35, x: 1.5 },
    ]);
    const fit = fitted(trace);
    expect(fit.shape).toBe('longitudinal');
    expect(planeAngleDistanceDeg(fit.planeAngleDeg, (Math.atan(30) * 180) / Math.PI)).toBeLessThan(1.5);
  });
});

describe('mixed breaks', () => {
  it.each([45, -48])('square and inclined at %s°: both pieces come back', (deg) => {
    const trace = tracedThrough([
      { phi: -1.35, x: 0 },
      { phi: 0, x: 0 },
      { phi: 1.35, x: 1.35 * slope(deg) },
    ]);
    const fit = fitted(trace);
    expect(fit.shape).toBe('mixed');
    for (const wanted of [0, deg]) {
      const nearest = Math.min(...fit.segments.map((s) => planeAngleDistanceDeg(s.planeAngleDeg, wanted)));
      expect(nearest).toBeLessThan(2);
    }
    expect(fit.segments.reduce((sum, s) => sum + s.share, 0)).toBeCloseTo(1, 2);
  });
});

describe('uncertainty', () => {
  it.each([
    ['helix, fine scatter', 45, { sigma: 0.01, correlation: 0.6 }],
    ['steeper helix, fine scatter', 58, { sigma: 0.008, correlation: 0.5 }],
  ] as const)('%s: about 95 % of the fits lie within two standard uncertainties', (_name, deg, scatter) => {
    const random = new Random(77);
    const runs = 300;
    let within = 0;
    let squares = 0;
    let stated = 0;
    for (let run = 0; run < runs; run++) {
      const fit = fitted(traceOf(helix(deg), random, scatter));
      const u = Math.hypot(fit.roughnessUncertaintyDeg, fit.modelUncertaintyDeg);
      const error = planeAngleDistanceDeg(fit.planeAngleDeg, deg);
      squares += error ** 2 / runs;
      stated += u ** 2 / runs;
      if (error <= 2 * u) within++;
    }
    // 95.4 % of a normal distribution; 300 draws scatter by 1.2 %, and u itself is an estimate.
    expect(within / runs).toBeGreaterThan(0.87);
    expect(within / runs).toBeLessThan(0.999);
    expect(Math.sqrt(stated / squares)).toBeGreaterThan(0.75);
    expect(Math.sqrt(stated / squares)).toBeLessThan(1.8);
  });

  it('grows with the scatter', () => {
    const u = (sigma: number) =>
      fitted(traceOf(helix(45), new Random(3), { sigma, correlation: 0.8 })).roughnessUncertaintyDeg;
    expect(u(0.04)).toBeGreaterThan(2 * u(0.012));
  });
});

describe('too little trace', () => {
  it('gives nothing rather than a guess', () => {
    expect(fitTrace([], squareOn)).toBeNull();
    expect(fitTrace([{ x: 0, phi: 0 }], squareOn)).toBeNull();
    expect(
      fitTrace(
        [
          { x: 0, phi: 0 },
          { x: 0.01, phi: 0.02 },
        ],
        squareOn,
      ),
    ).toBeNull();
  });
});
