import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { predictedPlanes } from '../../src/mechanics/planes.ts';
import { wrappedNormalMass } from '../../src/verdict/angleDistribution.ts';
import {
  planeAngleCells,
  planeAngleProbabilities,
  planeTiltCells,
  planeTiltProbabilities,
} from '../../src/verdict/cells.ts';
import { stateFailureMode } from '../../src/verdict/failureMode.ts';
import { DEFAULT_DECISION_RULE } from '../../src/verdict/model.ts';
import { planeReading } from './readings.ts';

const pureTorsion = predictedPlanes({ sigmaXMPa: 0, sigmaYMPa: 0, tauMPa: 1 });
const withTension = predictedPlanes({ sigmaXMPa: 0.5, sigmaYMPa: 0, tauMPa: 1 });
const stateOf = (part: Parameters<typeof planeReading>[0], planes = pureTorsion) =>
  stateFailureMode(planes, planeReading(part), DEFAULT_DECISION_RULE);
const anyState = fc.record({
  sigmaXMPa: fc.double({ min: -3, max: 3, noNaN: true }),
  sigmaYMPa: fc.double({ min: -3, max: 3, noNaN: true }),
  tauMPa: fc.constantFrom(-1, 1),
});
const angleDeg = fc.double({ min: -90, max: 90, noNaN: true });
const uncertaintyDeg = fc.double({ min: 0, max: 300, noNaN: true });

describe('wrappedNormalMass', () => {
  test('one standard uncertainty each side holds 68.27 %, also across the wrap', () => {
    expect(wrappedNormalMass(44, 46, 45, 1)).toBeCloseTo(0.6826894921, 9);
    expect(wrappedNormalMass(89, 91, -90, 1)).toBeCloseTo(0.6826894921, 9);
    expect(wrappedNormalMass(-91, -89, 90, 1)).toBeCloseTo(0.6826894921, 9);
  });

  test('without uncertainty all mass sits at the mean, halved on a limit', () => {
    expect(wrappedNormalMass(22.5, 67.5, 45, 0)).toBe(1);
    expect(wrappedNormalMass(22.5, 67.5, 22.5, 0)).toBe(0.5);
    expect(wrappedNormalMass(22.5, 67.5, -45, 0)).toBe(0);
    expect(wrappedNormalMass(67.5, 112.5, -80, 0)).toBe(1);
  });

  test('a huge uncertainty spreads the mass evenly, without a jump at the changeover', () => {
    expect(wrappedNormalMass(22.5, 67.5, 10, 1e6)).toBeCloseTo(0.25, 12);
    expect(wrappedNormalMass(22.5, 67.5, 10, 179.999)).toBeCloseTo(0.25, 8);
  });
});

describe('cells', () => {
  test('in pure torsion the limits are ±22.5 and ±67.5', () => {
    expect(planeAngleCells(pureTorsion).map((c) => [c.plane, c.fromDeg, c.toDeg])).toEqual([
      ['tension', 22.5, 67.5],
      ['compression', -67.5, -22.5],
      ['shear-transverse', -22.5, 22.5],
      ['shear-longitudinal', 67.5, 112.5],
    ]);
  });

  test('axial tension moves the cells with the planes', () => {
    const tension = planeAngleCells(withTension).find((c) => c.plane === 'tension');
    expect(tension?.fromDeg).toBeCloseTo(37.9819 - 22.5, 4);
    expect(tension?.toDeg).toBeCloseTo(37.9819 + 22.5, 4);
  });

  test('for a flat break tension and compression share one cell in pure torsion', () => {
    expect(planeTiltCells(pureTorsion).map((c) => [c.plane, c.fromDeg, c.toDeg])).toEqual([
      ['tension', 22.5, 67.5],
      ['compression', 22.5, 67.5],
      ['shear-transverse', 0, 22.5],
      ['shear-longitudinal', 67.5, 90],
    ]);
  });

  test('the probabilities of the cells add up to 1 for every state, angle and uncertainty', () => {
    fc.assert(
      fc.property(anyState, angleDeg, uncertaintyDeg, (state, angle, u) => {
        const planes = predictedPlanes(state);
        const sum = (cells: readonly { probability: number }[]) => cells.reduce((s, c) => s + c.probability, 0);
        expect(sum(planeAngleProbabilities(planes, angle, u))).toBeCloseTo(1, 9);
        expect(sum(planeTiltProbabilities(planes, Math.abs(angle), u))).toBeCloseTo(1, 9);
      }),
    );
  });

  test('mirroring reading and torque together changes no mode probability', () => {
    fc.assert(
      fc.property(anyState, angleDeg, fc.double({ min: 0.1, max: 40, noNaN: true }), (state, angle, u) => {
        const one = stateFailureMode(
          predictedPlanes(state),
          planeReading({ planeAngleDeg: angle, expandedUncertaintyDeg: 2 * u }),
          DEFAULT_DECISION_RULE,
        );
        const mirrored = { ...state, tauMPa: -state.tauMPa };
        const two = stateFailureMode(
          predictedPlanes(mirrored),
          planeReading({ planeAngleDeg: -angle, expandedUncertaintyDeg: 2 * u }),
          DEFAULT_DECISION_RULE,
        );
        for (const mode of ['normal-stress', 'shear-transverse', 'shear-longitudinal'] as const) {
          expect(one.modeProbabilities[mode]).toBeCloseTo(two.modeProbabilities[mode], 9);
        }
      }),
    );
  });
});

