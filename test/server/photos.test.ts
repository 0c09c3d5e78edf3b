import { createHash } from 'node:crypto';
import { join } from 'node:path';
import sharp from 'sharp';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { SheetWithoutTest } from '../../server/http/schemas.ts';
import { Reading } from '../../src/records/reading.ts';
import { brokenBarPng } from './drawnPhotos.ts';
import { filesBelow, photoForm, type RunningLaboratory, runLaboratory, testInput } from './runningLaboratory.ts';

const sha256Of = (bytes: Uint8Array): string => createHash('sha256').update(bytes).digest('hex');

let laboratory: RunningLaboratory;
let helix: Buffer;
let id: string;

beforeAll(async () => {
  laboratory = await runLaboratory({ limits: { photos: { fileBytes: 2_000_000, files: 3, requestBytes: 3_000_000 } } });
  helix = await brokenBarPng({ planeAngleDeg: 45 });
});
afterAll(() => laboratory.stop());

let next = 0;
beforeEach(async () => {
  const { body } = await laboratory.ask('POST', '/api/v1/tests', testInput({ specimenId: `F-${next++}` }));
  id = body.id;
});
afterEach(async () => {
  expect(await filesBelow(join(laboratory.dataDir, 'incoming'))).toEqual([]);
});

const send = (...photos: { name: string; bytes: Uint8Array }[]) =>
  laboratory.sendForm(`/api/v1/tests/${id}/photos`, photoForm(...photos));

describe('POST /api/v1/tests/:id/photos', () => {
  test('keeps the photo, measures it and answers photos, readings and assessment', async () => {
    const { status, body } = await send({ name: 'Ärger/../helix 1.png', bytes: helix });
    expect(status).toBe(201);
    expect(() => SheetWithoutTest.parse(body)).not.toThrow();
    expect(body.photos).toMatchObject([
      {
        sha256: sha256Of(helix),
        testId: id,
        fileName: 'helix 1.png',
        mediaType: 'image/png',
        bytes: helix.length,
        widthPx: 900,
        heightPx: 540,
      },
    ]);
    expect(body.readings).toHaveLength(1);
    const [reading] = body.readings;
    expect(Reading.parse(reading)).toEqual(reading);
    expect(reading).toMatchObject({ method: 'photo-automatic', photoSha256: sha256Of(helix), setAside: false });
    expect(reading.result.outcome).toBe('measured');
    expect(Math.abs(reading.result.planeAngleDeg - 45)).toBeLessThan(2);
    expect(body.assessment).toMatchObject({ readingId: reading.id, statement: { mode: 'normal-stress' } });
  });

  test('the same photo again is neither kept nor measured twice', async () => {
    await send({ name: 'a.png', bytes: helix });
    const { status, body } = await send({ name: 'b.png', bytes: helix });
    expect(status).toBe(201);
    expect(body.photos).toHaveLength(1);
    expect(body.readings).toHaveLength(1);
  });

  test('several photos at once, one of them not of a specimen: that one is recorded as not measured', async () => {
    const blank = await sharp({ create: { width: 640, height: 480, channels: 3, background: '#888' } })
      .png()
      .toBuffer();
    const { status, body } = await send({ name: 'a.png', bytes: helix }, { name: 'b.png', bytes: blank });
    expect(status).toBe(201);
    const outcomes = body.readings.map((reading: Reading) => reading.result.outcome).sort();
    expect(outcomes).toEqual(['measured', 'not-measured']);
    const { body: page } = await laboratory.ask('GET', `/api/v1/tests?text=${`f-${next - 1}`}`);
    expect(page.tests[0]).toMatchObject({ photoCount: 2, readingCount: 2 });
    expect(page.tests[0].flags.map((flag: { code: string }) => flag.code)).toContain('photo-not-measured');
  });

  test('when one file is no photo, none of them is kept', async () => {
    const text = new TextEncoder().encode('this is not a photo');
    const { status, body } = await send({ name: 'a.png', bytes: helix }, { name: 'b.jpg', bytes: text });
    expect(status).toBe(415);
    expect(body).toMatchObject({ code: 'not-a-photo', input: 'photo', detail: expect.stringContaining('b.jpg') });
    const sheet = await laboratory.ask('GET', `/api/v1/tests/${id}`);
    expect(sheet.body).toMatchObject({ photos: [], readings: [] });
  });

  test('a file, many files or a request that is too large is refused', async () => {
    const large = Buffer.concat([helix, Buffer.alloc(2_000_000 - helix.length + 1)]);
    expect(await send({ name: 'a.png', bytes: large })).toMatchObject({ status: 413, body: { code: 'too-large' } });
    const half = Buffer.concat([helix, Buffer.alloc(1_500_001 - helix.length)]);
    expect(await send({ name: 'a.png', bytes: half }, { name: 'b.png', bytes: half })).toMatchObject({
      status: 413,
      body: { code: 'too-large' },
    });
    const small = { name: 'a.png', bytes: helix };
    expect(await send(small, small, small, small)).toMatchObject({ status: 413, body: { code: 'too-large' } });
    const sheet = await laboratory.ask('GET', `/api/v1/tests/${id}`);
    expect(sheet.body.photos).toEqual([]);
  });

  test('no file, no form, no test', async () => {
    expect(await laboratory.sendForm(`/api/v1/tests/${id}/photos`, photoForm())).toMatchObject({
      status: 422,
      body: { code: 'missing-value' },
    });
    expect(await laboratory.ask('POST', `/api/v1/tests/${id}/photos`, {})).toMatchObject({
      status: 422,
      body: { code: 'invalid-request', input: 'Content-Type' },
    });
    const form = photoForm({ name: 'a.png', bytes: helix });
    expect(await laboratory.sendForm('/api/v1/tests/nowhere/photos', form)).toMatchObject({
      status: 404,
      body: { code: 'not-found' },
    });
  });
});

