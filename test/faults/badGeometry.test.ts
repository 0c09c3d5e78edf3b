import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { type RunningLaboratory, runLaboratory, testInput } from '../server/runningLaboratory.ts';

let laboratory: RunningLaboratory;
beforeAll(async () => {
  laboratory = await runLaboratory();
});
afterAll(() => laboratory.stop());

const solid = (diameterMm: unknown) => ({ geometry: { section: 'solid-round', diameterMm } });
const tube = (diameterMm: unknown, boreMm: unknown) => ({ geometry: { section: 'hollow-round', diameterMm, boreMm } });

describe('values that cannot be are refused by name, and nothing is stored', () => {
  test.each([
    ['a diameter of 0', solid(0), 'out-of-range', 'geometry.diameterMm'],
    ['a negative diameter', solid(-12), 'out-of-range', 'geometry.diameterMm'],
    // JSON has no NaN: a client that computes one sends null.
    ['a diameter that is not a number', solid(Number.NaN), 'not-a-number', 'geometry.diameterMm'],
    ['a diameter in words', solid('twelve'), 'not-a-number', 'geometry.diameterMm'],
    ['a diameter of 3 km', solid(3_000_000), 'out-of-range', 'geometry.diameterMm'],
    ['no diameter', solid(undefined), 'missing-value', 'geometry.diameterMm'],
    ['a bore as wide as the bar', tube(12, 12), 'contradiction', 'geometry.boreMm'],
    ['a bore wider than the bar', tube(12, 15), 'contradiction', 'geometry.boreMm'],
    ['a bore of 0', tube(12, 0), 'out-of-range', 'geometry.boreMm'],
    ['a negative bore', tube(12, -1), 'out-of-range', 'geometry.boreMm'],
    ['a tube without its bore', tube(12, undefined), 'missing-value', 'geometry.boreMm'],
    [
      'a section nobody knows',
      { geometry: { section: 'star', diameterMm: 12 } },
      'invalid-request',
      'geometry.section',
    ],
    ['no geometry', { geometry: undefined }, 'missing-value', 'geometry'],
    ['a torque of 0', { torqueMaxNm: 0 }, 'out-of-range', 'torqueMaxNm'],
    ['a negative torque', { torqueMaxNm: -85 }, 'out-of-range', 'torqueMaxNm'],
    ['a torque in text', { torqueMaxNm: '85' }, 'not-a-number', 'torqueMaxNm'],
    ['a torque of 1e99', { torqueMaxNm: 1e99 }, 'out-of-range', 'torqueMaxNm'],
    ['a direction nobody knows', { torqueDirection: 'left' }, 'invalid-request', 'torqueDirection'],
    ['a negative twist', { twistFractureDeg: -1 }, 'out-of-range', 'twistFractureDeg'],
    ['a gauge length of 0', { gaugeLengthMm: 0 }, 'out-of-range', 'gaugeLengthMm'],
    ['an axial force of 1e12 N', { axialForceN: 1e12 }, 'out-of-range', 'axialForceN'],
    ['30 February', { testDate: '2026-02-30' }, 'invalid-request', 'testDate'],
    ['a specimen id of blanks', { specimenId: '   ' }, 'missing-value', 'specimenId'],
    ['a specimen id of 300 letters', { specimenId: 'x'.repeat(300) }, 'out-of-range', 'specimenId'],
  ])('%s', async (_what, fields, code, input) => {
    const { status, body } = await laboratory.ask('POST', '/api/v1/tests', { ...testInput(), ...fields });
    expect(status).toBe(422);
    expect(body).toMatchObject({ code, input });
    expect(body.detail).toMatch(/must .+, got ./);
    expect((await laboratory.ask('GET', '/api/v1/laboratory')).body.tests).toBe(0);
  });
});
