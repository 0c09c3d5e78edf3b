import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { planeAngleDistanceDeg, wrapPlaneAngleDeg } from '../../src/angle.ts';
import { axialSummary } from '../../src/statistics/axial.ts';
import { compareMeanAxes } from '../../src/statistics/axialComparison.ts';
import { rosePetals } from '../../src/statistics/rose.ts';
import { besselRatio, vonMisesKappa } from '../../src/statistics/vonMises.ts';
import { standardNormals } from './seeded.ts';

/** Published sets are of directions (period 360°); halved they are axes, and every mean and deviation is halved. */
const halved = (degrees: readonly number[]): number[] => degrees.map((d) => d / 2);

describe('published sets, halved', () => {
  test('roulette wheel: mean direction 51°, resultant length 0.711 (Mardia & Jupp, Directional Statistics, 2000, Example 2.1; from memory, recomputed)', () => {
    const summary = axialSummary(halved([43, 45, 52, 61, 75, 88, 88, 279, 357]));
    expect(2 * (summary.meanAxisDeg as number)).toBeCloseTo(51.05, 2);
    expect(summary.resultantLength).toBeCloseTo(0.711, 3);
  });

  test('Zar, Biostatistical Analysis, Examples 26.4 and 27.1: mean 99°, r 0.82522, s 34°, s₀ 36°, 0.001 < P < 0.002 (from memory, recomputed)', () => {
    const summary = axialSummary(halved([45, 55, 81, 96, 110, 117, 132, 154]));
    expect(2 * (summary.meanAxisDeg as number)).toBeCloseTo(98.98775, 4);
    expect(summary.resultantLength).toBeCloseTo(0.82522, 5);
    expect(2 * summary.angularDeviationDeg).toBeCloseTo(33.8755, 3);
    expect(2 * summary.circularStandardDeviationDeg).toBeCloseTo(35.5149, 3);
    expect(summary.uniformityP).toBeCloseTo(0.001852, 5);
    // Upton's interval (Zar 26.7): half-width 30.9335° for the directions.
    expect(2 * (summary.confidenceHalfWidthDeg as number)).toBeCloseTo(30.9335, 3);
  });

  test('the large-sample standard error agrees: 1.96 times it and the interval differ by less than 5 % for 200 axes', () => {
    // Dispersion δ = (1 − ρ₂)/(2R̄²), standard error √(δ/n): Fisher, Statistical Analysis of Circular Data (1993), 4.4.4.
    const axes = standardNormals(7, 200).map((z) => 44 + 8 * z);
    const summary = axialSummary(axes);
    const rho2 = Math.hypot(
      axes.reduce((s, a) => s + Math.cos((4 * a * Math.PI) / 180), 0),
      axes.reduce((s, a) => s + Math.sin((4 * a * Math.PI) / 180), 0),
    );
    const delta = (1 - rho2 / axes.length) / (2 * summary.resultantLength ** 2);
    const halfWidthDeg = (1.96 * Math.sqrt(delta / axes.length) * 180) / Math.PI / 2;
    expect((summary.confidenceHalfWidthDeg as number) / halfWidthDeg).toBeGreaterThan(0.95);
    expect((summary.confidenceHalfWidthDeg as number) / halfWidthDeg).toBeLessThan(1.05);
  });

  test('Zar, Example 27.7, Watson–Williams: F = 1.61, P ≈ 0.22, means 64.8° and 54.1° (from memory, recomputed)', () => {
    const comparison = compareMeanAxes([
      halved([94, 65, 45, 52, 38, 47, 73, 82, 90, 40, 87]),
      halved([77, 70, 61, 45, 50, 35, 48, 65, 36]),
    ]);
    expect(comparison.fStatistic).toBeCloseTo(1.612773, 4);
    expect(comparison.p).toBeCloseTo(0.220275, 4);
    expect(comparison.degreesOfFreedom).toEqual([1, 18]);
    expect(2 * (comparison.meanAxesDeg[0] as number)).toBeCloseTo(64.8, 1);
    expect(2 * (comparison.meanAxesDeg[1] as number)).toBeCloseTo(54.1, 1);
    expect(comparison.trustworthy).toBe(true);
  });

  test('Batschelet, Circular Statistics in Biology (1981), p. 99, across the wrap: F = 8.733 within 0.5 % (κ from the pooled resultant there), means −9.0° and 1.99°', () => {
    const times = (count: number, value: number): number[] => new Array<number>(count).fill(value);
    // Halved and stored as 170 to 180°: the comparison must not see the wrap.
    const stored = (values: readonly number[]) => halved(values).map((a) => (a < 0 ? a + 180 : a));
    const comparison = compareMeanAxes([
      stored([-20, ...times(7, -10), 0, 0]),
      stored([...times(3, -10), ...times(3, 0), ...times(3, 10), 20]),
    ]);
    expect(Math.abs(comparison.fStatistic / 8.7329 - 1)).toBeLessThan(0.005);
    expect(2 * (comparison.meanAxesDeg[0] as number)).toBeCloseTo(-9.000615, 4);
    expect(2 * (comparison.meanAxesDeg[1] as number)).toBeCloseTo(1.988969, 4);
    // P of F(1, 18), scipy 1.17.1 f.sf(8.703713, 1, 18).
    expect(comparison.p).toBeCloseTo(0.008563, 5);
  });
});

