import type { Kysely } from 'kysely';
import type { TestInput } from '../../src/records/test.ts';
import type { StoreSchema } from './schema.ts';
import { readTestRecord } from './testRows.ts';

/** One field that changed. */
export interface FieldChange {
  readonly field: string;
  readonly before: unknown;
  readonly after: unknown;
}

/** One thing that happened to a test: who, when, why, before and after. */
export interface HistoryEntry {
  readonly at: string;
  readonly by: string | null;
  readonly why: string | null;
  readonly what:
    | 'created'
    | 'changed'
    | 'reading-added'
    | 'reading-set-aside'
    | 'reading-taken-back'
    | 'photo-added'
    | 'reviewed';
  /** The version a change made; null for readings and photos. */
  readonly version: number | null;
  readonly changes: readonly FieldChange[];
  readonly readingId: string | null;
  readonly photoSha256: string | null;
}

const entry = (fields: Partial<HistoryEntry> & Pick<HistoryEntry, 'at' | 'what'>): HistoryEntry => ({
  by: null,
  why: null,
  version: null,
  changes: [],
  readingId: null,
  photoSha256: null,
  ...fields,
});

function changesBetween(before: TestInput, after: TestInput): FieldChange[] {
  const was: Record<string, unknown> = { ...before };
  return Object.entries(after).flatMap(([field, value]) =>
    JSON.stringify(was[field]) === JSON.stringify(value) ? [] : [{ field, before: was[field] ?? null, after: value }],
  );
}

/** Everything that happened to a test, oldest first. @throws LabError `not-found` */
export async function historyOfTest(db: Kysely<StoreSchema>, testId: string): Promise<HistoryEntry[]> {
  const record = await readTestRecord(db, testId);
  const earlier = await db
    .selectFrom('test_versions')
    .selectAll()
    .where('test_id', '=', testId)
    .orderBy('version')
    .execute();
  const current = {
    version: record.version,
    document: record.document,
    made_at: record.updated_at,
    made_by: record.changed_by,
    reason: record.change_reason,
  };
  const entries: HistoryEntry[] = [];
  let before: TestInput | null = null;
  for (const version of [...earlier, current]) {
    const fields: TestInput = JSON.parse(version.document);
    entries.push(
      entry({
        at: version.made_at,
        by: version.made_by,
        why: version.reason,
        what: before === null ? 'created' : 'changed',
        version: version.version,
        changes: before === null ? [] : changesBetween(before, fields),
      }),
    );
    before = fields;
  }
  const photos = await db.selectFrom('photos').selectAll().where('test_id', '=', testId).execute();
  for (const photo of photos) {
    entries.push(entry({ at: photo.added_at, what: 'photo-added', photoSha256: photo.sha256 }));
  }
  const readings = await db.selectFrom('readings').selectAll().where('test_id', '=', testId).execute();
  for (const reading of readings) {
    entries.push(
      entry({
        at: reading.created_at,
        by: reading.operator,
        what: 'reading-added',
        readingId: reading.id,
        photoSha256: reading.photo_sha256,
      }),
    );
  }
  const marks = await db
    .selectFrom('reading_marks')
    .innerJoin('readings', 'readings.id', 'reading_marks.reading_id')
    .select(['reading_marks.set_aside', 'reading_id', 'made_at', 'made_by', 'reason'])
    .where('test_id', '=', testId)
    .orderBy('reading_marks.id')
    .execute();
  for (const mark of marks) {
    entries.push(
      entry({
        at: mark.made_at,
        by: mark.made_by,
        why: mark.reason,
        what: mark.set_aside === 1 ? 'reading-set-aside' : 'reading-taken-back',
        readingId: mark.reading_id,
        changes: [{ field: 'setAside', before: mark.set_aside !== 1, after: mark.set_aside === 1 }],
      }),
    );
  }
  const reviews = await db.selectFrom('reviews').selectAll().where('test_id', '=', testId).orderBy('id').execute();
  for (const review of reviews) {
    entries.push(
      entry({ at: review.made_at, by: review.made_by, why: review.note, what: 'reviewed', version: review.version }),
    );
  }
  return entries.sort((a, b) => (a.at < b.at ? -1 : a.at > b.at ? 1 : 0));
}
