import { describe, expect, test } from 'vitest';
import { groupTests, summariseGroup } from '../../src/statistics/batch.ts';
import type { BatchTest } from '../../src/statistics/batchTest.ts';
import { compareGroups, holmCorrected, MOST_COMPARED } from '../../src/statistics/groupsCompared.ts';
import { standardNormals } from './seeded.ts';

const tested = (i: number, fields: Partial<BatchTest> = {}): BatchTest => ({
  id: `id-${i}`,
  specimenId: `S-${i}`,
  testDate: `2026-03-${String((i % 28) + 1).padStart(2, '0')}`,
  material: 'grey cast iron',
  heat: 'G-117',
  section: 'solid-round',
  operator: 'bench 1',
  torqueDirection: 'ccw',
  mode: 'normal-stress',
  planeAngleDeg: 44,
  planeTiltDeg: null,
  strengthMPa: 260,
  leftOut: null,
  ...fields,
});

/** n sound tests that scatter: strengths 260 ± 8 MPa, angles 44 ± 2°. */
function batch(n: number, seed: number, fields: Partial<BatchTest> = {}): BatchTest[] {
  const z = standardNormals(seed, 2 * n);
  return Array.from({ length: n }, (_, i) =>
    tested(i, {
      strengthMPa: 260 + 8 * (z[2 * i] as number),
      planeAngleDeg: 44 + 2 * (z[2 * i + 1] as number),
      ...fields,
    }),
  );
}

describe('a group', () => {
  test('breaks under torque in both directions have one mean axis', () => {
    const both = batch(20, 1).map((t, i) =>
      i % 2 === 0 ? t : { ...t, torqueDirection: 'cw' as const, planeAngleDeg: -(t.planeAngleDeg as number) },
    );
    const { planeAngles } = summariseGroup(null, both);
    expect(planeAngles?.n).toBe(20);
    expect(planeAngles?.meanAxisDeg).toBeCloseTo(44, 0);
    expect(planeAngles?.resultantLength).toBeGreaterThan(0.99);
  });

  test('an angle without a direction of torque is left out of the mean axis, and that is said', () => {
    const { planeAngles, notes } = summariseGroup(null, [...batch(6, 2), tested(7, { torqueDirection: null })]);
    expect(planeAngles?.n).toBe(6);
    expect(notes.join(' ')).toContain('no direction of torque');
  });

  test('flat breaks count by their tilt, not by the slope of their trace', () => {
    const flat = batch(4, 3, { planeAngleDeg: null, planeTiltDeg: 3, mode: 'shear-transverse' });
    const { planeAngles, planeTiltsDeg } = summariseGroup(null, flat);
    expect(planeAngles).toBeNull();
    expect(planeTiltsDeg).toMatchObject({ n: 4, mean: 3, standardDeviation: 0 });
  });

  test('a test that is not attributable counts among the modes, not among strengths and angles', () => {
    const summary = summariseGroup(null, [
      ...batch(6, 4),
      tested(9, { strengthMPa: 900, planeAngleDeg: 0, mode: 'not-attributable', leftOut: 'broke at the grip' }),
    ]);
    expect(summary.modes.map((m) => [m.mode, m.share.count])).toEqual([
      ['normal-stress', 6],
      ['not-attributable', 1],
    ]);
    expect(summary.strength?.n).toBe(6);
    expect(summary.planeAngles?.n).toBe(6);
    expect(summary.odd).toEqual([]);
    expect(summary.leftOut).toEqual([{ specimenId: 'S-9', reason: 'broke at the grip' }]);
  });

  test('a Weibull modulus is stated for brittle groups only, and not from four tests', () => {
    expect(summariseGroup(null, batch(12, 5)).weibull?.n).toBe(12);
    expect(summariseGroup(null, batch(12, 5, { mode: 'shear-transverse' })).weibull).toBeNull();
    expect(summariseGroup(null, batch(4, 5)).weibull).toBeNull();
  });

  test.each([
    [1, 'One strength says nothing about scatter.'],
    [3, 'should not be compared'],
    [8, 'Weibull modulus of 8 specimens is known only'],
  ])('%d tests say what they cannot say', (n, words) => {
    expect(summariseGroup(null, batch(n, 6)).notes.join(' ')).toContain(words);
  });

  test('scattered angles have a mean that means nothing, and that is said', () => {
    const scattered = batch(12, 7).map((t, i) => ({ ...t, planeAngleDeg: -90 + 15 * i }));
    expect(summariseGroup(null, scattered).notes.join(' ')).toMatch(/no mean axis|no preferred axis/);
  });

  test('no test at all gives an empty summary', () => {
    expect(summariseGroup('x', [])).toMatchObject({ tests: 0, modes: [], planeAngles: null, strength: null, odd: [] });
  });
});

