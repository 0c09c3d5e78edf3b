import { describe, expect, test } from 'vitest';
import { controlChartOfIndividuals } from '../../src/statistics/controlChart.ts';
import { driftOverTime, fitLine } from '../../src/statistics/drift.ts';
import { analyseVariance, compareTwoMeans } from '../../src/statistics/meansCompared.ts';
import { findOutliers, grubbsCriticalValue } from '../../src/statistics/outliers.ts';
import { fisherExactP, shareDifference, shareOf } from '../../src/statistics/proportions.ts';
import { sampleMoments } from '../../src/statistics/sample.ts';
import { strengthSummary } from '../../src/statistics/strength.ts';
import { oneSidedToleranceFactor, twoSidedToleranceFactor } from '../../src/statistics/tolerance.ts';
import { AtmWtAg, NORRIS, ROSNER, SiRstv } from './certifiedSets.ts';
import { standardNormals } from './seeded.ts';

describe('mean and standard deviation', () => {
  test('NIST StRD NumAcc1: 10000002 and 1, exact', () => {
    expect(sampleMoments([10000001, 10000003, 10000002])).toEqual({ n: 3, mean: 10000002, standardDeviation: 1 });
  });

  test('NIST StRD NumAcc4: 10000000.2 and 0.1 to eight digits', () => {
    const values = [10000000.2, ...Array.from({ length: 1000 }, (_, i) => (i % 2 === 0 ? 10000000.1 : 10000000.3))];
    const { mean, standardDeviation } = sampleMoments(values);
    expect(mean).toBeCloseTo(10000000.2, 8);
    expect(standardDeviation).toBeCloseTo(0.1, 8);
  });

  test('95 % interval of a mean: t(0.975; 4) = 2.776445 (tables of Student’s t)', () => {
    const summary = strengthSummary([44.1, 45.3, 43.8, 46.0, 44.9]);
    expect(summary.meanMPa).toBeCloseTo(44.82, 10);
    expect(summary.standardDeviationMPa).toBeCloseTo(0.892749, 6);
    expect((summary.meanConfidenceMPa?.to as number) - summary.meanMPa).toBeCloseTo(1.108494, 5);
    // χ² of 4 degrees: 0.484419 and 11.143287 (tables).
    expect(summary.standardDeviationConfidenceMPa?.from).toBeCloseTo(0.892749 * Math.sqrt(4 / 11.143287), 5);
    expect(summary.standardDeviationConfidenceMPa?.to).toBeCloseTo(0.892749 * Math.sqrt(4 / 0.484419), 5);
  });

  test('one value has a mean and nothing more', () => {
    expect(strengthSummary([250])).toMatchObject({
      n: 1,
      meanMPa: 250,
      standardDeviationMPa: null,
      toleranceIntervalMPa: null,
    });
  });
});

describe('tolerance factors', () => {
  // One-sided: noncentral t, scipy 1.17.1 nct.ppf(γ, n − 1, z_p √n)/√n; the first two also in the tables of ISO 16269-6
  // (2.911 and 4.203), the third in NIST/SEMATECH e-Handbook 7.2.6.3 (1.8740).
  test.each([
    [10, 0.95, 0.95, 2.910963],
    [5, 0.95, 0.95, 4.202681],
    [43, 0.9, 0.99, 1.873954],
    [30, 0.99, 0.9, 2.883725],
    [2, 0.9, 0.9, 10.252714],
  ])('one-sided, n %d, content %d, confidence %d: %d', (n, content, confidence, k) => {
    expect(oneSidedToleranceFactor({ n, content, confidence })).toBeCloseTo(k, 5);
  });

  // Two-sided: tables of ISO 16269-6 (Odeh & Owen 1980), from memory, three decimals.
  test.each([
    [5, 0.95, 0.95, 5.077],
    [10, 0.95, 0.95, 3.393],
    [20, 0.95, 0.95, 2.76],
    [10, 0.99, 0.95, 4.437],
  ])('two-sided, n %d, content %d, confidence %d: %d', (n, content, confidence, k) => {
    expect(Math.abs(twoSidedToleranceFactor({ n, content, confidence }) - k)).toBeLessThan(0.004);
  });

  test('two-sided intervals hold 90 % of the population in 90 % of 4,000 samples of 8 (± 1.5 %)', () => {
    const k = twoSidedToleranceFactor({ n: 8, content: 0.9, confidence: 0.9 });
    const z = standardNormals(3, 8 * 4000);
    let held = 0;
    for (let i = 0; i < 4000; i++) {
      const { mean, standardDeviation } = sampleMoments(z.slice(8 * i, 8 * i + 8));
      const reach = k * (standardDeviation as number);
      if (phi(mean + reach) - phi(mean - reach) >= 0.9) held++;
    }
    expect(Math.abs(held / 4000 - 0.9)).toBeLessThan(0.015);
  });

  test('questions that make no sense are refused', () => {
    for (const question of [
      { n: 1, content: 0.9, confidence: 0.9 },
      { n: 10, content: 1, confidence: 0.9 },
      { n: 10, content: 0.9, confidence: 0 },
    ]) {
      expect(() => oneSidedToleranceFactor(question)).toThrow(expect.objectContaining({ code: 'out-of-range' }));
      expect(() => twoSidedToleranceFactor(question)).toThrow(expect.objectContaining({ code: 'out-of-range' }));
    }
  });
});

