import { type Kysely, sql } from 'kysely';
import { LabError } from '../../src/errors.ts';
import type { NewReading } from '../../src/records/laboratoryRecords.ts';
import type { Reading } from '../../src/records/reading.ts';
import { readingOf } from './documents.ts';
import { orderedId } from './orderedId.ts';
import type { ReadingTable, StoreSchema } from './schema.ts';

type Db = Kysely<StoreSchema>;

/** A new reading as a row. */
export function readingRow(reading: NewReading, nowMs: number): ReadingTable {
  return {
    id: orderedId(nowMs),
    test_id: reading.testId,
    method: reading.method,
    engine_version: reading.engineVersion,
    photo_sha256: reading.photoSha256,
    instrument: reading.instrument,
    operator: reading.operator,
    remarks: reading.remarks,
    created_at: new Date(nowMs).toISOString(),
    set_aside: reading.setAside ? 1 : 0,
    result: JSON.stringify(reading.result),
  };
}

const withMark = (db: Db) =>
  db
    .selectFrom('readings')
    .selectAll('readings')
    .select(
      sql<
        number | null
      >`(select m.set_aside from reading_marks m where m.reading_id = readings.id order by m.id desc limit 1)`.as(
        'mark',
      ),
    );

/** All readings of these tests, oldest first. */
export async function readingsOfTests(db: Db, testIds: readonly string[]): Promise<Map<string, Reading[]>> {
  const readings = new Map<string, Reading[]>(testIds.map((id) => [id, []]));
  if (testIds.length === 0) return readings;
  const rows = await withMark(db).where('test_id', 'in', testIds).orderBy('test_id').orderBy('readings.id').execute();
  for (const row of rows) readings.get(row.test_id)?.push(readingOf(row));
  return readings;
}

export async function readingsOfTest(db: Db, testId: string): Promise<Reading[]> {
  return (await readingsOfTests(db, [testId])).get(testId) ?? [];
}

/** @throws LabError `not-found` */
export async function readReading(db: Db, id: string): Promise<Reading> {
  const row = await withMark(db).where('readings.id', '=', id).executeTakeFirst();
  if (row) return readingOf(row);
  throw new LabError('not-found', `a reading must have this id, got "${id}" and there is none`, {
    input: 'id',
    value: id,
  });
}
