import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { HistoryAnswer, SheetAnswer, TestPageAnswer } from '../../server/http/schemas.ts';
import { Test } from '../../src/records/test.ts';
import { type RunningLaboratory, runLaboratory, testInput } from './runningLaboratory.ts';

let laboratory: RunningLaboratory;
beforeAll(async () => {
  laboratory = await runLaboratory();
});
afterAll(() => laboratory.stop());

let next = 0;
const entered = async (fields: Parameters<typeof testInput>[0] = {}) => {
  const { body } = await laboratory.ask('POST', '/api/v1/tests', testInput({ specimenId: `R-${next++}`, ...fields }));
  return Test.parse(body);
};

describe('POST /api/v1/tests', () => {
  test('enters a test and says where it is', async () => {
    const { status, headers, body } = await laboratory.ask('POST', '/api/v1/tests', testInput({ specimenId: 'P-1' }));
    expect(status).toBe(201);
    expect(headers.get('location')).toBe(`/api/v1/tests/${body.id}`);
    expect(headers.get('etag')).toBe('"1"');
    expect(Test.parse(body)).toEqual(body);
    expect(body).toMatchObject(testInput({ specimenId: 'P-1' }));
  });

  test('needs only a specimen id and a section; the rest is null', async () => {
    const { status, body } = await laboratory.ask('POST', '/api/v1/tests', {
      specimenId: ' P-2 ',
      geometry: { section: 'solid-round', diameterMm: 6 },
    });
    expect(status).toBe(201);
    expect(body).toMatchObject({ specimenId: 'P-2', testDate: null, torqueMaxNm: null, remarks: null });
  });

  test('refuses the same specimen and day a second time', async () => {
    await entered({ specimenId: 'P-3' });
    const { status, body } = await laboratory.ask('POST', '/api/v1/tests', testInput({ specimenId: 'P-3' }));
    expect(status).toBe(409);
    expect(body).toMatchObject({ code: 'already-exists', input: 'specimenId' });
  });
});

describe('GET /api/v1/tests/:id', () => {
  test('answers the test with photos, readings and an assessment', async () => {
    const { id } = await entered();
    const { status, headers, body } = await laboratory.ask('GET', `/api/v1/tests/${id}`);
    expect(status).toBe(200);
    expect(headers.get('etag')).toBe('"1"');
    expect(() => SheetAnswer.parse(body)).not.toThrow();
    expect(body).toMatchObject({ photos: [], readings: [], assessment: { statement: null, readingId: null } });
    // T r / J of a 12 mm bar at 85 N·m: 16 T / (π D³).
    expect(body.assessment.stress.elastic.shearStressMPa).toBeCloseTo((16 * 85_000) / (Math.PI * 12 ** 3), 6);
  });

  test('an unknown id is a problem', async () => {
    const { status, headers, body } = await laboratory.ask('GET', '/api/v1/tests/nowhere');
    expect(status).toBe(404);
    expect(headers.get('content-type')).toMatch(/^application\/problem\+json/);
    expect(body).toMatchObject({ status: 404, code: 'not-found', instance: '/api/v1/tests/nowhere' });
  });
});

describe('PUT /api/v1/tests/:id', () => {
  const change = (id: string, version: string | null, fields: object) =>
    laboratory.ask('PUT', `/api/v1/tests/${id}`, fields, version === null ? {} : { 'if-match': version });

  test('changes the version it names, and the earlier one stays in history', async () => {
    const { id, specimenId } = await entered();
    const fields = testInput({ specimenId, torqueMaxNm: 91 });
    const { status, headers, body } = await change(id, '"1"', { ...fields, change: { by: 'Ada', why: 'typo' } });
    expect(status).toBe(200);
    expect(headers.get('etag')).toBe('"2"');
    expect(body).toMatchObject({ id, version: 2, torqueMaxNm: 91 });
    const history = await laboratory.ask('GET', `/api/v1/tests/${id}/history`);
    expect(HistoryAnswer.parse(history.body).history).toMatchObject([
      { what: 'created', version: 1 },
      {
        what: 'changed',
        version: 2,
        by: 'Ada',
        why: 'typo',
        changes: [{ field: 'torqueMaxNm', before: 85, after: 91 }],
      },
    ]);
  });

  test('refuses a version that is no longer the newest', async () => {
    const { id, specimenId } = await entered();
    await change(id, '"1"', testInput({ specimenId, heat: 'H8' }));
    const { status, body } = await change(id, '"1"', testInput({ specimenId, heat: 'H9' }));
    expect(status).toBe(409);
    expect(body.code).toBe('changed-meanwhile');
  });

  test('refuses a request that names no version, or none that can be', async () => {
    const { id, specimenId } = await entered();
    expect(await change(id, null, testInput({ specimenId }))).toMatchObject({
      status: 422,
      body: { code: 'missing-value', input: 'If-Match' },
    });
    expect(await change(id, 'latest', testInput({ specimenId }))).toMatchObject({
      status: 422,
      body: { code: 'invalid-request' },
    });
    expect(await change('nowhere', '"1"', testInput({ specimenId }))).toMatchObject({ status: 404 });
  });
});