describe('axes have no head', () => {
  test.each([
    ['179° and 1°', [179, 1], 0, Math.cos(Math.PI / 90)],
    ['10°, 20°, 30°', [10, 20, 30], 20, (1 + 2 * Math.cos(Math.PI / 9)) / 3],
    ['170°, 5°, 15°', [170, 5, 15], 3.388642, 0.93672071],
    ['88°, 89°, −89°, −90°', [88, 89, -89, -90], 89.5, undefined],
  ])('mean axis of %s', (_what, axes, meanDeg, length) => {
    const summary = axialSummary(axes);
    expect(planeAngleDistanceDeg(summary.meanAxisDeg as number, meanDeg)).toBeLessThan(1e-6);
    if (length !== undefined) expect(summary.resultantLength).toBeCloseTo(length, 7);
  });

  test.each([
    ['0° and 90°', [0, 90]],
    ['45° and 135°', [45, 135]],
    ['one axis in each of six directions', [0, 30, 60, 90, 120, 150]],
  ])('%s have no mean axis', (_what, axes) => {
    expect(axialSummary(axes)).toMatchObject({ meanAxisDeg: null, resultantLength: 0, confidenceHalfWidthDeg: null });
  });

  test('turning every axis turns the mean and changes nothing else', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -20, max: 20, noNaN: true }), { minLength: 2, maxLength: 30 }),
        fc.double({ min: -720, max: 720, noNaN: true }),
        (axes, turn) => {
          const still = axialSummary(axes);
          const turned = axialSummary(axes.map((a) => wrapPlaneAngleDeg(a + turn)));
          const expected = (still.meanAxisDeg as number) + turn;
          expect(planeAngleDistanceDeg(turned.meanAxisDeg as number, expected)).toBeLessThan(1e-6);
          expect(turned.resultantLength).toBeCloseTo(still.resultantLength, 9);
        },
      ),
    );
  });

  test('close together the circular standard deviation is the usual one (44°, 45°, 46°: √(2/3)°)', () => {
    expect(axialSummary([44, 45, 46]).circularStandardDeviationDeg).toBeCloseTo(0.816538, 5);
  });

  test('the interval of few close angles is that of Student (ISO 2602)', () => {
    // t(0.975; 4) = 2.776445, tables of Student's t.
    const axes = [44.1, 45.3, 43.8, 46.0, 44.9];
    const mean = axes.reduce((a, b) => a + b) / 5;
    const s = Math.sqrt(axes.reduce((sum, a) => sum + (a - mean) ** 2, 0) / 4);
    expect(axialSummary(axes).confidenceHalfWidthDeg).toBeCloseTo((2.776445 * s) / Math.sqrt(5), 2);
  });
});

test.each([
  { n: 5, spreadDeg: 3 },
  { n: 10, spreadDeg: 10 },
  { n: 12, spreadDeg: 20 },
  { n: 40, spreadDeg: 25 },
])(
  'the 95 % interval holds the true axis in 93 to 97 % of 3,000 samples (n $n, spread $spreadDeg°)',
  ({ n, spreadDeg }) => {
    const samples = 3000;
    const z = standardNormals(100 + n, samples * n);
    let held = 0;
    for (let i = 0; i < samples; i++) {
      const { meanAxisDeg, confidenceHalfWidthDeg } = axialSummary(
        z.slice(i * n, (i + 1) * n).map((x) => wrapPlaneAngleDeg(88 + spreadDeg * x)),
      );
      // A sample too scattered for an interval says so: every axis is possible.
      if (meanAxisDeg === null || confidenceHalfWidthDeg === null) held++;
      else if (planeAngleDistanceDeg(meanAxisDeg, 88) <= confidenceHalfWidthDeg) held++;
    }
    expect(held / samples).toBeGreaterThan(0.93);
    expect(held / samples).toBeLessThan(0.97);
  },
);

describe('concentration', () => {
  // mpmath 1.3.0, besseli(1, κ)/besseli(0, κ), 20 digits.
  test.each([
    [0.1, 0.04993760398793892],
    [1, 0.4463899658965345],
    [5, 0.8933831370440852],
    [50, 0.9899489673784978],
    [700, 0.9992854588184261],
    [20000, 0.999974999687492],
  ])('I₁/I₀ at κ = %d', (kappa, ratio) => {
    expect(besselRatio(kappa)).toBeCloseTo(ratio, 12);
    expect(vonMisesKappa(ratio) / kappa).toBeCloseTo(1, 6);
  });

  test('no length, no concentration; all the same, no limit', () => {
    expect(vonMisesKappa(0)).toBe(0);
    expect(vonMisesKappa(1)).toBe(Number.POSITIVE_INFINITY);
  });
});

describe('rose', () => {
  test('each angle lies in one petal, open below and closed above', () => {
    const petals = rosePetals([45, -45, 90, -90, 0, 0.1, 40, 50], 10);
    expect(petals).toHaveLength(18);
    const counts = Object.fromEntries(petals.filter((p) => p.count > 0).map((p) => [p.toDeg, p.count]));
    // −90 is the plane at 90.
    expect(counts).toEqual({ [-40]: 1, 0: 1, 10: 1, 40: 1, 50: 2, 90: 2 });
    expect(petals.reduce((sum, p) => sum + p.share, 0)).toBeCloseTo(1, 12);
  });

  test('a width that does not divide 180° is refused', () => {
    expect(() => rosePetals([1], 7)).toThrow(expect.objectContaining({ code: 'out-of-range' }));
  });
});

test('what is no sample is refused by name', () => {
  expect(() => axialSummary([])).toThrow(expect.objectContaining({ code: 'missing-value' }));
  expect(() => axialSummary([1, Number.NaN])).toThrow(expect.objectContaining({ code: 'not-a-number' }));
  expect(() => compareMeanAxes([[1, 2]])).toThrow(expect.objectContaining({ code: 'missing-value' }));
  expect(() => compareMeanAxes([[1], [2]])).toThrow(expect.objectContaining({ code: 'missing-value' }));
});
