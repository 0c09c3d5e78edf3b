import type { Kysely } from 'kysely';
import { LabError } from '../../src/errors.ts';
import type { Photo } from '../../src/records/laboratoryRecords.ts';
import { photoOf } from './documents.ts';
import { orderedId } from './orderedId.ts';
import type { StoreSchema } from './schema.ts';

type Db = Kysely<StoreSchema>;

async function countPhotos(db: Db, testId: string): Promise<void> {
  const { count } = await db
    .selectFrom('photos')
    .select((e) => e.fn.countAll().as('count'))
    .where('test_id', '=', testId)
    .executeTakeFirstOrThrow();
  await db
    .updateTable('tests')
    .set({ photo_count: Number(count) })
    .where('id', '=', testId)
    .execute();
}

/** Writes the record of a photo and makes its measurement due; the same photo of the same test is kept once. */
export async function addPhotoRecord(
  db: Db,
  photo: Omit<Photo, 'addedAt'>,
  nowMs: number,
  priority: number,
): Promise<Photo> {
  const now = new Date(nowMs).toISOString();
  let same = db.selectFrom('photos').selectAll().where('sha256', '=', photo.sha256);
  same = photo.testId === null ? same.where('test_id', 'is', null) : same.where('test_id', '=', photo.testId);
  const known = await same.executeTakeFirst();
  if (known) {
    if (photo.testId !== null) await hasten(db, photo.testId, photo.sha256, priority);
    return photoOf(known);
  }
  const row = {
    id: orderedId(nowMs),
    sha256: photo.sha256,
    test_id: photo.testId,
    file_name: photo.fileName,
    media_type: photo.mediaType,
    bytes: photo.bytes,
    width_px: photo.widthPx,
    height_px: photo.heightPx,
    added_at: now,
  };
  await db.insertInto('photos').values(row).execute();
  if (photo.testId !== null) {
    await countPhotos(db, photo.testId);
    await queueMeasurement(db, photo.testId, photo.sha256, nowMs, priority);
  }
  return photoOf(row);
}

/** Lets a measurement that is due come sooner, when somebody waits for it now. @returns whether one is due */
async function hasten(db: Db, testId: string, sha256: string, priority: number): Promise<boolean> {
  const due = await db
    .selectFrom('measuring')
    .select(['id', 'priority'])
    .where('test_id', '=', testId)
    .where('photo_sha256', '=', sha256)
    .where('state', 'in', ['waiting', 'running'])
    .executeTakeFirst();
  if (!due) return false;
  if (due.priority > priority) await db.updateTable('measuring').set({ priority }).where('id', '=', due.id).execute();
  return true;
}

/** Makes the measurement of a photo due, unless it is already. */
export async function queueMeasurement(
  db: Db,
  testId: string,
  sha256: string,
  nowMs: number,
  priority: number,
): Promise<void> {
  if (await hasten(db, testId, sha256, priority)) return;
  await db
    .insertInto('measuring')
    .values({
      id: orderedId(nowMs),
      photo_sha256: sha256,
      test_id: testId,
      state: 'waiting',
      priority,
      tries: 0,
      reason: null,
      queued_at: new Date(nowMs).toISOString(),
      started_at: null,
      ended_at: null,
    })
    .execute();
}

/** Ends what is due for a photo, since a measurement of it has just been kept. */
export async function endMeasurement(db: Db, testId: string, sha256: string, nowMs: number): Promise<void> {
  await db
    .updateTable('measuring')
    .set({ state: 'done', ended_at: new Date(nowMs).toISOString() })
    .where('test_id', '=', testId)
    .where('photo_sha256', '=', sha256)
    .where('state', 'in', ['waiting', 'running'])
    .execute();
}

/** Fills in the size of a photo, known once it has been decoded. */
export async function setPhotoSize(db: Db, sha256: string, widthPx: number, heightPx: number): Promise<void> {
  await db
    .updateTable('photos')
    .set({ width_px: widthPx, height_px: heightPx })
    .where('sha256', '=', sha256)
    .where('width_px', 'is', null)
    .execute();
}

export async function photosOfTest(db: Db, testId: string): Promise<Photo[]> {
  const rows = await db.selectFrom('photos').selectAll().where('test_id', '=', testId).orderBy('id').execute();
  return rows.map(photoOf);
}

/** A photo with this content, of whatever test. @throws LabError `not-found` */
export async function readPhoto(db: Db, sha256: string): Promise<Photo> {
  const row = await db.selectFrom('photos').selectAll().where('sha256', '=', sha256).orderBy('id').executeTakeFirst();
  if (row) return photoOf(row);
  throw new LabError('not-found', `a photo must have this SHA-256, got "${sha256}" and there is none`, {
    input: 'sha256',
    value: sha256,
  });
}
