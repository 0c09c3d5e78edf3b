import { describe, expect, test } from 'vitest';
import { assessTest } from '../../src/verdict/assessTest.ts';
import { classifyAngle } from '../../src/verdict/classifyAngle.ts';
import type { Assessment } from '../../src/verdict/model.ts';
import { instrumentReading, roundBarTest } from './readings.ts';

const evidence = (assessment: Assessment, code: string) =>
  assessment.statement?.evidence.find((line) => line.code === code);
const photo = { method: 'photo-automatic', photoSha256: 'a'.repeat(64) } as const;

describe('the worked case: 85 N·m counter-clockwise on a 12 mm bar', () => {
  const bar = {
    geometry: { section: 'solid-round', diameterMm: 12 },
    torqueMaxNm: 85,
    torqueDirection: 'ccw',
    expandedUncertaintyDeg: 2,
  } as const;

  test('44°: normal-stress on the tension plane, 250.5 MPa', () => {
    const assessment = classifyAngle({ ...bar, planeAngleDeg: 44 });
    expect(assessment.stress?.quoted.shearStressMPa).toBeCloseTo(250.52, 2);
    expect(assessment.stress?.quoted.kind).toBe('elastic');
    expect(assessment.stress?.fullyPlastic.shearStressMPa).toBeCloseTo(187.89, 2);
    expect(assessment.planes[0]).toMatchObject({ plane: 'tension', planeAngleDeg: 45 });
    expect(assessment.statement).toMatchObject({ mode: 'normal-stress', reason: null });
    expect(evidence(assessment, 'hand-against-direction')?.sign).toBe('supports');
    expect(evidence(assessment, 'nearest-plane-distance')).toMatchObject({
      sign: 'supports',
      numbers: { distanceDeg: 1, distanceInU: 0.5 },
    });
  });

  test('2°: shear-transverse, no hand to compare', () => {
    const assessment = classifyAngle({ ...bar, planeAngleDeg: 2 });
    expect(assessment.statement?.mode).toBe('shear-transverse');
    expect(evidence(assessment, 'hand-against-direction')).toBeUndefined();
  });

  test('−44°: normal-stress, and the contradiction with the direction is flagged', () => {
    const assessment = classifyAngle({ ...bar, planeAngleDeg: -44 });
    expect(assessment.statement?.mode).toBe('normal-stress');
    expect(evidence(assessment, 'hand-against-direction')).toMatchObject({ sign: 'contradicts' });
  });

  test('clockwise torque turns the contradiction round', () => {
    const assessment = classifyAngle({ ...bar, torqueDirection: 'cw', planeAngleDeg: -44 });
    expect(assessment.planes[0]?.planeAngleDeg).toBe(-45);
    expect(evidence(assessment, 'hand-against-direction')?.sign).toBe('supports');
  });

  test('136° is the same plane as −44°', () => {
    expect(classifyAngle({ ...bar, planeAngleDeg: 136 }).statement?.comparedDeg).toBe(-44);
  });

  test('a break 15° from every plane with a small uncertainty asks for an explanation', () => {
    expect(evidence(classifyAngle({ ...bar, planeAngleDeg: 60 }), 'nearest-plane-distance')?.sign).toBe('contradicts');
    expect(evidence(classifyAngle({ ...bar, planeAngleDeg: 41 }), 'nearest-plane-distance')?.sign).toBe('neutral');
  });

  test('a flat break has no hand: its tilt neither supports nor contradicts the direction', () => {
    const assessment = classifyAngle({ ...bar, planeAngleDeg: -40, shape: 'plane', planeTiltDeg: 44 });
    expect(assessment.statement?.mode).toBe('normal-stress');
    expect(evidence(assessment, 'hand-against-direction')).toBeUndefined();
  });

  test('the rule of the laboratory is used and declared', () => {
    const loose = classifyAngle({ ...bar, planeAngleDeg: 24 }, { rule: { minimumProbability: 0.8 } });
    expect(loose.statement).toMatchObject({
      mode: 'normal-stress',
      rule: { minimumProbability: 0.8, minimumSegmentShare: 0.25 },
    });
    expect(loose.statement?.ruleText).toContain('80 %');
    expect(() => classifyAngle({ ...bar, planeAngleDeg: 24 }, { rule: { minimumProbability: 1.2 } })).toThrowError(
      expect.objectContaining({ code: 'out-of-range', input: 'minimumProbability' }),
    );
  });
});

