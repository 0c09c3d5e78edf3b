import { readFile } from 'node:fs/promises';
import type { z } from 'zod';
import { handOfPlaneAngle, wrapPlaneAngleDeg } from '../../src/angle.ts';
import { LabError } from '../../src/errors.ts';
import { measureByHand } from '../../src/photo/byHand.ts';
import { ENGINE_VERSION } from '../../src/photo/measurement.ts';
import { openPhoto } from '../../src/photo/node/decode.ts';
import type { NewReading } from '../../src/records/laboratoryRecords.ts';
import { Reading } from '../../src/records/reading.ts';
import {
  type InstrumentReading,
  type PhotoHandReading,
  ReadingAdded,
  ReadingToAdd,
  SetAside,
  TestIdParam,
} from '../http/schemas.ts';
import type { Service } from '../service.ts';
import type { LaboratoryStore } from '../store/laboratoryStore.ts';
import type { TypedApp } from './route.ts';
import { sheetOf } from './sheet.ts';

const TAG = { tags: ['readings'] };
/** From here on the longitudinal plane is the nearest one (design rule, pure torsion). */
const LONGITUDINAL_FROM_DEG = 67.5;

function instrumentReading(testId: string, given: z.output<typeof InstrumentReading>): NewReading {
  const planeAngleDeg = wrapPlaneAngleDeg(given.planeAngleDeg);
  const shape = given.shape ?? (Math.abs(planeAngleDeg) > LONGITUDINAL_FROM_DEG ? 'longitudinal' : 'helix');
  if ((shape === 'plane') !== (given.planeTiltDeg !== undefined)) {
    throw new LabError(
      'contradiction',
      `planeTiltDeg must come with shape plane and only with it, got shape ${shape}`,
      {
        input: 'planeTiltDeg',
        value: given.planeTiltDeg,
      },
    );
  }
  return {
    testId,
    method: 'instrument',
    engineVersion: null,
    photoSha256: null,
    instrument: given.instrument,
    operator: given.operator || null,
    remarks: given.remarks || null,
    setAside: false,
    result: {
      outcome: 'by-instrument',
      planeAngleDeg,
      expandedUncertaintyDeg: given.expandedUncertaintyDeg,
      coverageFactor: given.coverageFactor,
      hand: shape === 'plane' ? 'none' : handOfPlaneAngle(planeAngleDeg),
      shape,
      planeTiltDeg: given.planeTiltDeg ?? null,
      segments: [{ planeAngleDeg, share: 1 }],
    },
  };
}

/** Size of the upright photo. @throws LabError `not-found`, `not-a-photo` */
async function uprightSize(store: LaboratoryStore, testId: string, sha256: string) {
  const photo = (await store.photosOf(testId)).find((one) => one.sha256 === sha256);
  if (!photo) {
    throw new LabError('not-found', `the test must have a photo with this SHA-256, got "${sha256}"`, {
      input: 'photoSha256',
      value: sha256,
    });
  }
  const { widthPx, heightPx } = photo;
  if (widthPx !== null && heightPx !== null) return { widthPx, heightPx };
  const opened = await openPhoto(await readFile(await store.photoPath(sha256)));
  if (opened.outcome === 'open') return { widthPx: opened.photo.widthPx, heightPx: opened.photo.heightPx };
  throw new LabError('not-a-photo', `the photo must be one that can be opened: ${opened.message}`, {
    input: 'photoSha256',
    value: sha256,
  });
}

async function handReading(
  store: LaboratoryStore,
  testId: string,
  given: z.output<typeof PhotoHandReading>,
): Promise<NewReading> {
  const startedMs = performance.now();
  const { axisPx, diameterPx, tracePx, photoSha256 } = given;
  const size = await uprightSize(store, testId, photoSha256);
  const { fittedPx: _, ...measured } = measureByHand({ axisPx, diameterPx, tracePx, ...size });
  return {
    testId,
    method: 'photo-hand',
    engineVersion: ENGINE_VERSION,
    photoSha256,
    instrument: null,
    operator: given.operator || null,
    remarks: given.remarks || null,
    setAside: false,
    result: {
      outcome: 'measured',
      ...measured,
      axisPx,
      diameterPx,
      tracePx,
      ...size,
      sha256: photoSha256,
      elapsedMs: Math.round((performance.now() - startedMs) * 10) / 10,
    },
  };
}

/** Readings: add one made by a person, set one aside. */
export function readingRoutes(app: TypedApp, { store }: Service): void {
  app.post(
    '/api/v1/tests/:id/readings',
    {
      schema: {
        ...TAG,
        summary: 'Add a reading made with an instrument, or by hand on a photo; the service computes what is stored',
        params: TestIdParam,
        body: ReadingToAdd,
        response: { 201: ReadingAdded },
      },
    },
    async (request, reply) => {
      const { id } = request.params;
      await store.readTest(id);
      const given = request.body;
      const reading = await store.addReading(
        given.method === 'instrument' ? instrumentReading(id, given) : await handReading(store, id, given),
      );
      const { assessment } = await sheetOf(store, id);
      return reply.code(201).send({ reading, assessment });
    },
  );

  app.post(
    '/api/v1/readings/:id/set-aside',
    {
      schema: {
        ...TAG,
        summary: 'Set a reading aside, or take it back; it is never deleted',
        params: TestIdParam,
        body: SetAside,
        response: { 200: Reading },
      },
    },
    async (request) => {
      const { setAside, why, by } = request.body;
      return store.setReadingAside(request.params.id, setAside, { why, by: by ?? null });
    },
  );
}
