import type { Kysely } from 'kysely';
import type { NewReading } from '../../src/records/laboratoryRecords.ts';
import type { Reading } from '../../src/records/reading.ts';
import type { Test } from '../../src/records/test.ts';
import { testOf } from './documents.ts';
import { orderedId } from './orderedId.ts';
import { endMeasurement, setPhotoSize } from './photoRecords.ts';
import { readingRow, readingsOfTest, readReading } from './readings.ts';
import type { StoreSchema } from './schema.ts';
import { standingColumns } from './standing.ts';
import { type ChangeNote, readTestRecord } from './testRows.ts';

type Db = Kysely<StoreSchema>;

/** Adds a reading, inside a transaction, with all that follows from it. @throws LabError `not-found` without its test */
export async function keepReading(db: Db, reading: NewReading, nowMs: number): Promise<Reading> {
  const record = await readTestRecord(db, reading.testId);
  const row = readingRow(reading, nowMs);
  await db.insertInto('readings').values(row).execute();
  if (reading.method === 'photo-automatic' && reading.photoSha256 !== null) {
    await setEarlierAside(db, row.id, reading, nowMs);
    await endMeasurement(db, reading.testId, reading.photoSha256, nowMs);
  }
  const { result } = reading;
  if (reading.photoSha256 !== null && result.outcome !== 'by-instrument' && result.widthPx && result.heightPx) {
    await setPhotoSize(db, reading.photoSha256, result.widthPx, result.heightPx);
  }
  await renewStanding(db, testOf(record));
  return readReading(db, row.id);
}

/** A photo measured again: the new reading stands for the earlier automatic ones, unless it says less than they do. */
async function setEarlierAside(db: Db, newId: string, reading: NewReading, nowMs: number): Promise<void> {
  for (const earlier of await readingsOfTest(db, reading.testId)) {
    if (earlier.id === newId || earlier.setAside || earlier.method !== 'photo-automatic') continue;
    if (earlier.photoSha256 !== reading.photoSha256) continue;
    if (reading.result.outcome === 'not-measured' && earlier.result.outcome !== 'not-measured') continue;
    await markReading(db, earlier.id, true, nowMs, {
      by: null,
      why: `the photo was measured again (engine ${reading.engineVersion ?? 'unknown'})`,
    });
  }
}

/** Sets a reading aside, or takes it back, by a mark beside it. */
export async function markReading(
  db: Db,
  readingId: string,
  setAside: boolean,
  nowMs: number,
  note: ChangeNote,
): Promise<void> {
  await db
    .insertInto('reading_marks')
    .values({
      id: orderedId(nowMs),
      reading_id: readingId,
      set_aside: setAside ? 1 : 0,
      made_at: new Date(nowMs).toISOString(),
      made_by: note.by ?? null,
      reason: note.why ?? null,
    })
    .execute();
}

/** Makes the derived columns of a test anew after its readings changed; who reviewed it saw others. */
export async function renewStanding(db: Db, test: Test): Promise<void> {
  const columns = standingColumns(test, await readingsOfTest(db, test.id));
  await db
    .updateTable('tests')
    .set({ ...columns, reviewed: 0 })
    .where('id', '=', test.id)
    .execute();
}