describe('GET /api/v1/tests', () => {
  test('pages hold every test once and state the total', async () => {
    for (let i = 0; i < 5; i++) await entered({ heat: 'PAGED' });
    const ids = new Set<string>();
    let cursor: string | null = null;
    let pages = 0;
    do {
      const query = new URLSearchParams({ limit: '2', heat: 'paged', ...(cursor === null ? {} : { cursor }) });
      const { status, body } = await laboratory.ask('GET', `/api/v1/tests?${query}`);
      expect(status).toBe(200);
      const page = TestPageAnswer.parse(body);
      expect(page.total).toBe(5);
      for (const { id } of page.tests) ids.add(id);
      cursor = page.nextCursor;
      pages++;
    } while (cursor !== null);
    expect(ids.size).toBe(5);
    expect(pages).toBe(3);
  });

  test('narrows by text, material and heat, and shows what the readings say', async () => {
    const { id } = await entered({ specimenId: 'NEEDLE-7', material: 'EN-GJL-250', heat: 'Q1' });
    await laboratory.ask('POST', `/api/v1/tests/${id}/readings`, {
      method: 'instrument',
      planeAngleDeg: 43,
      expandedUncertaintyDeg: 2,
      instrument: 'protractor',
    });
    for (const query of ['text=needle', 'material=en-gjl-250', 'heat=q1&text=NEEDLE']) {
      const { body } = await laboratory.ask('GET', `/api/v1/tests?${query}`);
      expect(body.tests).toHaveLength(1);
      expect(body.tests[0]).toMatchObject({
        id,
        mode: 'normal-stress',
        planeAngleDeg: 43,
        expandedUncertaintyDeg: 2,
        readingCount: 1,
        photoCount: 0,
        flags: [],
      });
      expect(body.tests[0].probability).toBeGreaterThan(0.95);
    }
  });

  test.each([
    ['limit=0', 'out-of-range', 'limit'],
    ['limit=many', 'not-a-number', 'limit'],
    ['limit=501', 'out-of-range', 'limit'],
    ['cursor=zzz', 'invalid-request', 'cursor'],
    ['mode=broken', 'invalid-request', 'mode'],
    ['from=yesterday', 'invalid-request', 'from'],
    ['flagged=perhaps', 'invalid-request', 'flagged'],
    ['angleFromDeg=50&angleToDeg=40', 'contradiction', 'angleFromDeg'],
  ])('refuses ?%s', async (query, code, input) => {
    const { status, body } = await laboratory.ask('GET', `/api/v1/tests?${query}`);
    expect(status).toBe(422);
    expect(body).toMatchObject({ code, input });
  });
});

describe('POST /api/v1/tests/:id/reviews', () => {
  const reviewed = async (id: string) => {
    const { body } = await laboratory.ask('GET', '/api/v1/tests?reviewed=true&limit=500');
    return body.tests.some((test: { id: string }) => test.id === id);
  };
  const review = (id: string, body: object) => laboratory.ask('POST', `/api/v1/tests/${id}/reviews`, body);

  test('says who has looked at a test; a change of the test takes it back', async () => {
    const { id, specimenId } = await entered();
    expect(await reviewed(id)).toBe(false);
    const { status, body } = await review(id, { version: 1, by: 'Dr. Vey', note: 'seen with the piece in hand' });
    expect(status).toBe(201);
    expect(body).toMatchObject({ id, reviewed: true, version: 1 });
    expect(await reviewed(id)).toBe(true);
    await laboratory.ask('PUT', `/api/v1/tests/${id}`, testInput({ specimenId, heat: 'other' }), { 'if-match': '"1"' });
    expect(await reviewed(id)).toBe(false);
    const { body: kept } = await laboratory.ask('GET', `/api/v1/tests/${id}/history`);
    expect(HistoryAnswer.parse(kept).history).toMatchObject([
      { what: 'created' },
      { what: 'reviewed', by: 'Dr. Vey', why: 'seen with the piece in hand', version: 1 },
      { what: 'changed', version: 2 },
    ]);
  });

  test('a new reading, and setting one aside, take it back too', async () => {
    const { id } = await entered();
    await review(id, { version: 1, by: 'Ada' });
    const { body } = await laboratory.ask('POST', `/api/v1/tests/${id}/readings`, {
      method: 'instrument',
      planeAngleDeg: 43,
      expandedUncertaintyDeg: 2,
      instrument: 'protractor',
    });
    expect(await reviewed(id)).toBe(false);
    await review(id, { version: 1, by: 'Ada' });
    expect(await reviewed(id)).toBe(true);
    await laboratory.ask('POST', `/api/v1/readings/${body.reading.id}/set-aside`, { setAside: true, why: 'wrong end' });
    expect(await reviewed(id)).toBe(false);
  });

  test('refuses nobody, a version that is not the newest, an unknown test', async () => {
    const { id } = await entered();
    expect(await review(id, { version: 1, by: ' ' })).toMatchObject({
      status: 422,
      body: { code: 'missing-value', input: 'by' },
    });
    expect(await review(id, { version: 2, by: 'Ada' })).toMatchObject({
      status: 409,
      body: { code: 'changed-meanwhile' },
    });
    expect(await review('nowhere', { version: 1, by: 'Ada' })).toMatchObject({ status: 404 });
  });
});