describe('a test without all its loads', () => {
  test('no torque: planes of pure torsion in the stated direction, no stress, and that is said', () => {
    const assessment = assessTest(roundBarTest({ torqueMaxNm: null, torqueDirection: 'cw' }), [
      instrumentReading({ planeAngleDeg: -46 }),
    ]);
    expect(assessment.stress).toBeNull();
    expect(assessment.planes[0]?.planeAngleDeg).toBe(-45);
    expect(assessment.statement?.mode).toBe('normal-stress');
    expect(assessment.notes.join(' ')).toContain('No torque is known');
  });

  test('no direction: the hand is told, not judged', () => {
    const assessment = assessTest(roundBarTest({ torqueDirection: null }), [instrumentReading({ planeAngleDeg: -46 })]);
    expect(assessment.statement?.mode).toBe('normal-stress');
    expect(evidence(assessment, 'hand-against-direction')).toMatchObject({ sign: 'neutral' });
    expect(evidence(assessment, 'hand-against-direction')?.sentence).toContain('speaks of clockwise torque');
  });

  test('no reading: stress and planes, no statement', () => {
    const assessment = assessTest(roundBarTest(), []);
    expect(assessment.readingId).toBeNull();
    expect(assessment.statement).toBeNull();
    expect(assessment.planes).toHaveLength(4);
  });
});

describe('which reading governs', () => {
  const automatic = instrumentReading({ planeAngleDeg: 30 }, { id: 'auto', ...photo });
  const corrected = instrumentReading(
    { planeAngleDeg: 44 },
    { id: 'hand', method: 'photo-hand', photoSha256: photo.photoSha256, createdAt: '2025-03-01T11:00:00.000Z' },
  );

  test('a correction by hand outranks the automatic reading, which stays as a neutral line', () => {
    const assessment = assessTest(roundBarTest(), [automatic, corrected]);
    expect(assessment.readingId).toBe('hand');
    expect(evidence(assessment, 'correction')).toMatchObject({ sign: 'neutral', numbers: { differenceDeg: 14 } });
  });

  test('of several automatic readings the newest governs', () => {
    const newer = { ...automatic, id: 'newer', createdAt: '2025-03-02T10:00:00.000Z' };
    expect(assessTest(roundBarTest(), [newer, automatic]).readingId).toBe('newer');
    expect(assessTest(roundBarTest(), [automatic, newer]).readingId).toBe('newer');
  });

  test('a reading set aside is left out', () => {
    expect(assessTest(roundBarTest(), [automatic, { ...corrected, setAside: true }]).readingId).toBe('auto');
    expect(assessTest(roundBarTest(), [{ ...automatic, setAside: true }]).statement).toBeNull();
  });

  test('another photo agrees within √(U₁² + U₂²), or contradicts', () => {
    const second = (planeAngleDeg: number) =>
      instrumentReading({ planeAngleDeg }, { id: 'second', method: 'photo-automatic', photoSha256: 'b'.repeat(64) });
    const first = instrumentReading({ planeAngleDeg: 44 }, { id: 'first' });
    expect(evidence(assessTest(roundBarTest(), [first, second(46.8)]), 'readings-agree')?.sign).toBe('supports');
    expect(evidence(assessTest(roundBarTest(), [first, second(46.9)]), 'readings-agree')?.sign).toBe('contradicts');
  });

  test('88° and −88° are 4° apart and agree', () => {
    const a = instrumentReading({ planeAngleDeg: 88 }, { id: 'a' });
    const b = instrumentReading({ planeAngleDeg: -89 }, { id: 'b' });
    expect(evidence(assessTest(roundBarTest(), [a, b]), 'readings-agree')?.numbers.differenceDeg).toBeCloseTo(3, 9);
  });

  test('a tilt and a plane angle are not compared', () => {
    const flat = instrumentReading({ shape: 'plane', planeTiltDeg: 44 }, { id: 'flat' });
    const helix = instrumentReading({ planeAngleDeg: 2 }, { id: 'helix', createdAt: '2025-03-03T10:00:00.000Z' });
    expect(evidence(assessTest(roundBarTest(), [flat, helix]), 'readings-agree')?.sign).toBe('neutral');
  });

  test('photos that could not be measured are counted in the notes', () => {
    const failed = {
      ...automatic,
      id: 'failed',
      result: {
        outcome: 'not-measured',
        reason: { code: 'no-specimen', message: 'no specimen' },
        sha256: 'c'.repeat(64),
        elapsedMs: 3,
        warnings: [],
      },
    } as const;
    const assessment = assessTest(roundBarTest(), [{ ...failed, result: { ...failed.result, warnings: [] } }]);
    expect(assessment.statement).toBeNull();
    expect(assessment.notes).toContain('One photo did not allow a measurement.');
  });
});