/** Φ by its power series, independent of the program's own. */
function phi(z: number): number {
  let sum = z;
  let term = z;
  for (let i = 1; i < 200; i++) {
    term *= (z * z) / (2 * i + 1);
    sum += term;
  }
  return Math.abs(z) > 7 ? (z > 0 ? 1 : 0) : 0.5 + (sum * Math.exp((-z * z) / 2)) / Math.sqrt(2 * Math.PI);
}

describe('outliers', () => {
  // Critical values, one-sided 5 % and 1 %: table of Grubbs (1969), also ASTM E178 table 1.
  test.each([
    [3, 1.15, 1.15],
    [5, 1.67, 1.75],
    [7, 1.94, 2.1],
    [8, 2.03, 2.22],
    [10, 2.18, 2.41],
    [15, 2.41, 2.71],
    [20, 2.56, 2.88],
  ])('Grubbs, n = %d: %d at five per cent, %d at one per cent', (n, five, one) => {
    expect(Math.abs(grubbsCriticalValue(n, 0.1) - five)).toBeLessThan(0.0061);
    expect(Math.abs(grubbsCriticalValue(n, 0.02) - one)).toBeLessThan(0.0061);
  });

  test('NIST/SEMATECH e-Handbook 1.3.5.17.1: G = 2.4687 > 2.032, the value 245.57', () => {
    const values = [199.31, 199.53, 200.19, 200.82, 201.92, 201.95, 202.18, 245.57];
    const { outliers } = findOutliers(values, { significance: 0.1 });
    expect(outliers).toMatchObject([{ index: 7, value: 245.57 }]);
    expect(outliers[0]?.statistic).toBeCloseTo(2.4687, 3);
    expect(outliers[0]?.criticalValue).toBeCloseTo(2.032, 3);
  });

  test('hard-drawn copper wire (ASTM E178): 596 is one at 5 %, none at 1 % (one-sided)', () => {
    const values = [568, 570, 570, 570, 572, 572, 572, 578, 584, 596];
    expect(findOutliers(values, { significance: 0.1 }).outliers).toMatchObject([{ value: 596 }]);
    expect(findOutliers(values, { significance: 0.02 }).outliers).toEqual([]);
  });

  test('NIST/SEMATECH e-Handbook 1.3.5.17.3 (Rosner): exactly three outliers, the first two hidden by the third', () => {
    const { outliers, steps } = findOutliers(ROSNER, { atMost: 10 });
    expect(outliers.map((o) => o.value)).toEqual([6.01, 5.42, 5.34]);
    const published = [
      [3.118906, 3.158794],
      [2.942973, 3.15143],
      [3.179424, 3.14389],
      [2.810181, 3.136165],
    ];
    for (const [i, [statistic, critical]] of published.entries()) {
      expect(steps[i]?.statistic).toBeCloseTo(statistic as number, 5);
      expect(steps[i]?.criticalValue).toBeCloseTo(critical as number, 4);
    }
  });

  test.each([[[]], [[1]], [[1, 2]], [[5, 5, 5, 5]]])('no outlier can be in %j', (values) => {
    expect(findOutliers(values).outliers).toEqual([]);
  });

  test('clean samples raise a false alarm in about 5 % of cases (2,000 samples of 15)', () => {
    const z = standardNormals(11, 15 * 2000);
    let alarms = 0;
    for (let i = 0; i < 2000; i++) {
      if (findOutliers(z.slice(15 * i, 15 * i + 15), { atMost: 1 }).outliers.length > 0) alarms++;
    }
    expect(alarms / 2000).toBeGreaterThan(0.035);
    expect(alarms / 2000).toBeLessThan(0.065);
  });
});

