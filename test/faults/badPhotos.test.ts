import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import {
  filesBelow,
  photoForm,
  type RunningLaboratory,
  runLaboratory,
  testInput,
} from '../server/runningLaboratory.ts';
import { hostilePhotos } from './hostilePhotos.ts';

/** How far a drawn helix of 45 degrees may be missed here: these tests are about files, not about accuracy. */
const DRAWN_WITHIN_DEG = 2;

const photos = await hostilePhotos();
let laboratory: RunningLaboratory;
beforeAll(async () => {
  laboratory = await runLaboratory();
});
afterAll(() => laboratory.stop());

test('there are at least thirty', () => {
  expect(photos.length).toBeGreaterThanOrEqual(30);
});

describe('a photo that is sent is refused, recorded as not measured, or measured; the service goes on', () => {
  test.each(photos)('$what', async ({ what, name, bytes, expected }) => {
    const { body: entered } = await laboratory.ask(
      'POST',
      '/api/v1/tests',
      testInput({ specimenId: what, torqueDirection: null }),
    );
    const filesBefore = await filesBelow(join(laboratory.dataDir, 'photos'));
    const { status, body } = await laboratory.sendForm(
      `/api/v1/tests/${entered.id}/photos`,
      photoForm({ name, bytes }),
    );
    if ('refused' in expected) {
      expect(status).toBe(415);
      expect(body).toMatchObject({ code: expected.refused, input: 'photo' });
      expect(body.detail).toContain(`"${name}"`);
      expect(body.detail).toMatch(/must be JPEG, PNG, WebP, TIFF or HEIC, got ./);
      expect(await filesBelow(join(laboratory.dataDir, 'photos'))).toEqual(filesBefore);
    } else {
      expect(status, JSON.stringify(body)).toBe(201);
      const [{ result }] = body.readings;
      if ('notMeasured' in expected) {
        expect(result.outcome).toBe('not-measured');
        expect(expected.notMeasured).toContain(result.reason.code);
        expect(result.reason.message.length).toBeGreaterThan(10);
      } else {
        expect(result.outcome, JSON.stringify(result.reason)).toBe('measured');
        expect(Math.abs(result.planeAngleDeg - expected.measuredDeg)).toBeLessThan(DRAWN_WITHIN_DEG);
      }
    }
    expect((await laboratory.ask('GET', '/healthz')).status).toBe(200);
    expect(await filesBelow(join(laboratory.dataDir, 'incoming'))).toEqual([]);
  });
});
