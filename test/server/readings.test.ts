import { createHash } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { ReadingAdded } from '../../server/http/schemas.ts';
import { measureByHand } from '../../src/photo/byHand.ts';
import { Reading } from '../../src/records/reading.ts';
import { brokenBarPng } from './drawnPhotos.ts';
import { photoForm, type RunningLaboratory, runLaboratory, testInput } from './runningLaboratory.ts';

let laboratory: RunningLaboratory;
let id: string;
let photoSha256: string;

beforeAll(async () => {
  laboratory = await runLaboratory();
  id = (await laboratory.ask('POST', '/api/v1/tests', testInput())).body.id;
  const photo = await brokenBarPng({ planeAngleDeg: 30 });
  photoSha256 = createHash('sha256').update(photo).digest('hex');
  await laboratory.sendForm(`/api/v1/tests/${id}/photos`, photoForm({ name: 'a.png', bytes: photo }));
});
afterAll(() => laboratory.stop());

const add = (reading: object, testId = id) => laboratory.ask('POST', `/api/v1/tests/${testId}/readings`, reading);
const instrument = { method: 'instrument', planeAngleDeg: 44, expandedUncertaintyDeg: 2, instrument: 'protractor' };
/** Bar of 200 px across, lying level; the trace of a helix of 45° unrolled: x = r·asin(y/r). */
const trace = [-0.95, -0.5, 0, 0.5, 0.95].map((y) => [450 + 100 * Math.asin(y), 270 - 100 * y]);
const byHand = {
  method: 'photo-hand',
  axisPx: [
    [0, 270],
    [899, 270],
  ],
  diameterPx: 200,
  tracePx: trace,
};

describe('POST /api/v1/tests/:id/readings', () => {
  test('an instrument reading is kept with who and with what; the assessment rests on it', async () => {
    const { status, body } = await add({ ...instrument, operator: 'Ada', remarks: 'at the thick end' });
    expect(status).toBe(201);
    expect(() => ReadingAdded.parse(body)).not.toThrow();
    expect(Reading.parse(body.reading)).toEqual(body.reading);
    expect(body.reading).toMatchObject({
      method: 'instrument',
      instrument: 'protractor',
      operator: 'Ada',
      remarks: 'at the thick end',
      result: {
        outcome: 'by-instrument',
        planeAngleDeg: 44,
        expandedUncertaintyDeg: 2,
        coverageFactor: 2,
        hand: 'left',
        shape: 'helix',
      },
    });
    expect(body.assessment.readingId).toBe(body.reading.id);
  });

  test('an angle is axial: 135 degrees is the plane at -45', async () => {
    const { body } = await add({ ...instrument, planeAngleDeg: 135 });
    expect(body.reading.result).toMatchObject({ planeAngleDeg: -45, hand: 'right' });
  });

  test('a trace set by hand is computed by the service as by src/photo/byHand', async () => {
    const { status, body } = await add({ ...byHand, photoSha256, operator: 'Ben' });
    expect(status, JSON.stringify(body)).toBe(201);
    const expected = measureByHand({
      axisPx: [
        [0, 270],
        [899, 270],
      ],
      diameterPx: 200,
      tracePx: trace.map(([x = 0, y = 0]): [number, number] => [x, y]),
      widthPx: 900,
      heightPx: 540,
    });
    expect(body.reading).toMatchObject({
      method: 'photo-hand',
      photoSha256,
      operator: 'Ben',
      result: {
        outcome: 'measured',
        planeAngleDeg: expected.planeAngleDeg,
        diameterPx: 200,
        widthPx: 900,
        heightPx: 540,
      },
    });
    // The trace is that of a helix of 45°, so the reading must hold it within its own uncertainty.
    expect(Math.abs(body.reading.result.planeAngleDeg - 45)).toBeLessThanOrEqual(
      body.reading.result.expandedUncertaintyDeg,
    );
  });

  test.each([
    [{ ...instrument, planeAngleDeg: 'steep' }, 'not-a-number', 'planeAngleDeg'],
    [{ ...instrument, planeAngleDeg: 181 }, 'out-of-range', 'planeAngleDeg'],
    [{ ...instrument, planeAngleDeg: null }, 'not-a-number', 'planeAngleDeg'],
    [{ ...instrument, expandedUncertaintyDeg: 0 }, 'out-of-range', 'expandedUncertaintyDeg'],
    [{ ...instrument, expandedUncertaintyDeg: undefined }, 'missing-value', 'expandedUncertaintyDeg'],
    [{ ...instrument, instrument: ' ' }, 'missing-value', 'instrument'],
    [{ ...instrument, shape: 'plane' }, 'contradiction', 'planeTiltDeg'],
    [{ ...instrument, method: 'guess' }, 'invalid-request', 'method'],
    [{ ...byHand }, 'missing-value', 'photoSha256'],
    [{ ...byHand, photoSha256: 'short' }, 'invalid-request', 'photoSha256'],
  ])('refuses %j', async (reading, code, input) => {
    const { status, body } = await add(reading);
    expect(status).toBe(422);
    expect(body).toMatchObject({ code, input });
  });

  test('refuses an axis of no length, a diameter of nothing, a trace that is a point, a photo of another test', async () => {
    const refuse = (fields: object) => add({ ...byHand, photoSha256, ...fields });
    expect(
      await refuse({
        axisPx: [
          [5, 5],
          [5, 5],
        ],
      }),
    ).toMatchObject({ status: 422, body: { input: 'axisPx' } });
    expect(await refuse({ diameterPx: 3 })).toMatchObject({ status: 422, body: { input: 'diameterPx' } });
    expect(
      await refuse({
        tracePx: [
          [400, 270],
          [400, 270],
        ],
      }),
    ).toMatchObject({ status: 422, body: { input: 'tracePx' } });
    const other = await laboratory.ask('POST', '/api/v1/tests', testInput({ specimenId: 'other' }));
    expect(await add({ ...byHand, photoSha256 }, other.body.id)).toMatchObject({
      status: 404,
      body: { input: 'photoSha256' },
    });
    expect(await add(instrument, 'nowhere')).toMatchObject({ status: 404 });
  });
});