describe('shares', () => {
  // Newcombe, Statistics in Medicine 17 (1998) 857, method 3.
  test.each([
    [81, 263, 0.2553, 0.3662],
    [15, 148, 0.0624, 0.1605],
    [0, 20, 0, 0.1611],
    [1, 29, 0.0061, 0.1718],
  ])('Wilson, %d of %d: %d to %d', (count, of, from, to) => {
    const { confidence } = shareOf(count, of);
    expect(confidence.from).toBeCloseTo(from, 4);
    expect(confidence.to).toBeCloseTo(to, 4);
  });

  // Newcombe, Statistics in Medicine 17 (1998) 873, method 10.
  test.each([
    [56, 70, 48, 80, 0.0524, 0.3339],
    [9, 10, 3, 10, 0.1705, 0.809],
    [5, 56, 0, 29, -0.0381, 0.1926],
  ])('difference %d/%d − %d/%d: %d to %d', (a, n, b, m, from, to) => {
    const { confidence } = shareDifference(shareOf(a, n), shareOf(b, m));
    expect(confidence.from).toBeCloseTo(from, 4);
    expect(confidence.to).toBeCloseTo(to, 4);
  });

  test.each([
    [
      'Fisher, The Design of Experiments (1935), tea tasting: 34/70',
      [
        [3, 1],
        [1, 3],
      ],
      34 / 70,
    ],
    [
      'scipy 1.17.1 documentation: 5/143',
      [
        [8, 2],
        [1, 5],
      ],
      5 / 143,
    ],
    [
      'hypergeometric sums',
      [
        [1, 9],
        [11, 3],
      ],
      0.002759456,
    ],
    [
      'no difference at all',
      [
        [0, 5],
        [0, 7],
      ],
      1,
    ],
  ] as const)('Fisher’s exact test: %s', (_source, table, p) => {
    expect(fisherExactP(table)).toBeCloseTo(p, 8);
  });

  test('counts that cannot be are refused', () => {
    expect(() => shareOf(3, 2)).toThrow(expect.objectContaining({ code: 'out-of-range' }));
    expect(() => shareOf(0, 0)).toThrow(expect.objectContaining({ code: 'out-of-range' }));
    expect(() =>
      fisherExactP([
        [1, -1],
        [0, 2],
      ]),
    ).toThrow(expect.objectContaining({ code: 'out-of-range' }));
  });
});

describe('groups against each other', () => {
  test('NIST StRD AtmWtAg, certified: F = 15.9467335677930, R² = 0.257426544538321, s = 1.51048314446410e-5', () => {
    const analysis = analyseVariance(AtmWtAg);
    expect(analysis.degreesOfFreedom).toEqual([1, 46]);
    // The set has seven equal leading digits; nine digits of F are what doubles can give.
    expect(Math.abs(analysis.fStatistic / 15.946733567793 - 1)).toBeLessThan(1e-6);
    expect(Math.abs(analysis.rSquared / 0.257426544538321 - 1)).toBeLessThan(1e-6);
    expect(Math.abs(analysis.withinStandardDeviation / 1.5104831444641e-5 - 1)).toBeLessThan(1e-6);
  });

  test('NIST StRD SiRstv, certified: F = 1.18046237440255, R² = 0.190999039051129, s = 0.104076068334656', () => {
    const analysis = analyseVariance(SiRstv);
    expect(analysis.degreesOfFreedom).toEqual([4, 20]);
    expect(Math.abs(analysis.fStatistic / 1.18046237440255 - 1)).toBeLessThan(1e-9);
    expect(Math.abs(analysis.rSquared / 0.190999039051129 - 1)).toBeLessThan(1e-9);
    expect(Math.abs(analysis.withinStandardDeviation / 0.104076068334656 - 1)).toBeLessThan(1e-9);
  });

  test('Welch’s t: scipy 1.17.1 ttest_ind(equal_var=False) on instruments 1 and 4 of SiRstv', () => {
    const difference = compareTwoMeans(SiRstv[0] as number[], SiRstv[3] as number[]);
    expect(difference.t).toBeCloseTo(WELCH.t, 8);
    expect(difference.degreesOfFreedom).toBeCloseTo(WELCH.degrees, 8);
    expect(difference.p).toBeCloseTo(WELCH.p, 8);
    expect(difference.confidence.from).toBeCloseTo(WELCH.from, 8);
    expect(difference.confidence.to).toBeCloseTo(WELCH.to, 8);
  });

  test('values that are all the same do not divide by zero', () => {
    expect(compareTwoMeans([1, 1], [1, 1])).toMatchObject({ difference: 0, p: 1 });
    expect(compareTwoMeans([1, 1], [2, 2])).toMatchObject({ difference: -1, p: 0 });
    expect(
      analyseVariance([
        [1, 1],
        [1, 1],
      ]),
    ).toMatchObject({ fStatistic: 0, p: 1 });
    expect(() => analyseVariance([[1], [2]])).toThrow(expect.objectContaining({ code: 'missing-value' }));
  });
});