describe('POST /api/v1/tests/:id/photos/:sha256/measurements', () => {
  test('adds a reading; the earlier automatic one is set aside and stays', async () => {
    await send({ name: 'a.png', bytes: helix });
    const { status, body } = await laboratory.ask(
      'POST',
      `/api/v1/tests/${id}/photos/${sha256Of(helix)}/measurements`,
      {},
    );
    expect(status).toBe(201);
    expect(body.readings.map((reading: Reading) => reading.setAside)).toEqual([true, false]);
  });

  test('needs a photo of this test', async () => {
    const unknown = 'a'.repeat(64);
    expect(await laboratory.ask('POST', `/api/v1/tests/${id}/photos/${unknown}/measurements`, {})).toMatchObject({
      status: 404,
    });
    expect(await laboratory.ask('POST', `/api/v1/tests/${id}/photos/..%2Fx/measurements`, {})).toMatchObject({
      status: 422,
      body: { input: 'sha256' },
    });
  });
});

describe('GET /api/v1/photos/:sha256', () => {
  test('gives back the bytes as they were sent', async () => {
    await send({ name: 'größe.png', bytes: helix });
    const response = await fetch(`${laboratory.address}/api/v1/photos/${sha256Of(helix)}`);
    expect(response.status).toBe(200);
    expect(response.headers.get('content-type')).toBe('image/png');
    expect(response.headers.get('x-content-type-options')).toBe('nosniff');
    expect(response.headers.get('cache-control')).toContain('immutable');
    expect(sha256Of(new Uint8Array(await response.arrayBuffer()))).toBe(sha256Of(helix));
  });

  test('upright.jpg is turned as EXIF says and at most as wide as asked', async () => {
    const turned = await sharp(helix).jpeg().withMetadata({ orientation: 6 }).toBuffer();
    await send({ name: 'turned.jpg', bytes: turned });
    const response = await fetch(`${laboratory.address}/api/v1/photos/${sha256Of(turned)}/upright.jpg?width=270`);
    expect(response.headers.get('content-type')).toBe('image/jpeg');
    const { width, height, orientation } = await sharp(await response.arrayBuffer()).metadata();
    expect({ width, height, orientation: orientation ?? 1 }).toEqual({ width: 270, height: 450, orientation: 1 });
    const sheet = await laboratory.ask('GET', `/api/v1/tests/${id}`);
    expect(sheet.body.photos[0]).toMatchObject({ widthPx: 540, heightPx: 900 });
  });

  test('an unknown photo, a width out of range', async () => {
    const unknown = 'b'.repeat(64);
    expect(await laboratory.ask('GET', `/api/v1/photos/${unknown}`)).toMatchObject({
      status: 404,
      body: { code: 'not-found' },
    });
    expect(await laboratory.ask('GET', `/api/v1/photos/${unknown}/upright.jpg`)).toMatchObject({ status: 404 });
    expect(await laboratory.ask('GET', `/api/v1/photos/${unknown}/upright.jpg?width=5`)).toMatchObject({
      status: 422,
      body: { code: 'out-of-range', input: 'width' },
    });
    expect(await laboratory.ask('GET', '/api/v1/photos/..%2f..%2fetc')).toMatchObject({ status: 422 });
  });
});
