import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { LabError } from '../../src/errors.ts';
import { SECTIONS, sectionProperties } from '../../src/mechanics/sections/registry.ts';
import { surfaceStressOf } from '../../src/mechanics/surfaceStress.ts';
import { elasticShearStressMPa, fullyPlasticShearStressMPa, surfaceShearStrain } from '../../src/mechanics/torsion.ts';
import { SectionGeometry } from '../../src/records/geometry.ts';

const codeOf = (run: () => unknown): string => {
  try {
    run();
  } catch (error) {
    if (error instanceof LabError) return `${error.code} ${error.input}`;
    throw error;
  }
  return 'accepted';
};

describe('sections', () => {
  test('every section of the record schema is in the registry, and none besides', () => {
    const names = SectionGeometry.options.map((option) => option.shape.section.value).sort();
    expect(Object.keys(SECTIONS).sort()).toEqual(names);
  });

  test('a tube whose bore vanishes is a solid bar', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.1, max: 1000, noNaN: true }), (diameterMm) => {
        const solid = sectionProperties({ section: 'solid-round', diameterMm });
        const tube = sectionProperties({ section: 'hollow-round', diameterMm, boreMm: diameterMm * 1e-6 });
        for (const key of [
          'areaMm2',
          'torsionConstantMm4',
          'torsionSectionModulusMm3',
          'plasticTorsionModulusMm3',
          'bendingSectionModulusMm3',
        ] as const) {
          expect(tube[key] / solid[key]).toBeCloseTo(1, 10);
        }
      }),
    );
  });

  test('a thin tube tends to Bredt: W = 2 π r_m² t, elastic and plastic alike', () => {
    const wallMm = 1e-4;
    const tube = sectionProperties({ section: 'hollow-round', diameterMm: 20, boreMm: 20 - 2 * wallMm });
    const bredt = 2 * Math.PI * (10 - wallMm / 2) ** 2 * wallMm;
    expect(tube.torsionSectionModulusMm3 / bredt).toBeCloseTo(1, 4);
    expect(tube.plasticTorsionModulusMm3 / bredt).toBeCloseTo(1, 4);
  });

  test('the fully plastic stress of any tube lies between 3/4 and 1 of the elastic one', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.001, max: 0.999, noNaN: true }), (ratio) => {
        const tube = { section: 'hollow-round', diameterMm: 30, boreMm: 30 * ratio } as const;
        const share = fullyPlasticShearStressMPa(tube, 100) / elasticShearStressMPa(tube, 100);
        expect(share).toBeGreaterThanOrEqual(0.75 - 1e-12);
        expect(share).toBeLessThanOrEqual(1 + 1e-12);
      }),
    );
  });

  test.each([0, -10, Number.NaN, Number.POSITIVE_INFINITY])('a diameter of %d is refused by name', (diameterMm) => {
    expect(codeOf(() => sectionProperties({ section: 'solid-round', diameterMm }))).toBe('out-of-range diameterMm');
  });

  test('a bore as large as the diameter is refused by name', () => {
    expect(codeOf(() => sectionProperties({ section: 'hollow-round', diameterMm: 10, boreMm: 10 }))).toBe(
      'contradiction boreMm',
    );
    expect(codeOf(() => sectionProperties({ section: 'hollow-round', diameterMm: 10, boreMm: Number.NaN }))).toBe(
      'out-of-range boreMm',
    );
  });

  test('a gauge length of 0 is refused, not divided by', () => {
    expect(codeOf(() => surfaceShearStrain({ section: 'solid-round', diameterMm: 10 }, 30, 0))).toBe(
      'out-of-range gaugeLengthMm',
    );
  });
});

describe('surface stress of a test', () => {
  const geometry = { section: 'solid-round', diameterMm: 12 } as const;

  test('85 N·m on 12 mm is 16T/(πd³) = 250.5 MPa, signed like the torque', () => {
    expect(surfaceStressOf({ geometry, torqueMaxNm: 85, torqueDirection: 'ccw' })?.tauMPa).toBeCloseTo(250.5217, 4);
    expect(surfaceStressOf({ geometry, torqueMaxNm: 85, torqueDirection: 'cw' })?.tauMPa).toBeCloseTo(-250.5217, 4);
  });

  test('an axial force adds N/A and leaves the shear stress alone', () => {
    const stress = surfaceStressOf({ geometry, torqueMaxNm: 85, axialForceN: -5000 });
    expect(stress?.sigmaXMPa).toBeCloseTo(-5000 / (36 * Math.PI), 10);
    expect(stress?.tauMPa).toBeCloseTo(250.5217, 4);
  });

  test('without a torque there is no stress', () => {
    expect(surfaceStressOf({ geometry, torqueMaxNm: null })).toBeNull();
    expect(surfaceStressOf({ torqueMaxNm: 85 })).toBeNull();
  });

  test('a torque that is no number is refused by name', () => {
    expect(codeOf(() => surfaceStressOf({ geometry, torqueMaxNm: Number.NaN }))).toBe('not-a-number torqueNm');
    expect(codeOf(() => surfaceStressOf({ geometry, torqueMaxNm: 85, axialForceN: Number.NaN }))).toBe(
      'not-a-number axialForceN',
    );
  });
});