describe('drift', () => {
  test('NIST StRD Norris, certified: slope, intercept, their errors, s, R²', () => {
    const line = fitLine(NORRIS.map(([y, x]) => ({ x, y })));
    const certified = {
      intercept: -0.262323073774029,
      slope: 1.00211681802045,
      interceptStandardError: 0.232818234301152,
      slopeStandardError: 0.429796848199937e-3,
      residualStandardDeviation: 0.884796396144373,
      rSquared: 0.999993745883712,
    };
    for (const [name, value] of Object.entries(certified)) {
      expect(Math.abs(line[name as keyof typeof certified] / value - 1), name).toBeLessThan(1e-10);
    }
  });

  test('a strength that falls 20 MPa a year is seen, with its unit', () => {
    const noise = standardNormals(5, 40);
    const values = noise.map((z, i) => {
      const date = new Date(Date.UTC(2024, 0, 1 + 18 * i)).toISOString().slice(0, 10);
      return { date, value: 300 - (20 * 18 * i) / 365.25 + z };
    });
    const drift = driftOverTime(values);
    expect(drift?.perYear).toBeCloseTo(-20, 0);
    expect(drift?.p).toBeLessThan(1e-6);
    expect(drift?.perYearConfidence.from).toBeLessThan(-20);
    expect(drift?.perYearConfidence.to).toBeGreaterThan(-20);
  });

  test('tests of one day, or two tests, show no drift', () => {
    const on = (date: string, value: number) => ({ date, value });
    expect(driftOverTime([on('2026-01-01', 1), on('2026-01-01', 2), on('2026-01-01', 3)])).toBeNull();
    expect(driftOverTime([on('2026-01-01', 1), on('2026-01-02', 2)])).toBeNull();
    expect(driftOverTime([])).toBeNull();
  });
});

test('chart of individuals, NIST/SEMATECH e-Handbook 6.3.2.2: centre 50.81, mean range 1.8778, limits 45.816 and 55.804 (from memory)', () => {
  const chart = controlChartOfIndividuals([49.6, 47.6, 49.9, 51.3, 47.8, 51.2, 52.6, 52.4, 53.6, 52.1]);
  expect(chart?.centre).toBeCloseTo(50.81, 10);
  expect(chart?.meanMovingRange).toBeCloseTo(1.8778, 4);
  // The handbook takes d₂ as 1.128; 2/√π is 1.128379.
  expect(chart?.upperLimit).toBeCloseTo(55.8041, 2);
  expect(chart?.lowerLimit).toBeCloseTo(45.8159, 2);
  expect(chart?.outside).toEqual([]);
  expect(controlChartOfIndividuals([50, 51, 50, 51, 50, 51, 50, 51, 50, 51, 50, 51, 50, 51, 50, 70])?.outside).toEqual([
    15,
  ]);
  expect(controlChartOfIndividuals([50])).toBeNull();
});

/** scipy 1.17.1, frozen. */
const WELCH = {
  t: 1.5601804595596485,
  degrees: 7.766315408066962,
  p: 0.1584679007786337,
  from: -0.04612317126261686,
  to: 0.23600317126263334,
};
