import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { planeAngleDistanceDeg } from '../../src/angle.ts';
import {
  isIsotropicInPlane,
  normalStressMPa,
  predictedPlanes,
  principalStresses,
  shearStressMPa,
} from '../../src/mechanics/planes.ts';
import type { PredictedPlaneName, SurfaceStress } from '../../src/mechanics/stressState.ts';

const stressMPa = fc.double({ min: -2000, max: 2000, noNaN: true });
const anyState = fc.record({ sigmaXMPa: stressMPa, sigmaYMPa: stressMPa, tauMPa: stressMPa });
const directed = anyState.filter((s) => principalStresses(s).maxShearMPa > 1e-3);
const angleDeg = fc.double({ min: -360, max: 360, noNaN: true });
const scaleOf = (s: SurfaceStress) => Math.abs(s.sigmaXMPa) + Math.abs(s.sigmaYMPa) + Math.abs(s.tauMPa);
const angleOf = (s: SurfaceStress, name: PredictedPlaneName) =>
  predictedPlanes(s).find((p) => p.plane === name)?.planeAngleDeg;

describe('stress on any plane', () => {
  test('normal stresses on two planes a quarter turn apart add up to sigmaX + sigmaY', () => {
    fc.assert(
      fc.property(anyState, angleDeg, (state, theta) => {
        const sum = normalStressMPa(state, theta) + normalStressMPa(state, theta + 90);
        expect(Math.abs(sum - state.sigmaXMPa - state.sigmaYMPa)).toBeLessThanOrEqual(1e-12 * scaleOf(state) + 1e-300);
      }),
    );
  });

  test('the determinant of the stress tensor does not depend on the axes', () => {
    fc.assert(
      fc.property(anyState, angleDeg, (state, theta) => {
        const turned =
          normalStressMPa(state, theta) * normalStressMPa(state, theta + 90) - shearStressMPa(state, theta) ** 2;
        const given = state.sigmaXMPa * state.sigmaYMPa - state.tauMPa ** 2;
        expect(Math.abs(turned - given)).toBeLessThanOrEqual(1e-11 * scaleOf(state) ** 2 + 1e-300);
      }),
    );
  });

  test('shear stresses on two planes a quarter turn apart are opposite', () => {
    fc.assert(
      fc.property(anyState, angleDeg, (state, theta) => {
        const sum = shearStressMPa(state, theta) + shearStressMPa(state, theta + 90);
        expect(Math.abs(sum)).toBeLessThanOrEqual(1e-11 * scaleOf(state) + 1e-300);
      }),
    );
  });
});

describe('predicted planes', () => {
  test('counter-clockwise torque: tension at +45 as the break that leans "/", compression at −45', () => {
    const state = { sigmaXMPa: 0, sigmaYMPa: 0, tauMPa: 100 };
    expect(predictedPlanes(state)).toEqual([
      { plane: 'tension', planeAngleDeg: 45, normalStressMPa: 100, shearStressMPa: 0 },
      { plane: 'compression', planeAngleDeg: -45, normalStressMPa: -100, shearStressMPa: 0 },
      { plane: 'shear-transverse', planeAngleDeg: 0, normalStressMPa: 0, shearStressMPa: 100 },
      { plane: 'shear-longitudinal', planeAngleDeg: 90, normalStressMPa: 0, shearStressMPa: -100 },
    ]);
  });

  test('reversing the torque mirrors every plane', () => {
    fc.assert(
      fc.property(directed, (state) => {
        fc.pre(Math.abs(state.tauMPa) > 1e-6);
        const reversed = { ...state, tauMPa: -state.tauMPa };
        for (const name of ['tension', 'compression'] as const) {
          expect(
            planeAngleDistanceDeg(angleOf(reversed, name) ?? Number.NaN, -(angleOf(state, name) ?? Number.NaN)),
          ).toBeLessThan(1e-9);
        }
      }),
    );
  });

  test('the stated stresses are those on the stated planes, and no plane carries more', () => {
    fc.assert(
      fc.property(directed, angleDeg, (state, theta) => {
        const slack = 1e-9 * scaleOf(state);
        for (const plane of predictedPlanes(state)) {
          expect(Math.abs(normalStressMPa(state, plane.planeAngleDeg) - plane.normalStressMPa)).toBeLessThanOrEqual(
            slack,
          );
          expect(Math.abs(shearStressMPa(state, plane.planeAngleDeg) - plane.shearStressMPa)).toBeLessThanOrEqual(
            slack,
          );
        }
        const { sigma1MPa, sigma2MPa, maxShearMPa } = principalStresses(state);
        expect(normalStressMPa(state, theta)).toBeLessThanOrEqual(sigma1MPa + slack);
        expect(normalStressMPa(state, theta)).toBeGreaterThanOrEqual(sigma2MPa - slack);
        expect(Math.abs(shearStressMPa(state, theta))).toBeLessThanOrEqual(maxShearMPa + slack);
      }),
    );
  });

  test('the transverse shear plane is never further from 0° than the longitudinal one', () => {
    fc.assert(
      fc.property(directed, (state) => {
        const transverse = planeAngleDistanceDeg(angleOf(state, 'shear-transverse') ?? Number.NaN, 0);
        const longitudinal = planeAngleDistanceDeg(angleOf(state, 'shear-longitudinal') ?? Number.NaN, 0);
        expect(transverse).toBeLessThanOrEqual(longitudinal + 1e-9);
      }),
    );
  });

  test('axial tension lowers the tension plane, compression raises it', () => {
    expect(angleOf({ sigmaXMPa: 50, sigmaYMPa: 0, tauMPa: 100 }, 'tension')).toBeLessThan(45);
    expect(angleOf({ sigmaXMPa: -50, sigmaYMPa: 0, tauMPa: 100 }, 'tension')).toBeGreaterThan(45);
  });

  test.each([
    { sigmaXMPa: 0, sigmaYMPa: 0, tauMPa: 0 },
    { sigmaXMPa: 80, sigmaYMPa: 80, tauMPa: 0 },
    { sigmaXMPa: -3, sigmaYMPa: -3, tauMPa: 0 },
  ])('an isotropic state %o has no preferred plane', (state) => {
    expect(isIsotropicInPlane(state)).toBe(true);
    expect(predictedPlanes(state)).toEqual([]);
  });
});
