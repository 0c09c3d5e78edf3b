import type { Kysely } from 'kysely';
import { LabError } from '../../src/errors.ts';
import type { Reading } from '../../src/records/reading.ts';
import type { TestInput } from '../../src/records/test.ts';
import { columnsOf } from './documents.ts';
import { orderedId } from './orderedId.ts';
import type { StoreSchema, TestRecord } from './schema.ts';
import { standingColumns } from './standing.ts';

type Db = Kysely<StoreSchema>;

/** Who changed something, and why, where it is known. */
export interface ChangeNote {
  readonly by?: string | null;
  readonly why?: string | null;
}

/** A new test without readings as a row. */
export function newTestRow(input: TestInput, nowMs: number, note: ChangeNote): TestRecord {
  const now = new Date(nowMs).toISOString();
  return {
    id: orderedId(nowMs),
    ...columnsOf(input),
    version: 1,
    created_at: now,
    updated_at: now,
    changed_by: note.by ?? null,
    change_reason: note.why ?? null,
    photo_count: 0,
    reviewed: 0,
    ...standingColumns(input, []),
  };
}

/** @throws LabError `not-found` */
export async function readTestRecord(db: Db, id: string): Promise<TestRecord> {
  const record = await db.selectFrom('tests').selectAll().where('id', '=', id).executeTakeFirst();
  if (record) return record;
  throw new LabError('not-found', `a test must have this id, got "${id}" and there is none`, {
    input: 'id',
    value: id,
  });
}

/** Puts new fields in the place of the old ones, which stay as an earlier version. */
export async function replaceFields(
  db: Db,
  record: TestRecord,
  input: TestInput,
  readings: readonly Reading[],
  now: string,
  note: ChangeNote,
): Promise<TestRecord> {
  await db
    .insertInto('test_versions')
    .values({
      test_id: record.id,
      version: record.version,
      document: record.document,
      made_at: record.updated_at,
      made_by: record.changed_by,
      reason: record.change_reason,
    })
    .execute();
  const change = {
    ...columnsOf(input),
    ...standingColumns(input, readings),
    reviewed: 0,
    version: record.version + 1,
    updated_at: now,
    changed_by: note.by ?? null,
    change_reason: note.why ?? null,
  };
  await db.updateTable('tests').set(change).where('id', '=', record.id).execute();
  return { ...record, ...change };
}
