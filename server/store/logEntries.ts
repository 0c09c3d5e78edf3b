import type { Kysely } from 'kysely';
import { hasSameReading } from '../../src/log/node/keepEntries.ts';
import type { KeptLogEntry, LogEntry } from '../../src/records/laboratoryRecords.ts';
import type { Reading } from '../../src/records/reading.ts';
import type { TestInput } from '../../src/records/test.ts';
import type { BulkInsert } from './bulkInsert.ts';
import { fieldsOf, identityOf, readingOf, testOf } from './documents.ts';
import { indexTexts } from './indexTexts.ts';
import { readingRow, readingsOfTests } from './readings.ts';
import type { ReadingTable, StoreSchema, TestRecord } from './schema.ts';
import { standingColumns } from './standing.ts';
import { type ChangeNote, newTestRow, replaceFields } from './testRows.ts';

type Db = Kysely<StoreSchema>;

/** What is known about a test while a batch is worked through. */
interface Known {
  record: TestRecord;
  readonly readings: Reading[];
  /** Not in the store yet. */
  isNew: boolean;
  /** Readings were added: what its row says about it must be made anew. */
  touched: boolean;
}

/** The fields the log states, over what is stored: an empty cell takes nothing away. */
function merged(stored: TestInput, stated: TestInput): TestInput {
  const fields = fieldsOf(stated);
  return {
    ...fields,
    testDate: fields.testDate ?? stored.testDate,
    material: fields.material ?? stored.material,
    heat: fields.heat ?? stored.heat,
    gaugeLengthMm: fields.gaugeLengthMm ?? stored.gaugeLengthMm,
    torqueMaxNm: fields.torqueMaxNm ?? stored.torqueMaxNm,
    torqueDirection: fields.torqueDirection ?? stored.torqueDirection,
    twistFractureDeg: fields.twistFractureDeg ?? stored.twistFractureDeg,
    axialForceN: fields.axialForceN ?? stored.axialForceN,
    bendingMomentNm: fields.bendingMomentNm ?? stored.bendingMomentNm,
    operator: fields.operator ?? stored.operator,
    remarks: fields.remarks ?? stored.remarks,
  };
}

async function knownTests(db: Db, entries: readonly LogEntry[]): Promise<Map<string, Known>> {
  const identities = [...new Set(entries.map((entry) => identityOf(entry.test)))];
  const records: TestRecord[] = [];
  for (let i = 0; i < identities.length; i += 1000) {
    const some = identities.slice(i, i + 1000);
    records.push(...(await db.selectFrom('tests').selectAll().where('identity', 'in', some).execute()));
  }
  const readings = new Map<string, Reading[]>();
  for (let i = 0; i < records.length; i += 1000) {
    const ids = records.slice(i, i + 1000).map((record) => record.id);
    for (const [id, list] of await readingsOfTests(db, ids)) readings.set(id, list);
  }
  return new Map(
    records.map((record) => [
      record.identity,
      { record, readings: readings.get(record.id) ?? [], isNew: false, touched: false },
    ]),
  );
}

interface KeepOptions {
  readonly clock: () => number;
  readonly note: ChangeNote;
  readonly bulkInsert: BulkInsert;
}

/** Keeps the rows of a log inside a transaction; see `LaboratoryRecords.upsertLogEntries`. */
export async function keepLogEntries(
  db: Db,
  entries: readonly LogEntry[],
  { clock, note, bulkInsert }: KeepOptions,
): Promise<KeptLogEntry[]> {
  const known = await knownTests(db, entries);
  const newReadings: ReadingTable[] = [];
  const kept: KeptLogEntry[] = [];

  const update = async (test: Known, stated: TestInput, nowMs: number): Promise<KeptLogEntry['outcome']> => {
    const fields = merged(testOf(test.record), stated);
    if (JSON.stringify(fields) === test.record.document) return 'unchanged';
    if (test.isNew) {
      // Two rows of one log speak of one test: the first is written, so that it stays as an earlier version.
      await db.insertInto('tests').values(test.record).execute();
      test.isNew = false;
    }
    test.record = await replaceFields(db, test.record, fields, test.readings, new Date(nowMs).toISOString(), note);
    return 'updated';
  };

  const addReading = (test: Known, reading: LogEntry['reading'], nowMs: number): boolean => {
    if (reading === null || hasSameReading(test.readings, reading)) return false;
    const row = readingRow({ ...reading, testId: test.record.id }, nowMs);
    newReadings.push(row);
    test.readings.push(readingOf({ ...row, mark: null }));
    test.touched = true;
    return true;
  };

  const keep = async ({ test: stated, reading }: LogEntry): Promise<KeptLogEntry> => {
    const nowMs = clock();
    const identity = identityOf(stated);
    let test = known.get(identity);
    let outcome: KeptLogEntry['outcome'] = 'stored';
    if (test) {
      outcome = await update(test, stated, nowMs);
    } else {
      test = { record: newTestRow(stated, nowMs, note), readings: [], isNew: true, touched: false };
      known.set(identity, test);
    }
    return { outcome, testId: test.record.id, readingAdded: addReading(test, reading, nowMs) };
  };

  for (const entry of entries) kept.push(await keep(entry));

  const tests = [...known.values()];
  for (const test of tests) {
    if (!test.touched) continue;
    const standing = { ...standingColumns(testOf(test.record), test.readings), reviewed: 0 };
    test.record = { ...test.record, ...standing };
    if (!test.isNew) await db.updateTable('tests').set(standing).where('id', '=', test.record.id).execute();
  }
  const newTests = tests.filter((test) => test.isNew).map((test) => test.record);
  await bulkInsert(db, 'tests', newTests);
  await bulkInsert(db, 'readings', newReadings);
  await indexTexts(db);
  return kept;
}