describe('POST /api/v1/readings/:id/set-aside', () => {
  test('sets aside with a reason, takes back, and the assessment follows', async () => {
    const { body: test } = await laboratory.ask('POST', '/api/v1/tests', testInput({ specimenId: 'aside' }));
    const { body: added } = await add(instrument, test.id);
    const mark = (body: object) => laboratory.ask('POST', `/api/v1/readings/${added.reading.id}/set-aside`, body);
    expect(await mark({ setAside: true, why: 'wrong piece', by: 'Ada' })).toMatchObject({
      status: 200,
      body: { setAside: true },
    });
    const sheet = await laboratory.ask('GET', `/api/v1/tests/${test.id}`);
    expect(sheet.body).toMatchObject({
      readings: [{ setAside: true }],
      assessment: { readingId: null, statement: null },
    });
    expect(await mark({ setAside: false, why: 'it was the right one' })).toMatchObject({ body: { setAside: false } });
    expect(await mark({ setAside: true })).toMatchObject({
      status: 422,
      body: { code: 'missing-value', input: 'why' },
    });
    expect(
      await laboratory.ask('POST', '/api/v1/readings/nowhere/set-aside', { setAside: true, why: 'x' }),
    ).toMatchObject({ status: 404 });
  });
});

describe('POST /api/v1/classify', () => {
  const classify = (body: object) => laboratory.ask('POST', '/api/v1/classify', body);

  test('states the mode for loads and an angle, stores nothing', async () => {
    const before = (await laboratory.ask('GET', '/api/v1/laboratory')).body.tests;
    const { status, body } = await classify({
      geometry: { section: 'solid-round', diameterMm: 12 },
      torqueMaxNm: 85,
      torqueDirection: 'ccw',
      planeAngleDeg: 2,
      expandedUncertaintyDeg: 3,
    });
    expect(status).toBe(200);
    expect(body.statement).toMatchObject({ mode: 'shear-transverse' });
    expect(body.stress.maxShearMPa).toBeCloseTo((16 * 85_000) / (Math.PI * 12 ** 3), 6);
    expect((await laboratory.ask('GET', '/api/v1/laboratory')).body.tests).toBe(before);
  });

  test('an angle on the limit between two planes is indeterminate', async () => {
    const { body } = await classify({ planeAngleDeg: 22.5, expandedUncertaintyDeg: 3 });
    expect(body.statement.mode).toBe('indeterminate');
    expect(body.stress).toBeNull();
  });

  test.each([
    [{ expandedUncertaintyDeg: 2 }, 'missing-value', 'planeAngleDeg'],
    [{ planeAngleDeg: 44, expandedUncertaintyDeg: -1 }, 'out-of-range', 'expandedUncertaintyDeg'],
    [{ planeAngleDeg: 44, expandedUncertaintyDeg: 2, torqueMaxNm: 0 }, 'out-of-range', 'torqueMaxNm'],
    [
      { planeAngleDeg: 44, expandedUncertaintyDeg: 2, rule: { minimumProbability: 0.2 } },
      'out-of-range',
      'rule.minimumProbability',
    ],
  ])('refuses %j', async (body, code, input) => {
    expect(await classify(body)).toMatchObject({ status: 422, body: { code, input } });
  });
});
