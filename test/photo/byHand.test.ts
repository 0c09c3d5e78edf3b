import { describe, expect, it } from 'vitest';
import { planeAngleDistanceDeg } from '../../src/angle.ts';
import { LabError } from '../../src/errors.ts';
import { type ByHandInput, measureByHand } from '../../src/photo/byHand.ts';
import type { PointPx } from '../../src/records/reading.ts';
import type { BreakKind } from '../pictures/breaks.ts';
import { type BreakTruth, type PhotoPlan, planBreakPhoto } from '../pictures/photoScene.ts';
import { Random } from '../pictures/random.ts';

/** What a careful hand would set: about 40 points of the first lip, the true axis and diameter. */
function setByHand(plan: PhotoPlan<BreakTruth>): { truth: BreakTruth; input: ByHandInput } {
  const { truth } = plan;
  const [from, to] = truth.axisImagePx;
  const lip = truth.traceImagePx[0] ?? [];
  const every = Math.max(1, Math.floor(lip.length / 40));
  const { widthPx, heightPx, focalPx } = plan.scene.camera;
  return {
    truth,
    input: {
      axisPx: [[...from], [...to]],
      diameterPx: truth.diameterPx,
      tracePx: lip.filter((_, i) => i % every === 0).map(([x, y]): PointPx => [x, y]),
      widthPx,
      heightPx,
      focalOverLongSide: focalPx / Math.max(widthPx, heightPx),
    },
  };
}

const plans = (kind: BreakKind, count: number) =>
  Array.from({ length: count }, (_, i) =>
    planBreakPhoto({ view: 'half', kind, megapixels: 2, diameterPx: 300 }, new Random(4000 + i)),
  );

const straight = (deg: number, direction = 0): ByHandInput => {
  // Axis through (500, 400); the trace of a helix of angle θ is x = r tan θ · φ, y = r sin φ (up).
  const radius = 100;
  const turn = ([x, y]: PointPx): PointPx => {
    const t = (direction * Math.PI) / 180;
    return [500 + x * Math.cos(t) + y * Math.sin(t), 400 - y * Math.cos(t) + x * Math.sin(t)];
  };
  return {
    axisPx: [turn([-300, 0]), turn([300, 0])],
    diameterPx: 2 * radius,
    tracePx: Array.from({ length: 25 }, (_, i): PointPx => {
      const phi = -1.2 + 0.1 * i;
      return turn([radius * Math.tan((deg * Math.PI) / 180) * phi, radius * Math.sin(phi)]);
    }),
    widthPx: 1000,
    heightPx: 800,
    // A camera far away: parallel light.
    focalOverLongSide: 50,
  };
};

describe('measurement by hand', () => {
  it.each([-60, -45, -30, 33, 45, 58])(
    'gives the angle of a drawn helix of %s° in every direction of the photo',
    (deg) => {
      for (const direction of [0, 37, 90, 180, 251]) {
        const { planeAngleDeg, hand, shape } = measureByHand(straight(deg, direction));
        expect(Math.abs(planeAngleDeg - deg)).toBeLessThan(0.3);
        expect(hand).toBe(deg > 0 ? 'left' : 'right');
        expect(shape).toBe('helix');
      }
    },
  );

  it('changes the hand in the mirror', () => {
    const input = straight(45);
    const mirror = ([x, y]: PointPx): PointPx => [999 - x, y];
    const [from, to] = input.axisPx;
    const mirrored = measureByHand({
      ...input,
      axisPx: [mirror(from), mirror(to)],
      tracePx: input.tracePx.map(mirror),
    });
    expect(mirrored.planeAngleDeg).toBeCloseTo(-measureByHand(input).planeAngleDeg, 6);
    expect(mirrored.hand).toBe('right');
  });

  it.each(['helix', 'transverse', 'oblique-plane'] as const)(
    'agrees with the true slope on planned photos: %s',
    (kind) => {
      const results = plans(kind, 25).flatMap((plan) => {
        const { truth, input } = setByHand(plan);
        if (truth.visibleFrontThetaDeg === null) return [];
        const measured = measureByHand(input);
        const errorDeg = planeAngleDistanceDeg(measured.planeAngleDeg, truth.visibleFrontThetaDeg);
        return [{ errorDeg, within: errorDeg <= measured.expandedUncertaintyDeg }];
      });
      const errors = results.map(({ errorDeg }) => errorDeg).sort((a, b) => a - b);
      expect(results.length).toBeGreaterThan(20);
      expect(errors[Math.floor(errors.length / 2)]).toBeLessThan(0.8);
      expect(errors[Math.floor(0.9 * errors.length)]).toBeLessThan(2.5);
      expect(results.filter(({ within }) => within).length / results.length).toBeGreaterThan(0.85);
    },
  );

  it.each([
    [
      'axis points on one another',
      {
        axisPx: [
          [10, 10],
          [10, 10],
        ],
      },
      /apart/,
    ],
    ['no diameter', { diameterPx: 0 }, /diameterPx/],
    ['one trace point', { tracePx: [[500, 400]] }, /at least 2/],
    [
      'a trace of one place',
      {
        tracePx: [
          [500, 400],
          [500, 400],
        ],
      },
      /too short/,
    ],
    ['not a number', { diameterPx: Number.NaN }, /finite/],
  ] as const)('refuses %s with a reason', (_name, change, message) => {
    const attempt = () => measureByHand({ ...straight(45), ...(change as unknown as Partial<ByHandInput>) });
    expect(attempt).toThrow(LabError);
    expect(attempt).toThrow(message);
  });
});