describe('odd tests', () => {
  test('a clean batch of 40 has none', () => {
    expect(summariseGroup(null, batch(40, 8)).odd).toEqual([]);
  });

  test('a strength, an angle and a mode apart from the others are named', () => {
    const { odd } = summariseGroup(null, [
      ...batch(20, 9),
      tested(50, { specimenId: 'weak', strengthMPa: 190, testDate: null }),
      tested(51, { specimenId: 'turned', planeAngleDeg: 20 }),
      tested(52, { specimenId: 'sheared', planeAngleDeg: null, mode: 'shear-transverse' }),
    ]);
    expect(odd.map((o) => [o.specimenId, o.code])).toEqual([
      ['weak', 'strength-outlier'],
      ['turned', 'angle-outlier'],
      ['sheared', 'mode-unlike-group'],
    ]);
    for (const { sentence } of odd) expect(sentence).toMatch(/\d.*\.$/);
  });

  test('an angle beside the wrap of ±90° is not apart from the others', () => {
    const splits = batch(12, 10).map((t, i) => ({ ...t, planeAngleDeg: i % 2 === 0 ? 89 + i / 20 : -89 - i / 20 }));
    expect(summariseGroup(null, splits).odd).toEqual([]);
  });

  test('a strength outside the control limits of the tests in their order', () => {
    const run = Array.from({ length: 30 }, (_, i) =>
      tested(i, { strengthMPa: i === 29 ? 250 : 260 + (i % 2), testDate: `2026-04-${String(i + 1).padStart(2, '0')}` }),
    );
    expect(summariseGroup(null, run).odd.map((o) => o.code)).toContain('outside-control-limits');
  });
});

describe('groups', () => {
  test('stand in the order of their names, tests that state none last', () => {
    const groups = groupTests([tested(1, { heat: 'B' }), tested(2, { heat: null }), tested(3, { heat: 'A' })], 'heat');
    expect(groups.map((g) => g.name)).toEqual(['A', 'B', null]);
  });

  test('two heats that differ in strength and mode, one that does not', () => {
    const groups = [
      { name: 'A', tests: batch(15, 11) },
      { name: 'B', tests: batch(15, 12) },
      {
        name: 'C',
        tests: batch(15, 13).map((t) => ({
          ...t,
          strengthMPa: (t.strengthMPa as number) + 30,
          mode: 'shear-transverse',
        })),
      },
    ];
    const { strength, pairs } = compareGroups(groups);
    expect(strength?.p).toBeLessThan(1e-6);
    const ab = pairs.find((p) => p.first === 'A' && p.second === 'B');
    const ac = pairs.find((p) => p.first === 'A' && p.second === 'C');
    expect(ab?.strengthCorrectedP).toBeGreaterThan(0.05);
    expect(ab?.axes?.p).toBeGreaterThan(0.01);
    expect(ab?.normalStress).toMatchObject({ difference: 0, p: 1 });
    expect(ac?.strengthCorrectedP).toBeLessThan(1e-6);
    expect(ac?.strength?.difference).toBeLessThan(-20);
    expect(ac?.normalStress).toMatchObject({ difference: 1 });
    expect(ac?.normalStress?.p).toBeLessThan(1e-6);
  });

  test('too many groups are compared as a whole only; single tests are not compared', () => {
    const many = Array.from({ length: MOST_COMPARED + 1 }, (_, i) => ({ name: `H${i}`, tests: batch(3, 20 + i) }));
    expect(compareGroups(many)).toMatchObject({ pairs: [], notes: [expect.stringContaining('too many')] });
    const { strength, pairs } = compareGroups([
      { name: 'A', tests: [tested(1)] },
      { name: 'B', tests: [tested(2)] },
    ]);
    expect(strength).toBeNull();
    expect(pairs).toMatchObject([{ strength: null, strengthCorrectedP: null, axes: null }]);
  });

  test('Holm’s correction: 0.01, 0.04, 0.03, 0.005 become 0.03, 0.06, 0.06, 0.02 (R p.adjust, its manual’s method)', () => {
    const corrected = holmCorrected([0.01, 0.04, 0.03, 0.005]);
    for (const [i, p] of [0.03, 0.06, 0.06, 0.02].entries()) expect(corrected[i]).toBeCloseTo(p, 12);
  });
});
