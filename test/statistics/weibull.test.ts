import { describe, expect, test } from 'vitest';
import { fitWeibull } from '../../src/statistics/weibull.ts';
import { weibullPivots } from '../../src/statistics/weibullPivots.ts';
import { uniforms } from './seeded.ts';

describe('published fits', () => {
  test('NIST/SEMATECH e-Handbook 8.4.1.2, ten failures and ten suspended: shape 1.7208, scale 606.5280', () => {
    const fit = fitWeibull([54, 187, 216, 240, 244, 335, 361, 373, 375, 386], new Array<number>(10).fill(500));
    expect(fit.modulus).toBeCloseTo(1.7208, 4);
    expect(fit.characteristicStrengthMPa).toBeCloseTo(606.528, 2);
    expect(fit).toMatchObject({ n: 10, suspended: 10, unbiasedModulus: null, modulusConfidence: null });
  });

  test('ball bearings (Lieblein & Zelen 1956; Lawless): shape 2.102, scale 81.88, log-likelihood −113.6913', () => {
    const fit = fitWeibull([
      17.88, 28.92, 33.0, 41.52, 42.12, 45.6, 48.48, 51.84, 51.96, 54.12, 55.56, 67.8, 68.64, 68.64, 68.88, 84.12,
      93.12, 98.64, 105.12, 105.84, 127.92, 128.04, 173.4,
    ]);
    expect(fit.modulus).toBeCloseTo(2.102059, 5);
    expect(fit.characteristicStrengthMPa).toBeCloseTo(81.87833, 4);
    expect(fit.logLikelihood).toBeCloseTo(-113.6913, 4);
  });

  test('air-conditioning data (Proschan 1963), R survreg: shape 0.793944, scale 94.9649', () => {
    const fit = fitWeibull([3, 5, 7, 18, 43, 85, 91, 98, 100, 130, 230, 487]);
    expect(fit.modulus).toBeCloseTo(0.793944, 5);
    expect(fit.characteristicStrengthMPa).toBeCloseTo(94.9649, 3);
  });
});

describe('scatter of the estimates', () => {
  // Unbiasing factors: Thoman, Bain & Antle, Technometrics 11 (1969), as in ASTM C1239; stated to 1 %.
  test.each([
    [5, 0.7],
    [8, 0.82],
    [10, 0.859],
    [20, 0.931],
  ])('unbiasing factor for n = %d: %d', (n, factor) => {
    expect(Math.abs(weibullPivots(n).unbiasingFactor / factor - 1)).toBeLessThan(0.01);
  });

  test.each([{ n: 6 }, { n: 11 }, { n: 33 }])(
    'the intervals hold the true modulus and strength in 93.5 to 96.5 % of 3,000 samples of $n (modulus 9, strength 280 MPa)',
    ({ n }) => {
      const samples = 3000;
      const u = uniforms(40 + n, samples * n);
      let modulusHeld = 0;
      let strengthHeld = 0;
      let unbiased = 0;
      for (let i = 0; i < samples; i++) {
        const fit = fitWeibull(u.slice(i * n, (i + 1) * n).map((p) => 280 * (-Math.log(p)) ** (1 / 9)));
        const { modulusConfidence: m, characteristicStrengthConfidenceMPa: s } = fit;
        if (m && m.from <= 9 && 9 <= m.to) modulusHeld++;
        if (s && s.from <= 280 && 280 <= s.to) strengthHeld++;
        unbiased += (fit.unbiasedModulus as number) / samples;
      }
      expect(Math.abs(modulusHeld / samples - 0.95)).toBeLessThan(0.015);
      expect(Math.abs(strengthHeld / samples - 0.95)).toBeLessThan(0.015);
      expect(Math.abs(unbiased / 9 - 1)).toBeLessThan(0.025);
    },
  );

  test('beyond the table the intervals go on shrinking', () => {
    expect(weibullPivots(400).modulusRatio.high).toBeLessThan(weibullPivots(100).modulusRatio.high);
    expect(weibullPivots(1e9).unbiasingFactor).toBeCloseTo(1, 4);
  });
});

test.each([
  ['no strengths', [], 'missing-value'],
  ['one strength', [250], 'missing-value'],
  ['strengths that are all the same', [250, 250, 250], 'missing-value'],
  ['a strength of zero', [0, 250], 'out-of-range'],
  ['a negative strength', [-1, 250], 'out-of-range'],
  ['no number', [Number.NaN, 250], 'not-a-number'],
  ['strengths that differ by rounding', [250, 250.0000000001], 'out-of-range'],
])('%s give no fit, by name', (_what, strengths, code) => {
  expect(() => fitWeibull(strengths)).toThrow(expect.objectContaining({ code }));
});