describe('stateFailureMode', () => {
  test.each([
    [44, 'normal-stress'],
    [-44, 'normal-stress'],
    [2, 'shear-transverse'],
    [-3, 'shear-transverse'],
    [88, 'shear-longitudinal'],
    [-88, 'shear-longitudinal'],
    [90, 'shear-longitudinal'],
    [24, 'indeterminate'],
    [22.5, 'indeterminate'],
    [-67, 'indeterminate'],
  ] as const)('a helix at %d° ± 2° under torque alone is %s', (planeAngleDeg, mode) => {
    expect(stateOf({ planeAngleDeg }).mode).toBe(mode);
  });

  test('the limit of the rule: 95 % mass is stated, less is not', () => {
    // Φ(1.6449) = 0.95: with u = 1 the reading must lie 1.645° inside the cell.
    expect(stateOf({ planeAngleDeg: 22.5 + 1.6455 }).mode).toBe('normal-stress');
    expect(stateOf({ planeAngleDeg: 22.5 + 1.644 }).mode).toBe('indeterminate');
    const statement = stateOf({ planeAngleDeg: 22.5 + 1.644 });
    expect(statement.reason?.code).toBe('below-minimum-probability');
    expect(statement.likeliestMode).toBe('normal-stress');
  });

  test('the coverage factor counts: U = 3 with k = 3 is u = 1', () => {
    const statement = stateOf({ planeAngleDeg: 24.5, expandedUncertaintyDeg: 3, coverageFactor: 3 });
    expect(statement.modeProbabilities['normal-stress']).toBeCloseTo(0.97725, 6);
  });

  test('a flat break is judged by its tilt, not by the slope of its trace', () => {
    const statement = stateOf({ shape: 'plane', planeAngleDeg: 5, planeTiltDeg: 43, hand: 'none' });
    expect(statement.comparedQuantity).toBe('planeTilt');
    expect(statement.mode).toBe('normal-stress');
    expect(stateOf({ shape: 'plane', planeAngleDeg: 1, planeTiltDeg: 4 }).mode).toBe('shear-transverse');
  });

  test('the tilt has its own uncertainty where it is known', () => {
    const wide = stateOf({ shape: 'plane', planeTiltDeg: 25, planeTiltExpandedUncertaintyDeg: 20 });
    expect(wide.mode).toBe('indeterminate');
    expect(wide.comparedExpandedUncertaintyDeg).toBe(20);
  });

  test('a flat break follows the moved planes: tilt 16° is transverse under torque, not so under tension', () => {
    const tilt = { shape: 'plane', planeTiltDeg: 16, expandedUncertaintyDeg: 1 } as const;
    expect(stateOf(tilt).mode).toBe('shear-transverse');
    // |planes| under σx = τ/2: 38.0 (tension), 52.0 (compression), 7.0 (transverse), 83.0 (longitudinal); limit 22.5.
    expect(stateOf({ ...tilt, planeTiltDeg: 24 }, withTension).mode).toBe('normal-stress');
    const strong = predictedPlanes({ sigmaXMPa: 2, sigmaYMPa: 0, tauMPa: 1 });
    // tension 22.5, transverse −22.5: equal magnitudes share their mass, so nothing can be stated.
    expect(stateOf({ ...tilt, planeTiltDeg: 22.5 }, strong).mode).toBe('indeterminate');
  });

  test('segments of two modes, each a quarter or more, are mixed', () => {
    const segments = [
      { planeAngleDeg: 44, share: 0.6 },
      { planeAngleDeg: 1, share: 0.4 },
    ];
    const statement = stateOf({ shape: 'mixed', planeAngleDeg: 44, segments });
    expect(statement.mode).toBe('mixed');
    expect(statement.reason?.code).toBe('two-modes');
    expect(
      stateOf({
        shape: 'mixed',
        segments: [
          { planeAngleDeg: 44, share: 0.8 },
          { planeAngleDeg: 1, share: 0.2 },
        ],
      }).mode,
    ).toBe('normal-stress');
  });

  test('a segment whose own mode is not decided makes nothing mixed', () => {
    const segments = [
      { planeAngleDeg: 40, share: 0.5 },
      { planeAngleDeg: 21, share: 0.5, expandedUncertaintyDeg: 6 },
    ];
    expect(stateOf({ shape: 'helix', planeAngleDeg: 40, segments }).mode).toBe('normal-stress');
  });

  test('the step that closes a helix is no second mode, marked or not', () => {
    const helix = { planeAngleDeg: 44, share: 0.6 };
    const marked = { planeAngleDeg: 88, share: 0.4, closingStep: true };
    expect(stateOf({ shape: 'mixed', planeAngleDeg: 44, segments: [helix, marked] }).mode).toBe('normal-stress');
    const unmarked = { planeAngleDeg: 88, share: 0.4 };
    expect(stateOf({ shape: 'helix', planeAngleDeg: 44, segments: [helix, unmarked] }).mode).toBe('normal-stress');
    const denied = { ...unmarked, closingStep: false };
    expect(stateOf({ shape: 'helix', planeAngleDeg: 44, segments: [helix, denied] }).mode).toBe('mixed');
    expect(stateOf({ shape: 'mixed', planeAngleDeg: 44, segments: [helix, unmarked] }).mode).toBe('mixed');
  });

  test('shares are counted on what is left after the closing step', () => {
    const segments = [
      { planeAngleDeg: 44, share: 0.4 },
      { planeAngleDeg: 2, share: 0.2 },
      { planeAngleDeg: 89, share: 0.4, closingStep: true },
    ];
    expect(stateOf({ shape: 'mixed', planeAngleDeg: 44, segments }).mode).toBe('mixed');
  });

  test('the bent trace of a flat break is not mixed', () => {
    const segments = [
      { planeAngleDeg: 40, share: 0.5 },
      { planeAngleDeg: 3, share: 0.5 },
    ];
    expect(stateOf({ shape: 'plane', planeTiltDeg: 44, segments }).mode).toBe('normal-stress');
  });

  test('a break that cannot be attributed keeps its probabilities and says why', () => {
    const reason = { code: 'in-grip', message: 'The specimen broke in the grip.' };
    const statement = stateFailureMode(pureTorsion, planeReading({ planeAngleDeg: 44 }), DEFAULT_DECISION_RULE, reason);
    expect(statement.mode).toBe('not-attributable');
    expect(statement.reason).toEqual(reason);
    expect(statement.modeProbabilities['normal-stress']).toBeGreaterThan(0.99);
  });

  test('the rule in words names its numbers and the limits', () => {
    expect(stateOf({}).ruleText).toContain('95 %');
    expect(stateOf({}).ruleText).toContain('−67.5°, −22.5°, 22.5°, 67.5°');
    expect(stateOf({ shape: 'plane', planeTiltDeg: 10 }).ruleText).toContain('limits are 22.5°, 67.5°');
  });

  test.each([
    [{ expandedUncertaintyDeg: -1 }, 'expandedUncertaintyDeg'],
    [{ expandedUncertaintyDeg: Number.NaN }, 'expandedUncertaintyDeg'],
    [{ coverageFactor: 0 }, 'coverageFactor'],
    [{ planeAngleDeg: Number.NaN }, 'planeAngleDeg'],
  ])('%o is refused by name', (part, input) => {
    expect(() => stateOf(part)).toThrowError(expect.objectContaining({ code: 'out-of-range', input }));
  });
});
