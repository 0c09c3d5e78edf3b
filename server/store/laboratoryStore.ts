import { rm } from 'node:fs/promises';
import { setImmediate as nextTurn } from 'node:timers/promises';
import type Database from 'better-sqlite3';
import type { Kysely } from 'kysely';
import { LabError } from '../../src/errors.ts';
import type {
  KeptLogEntry,
  LaboratoryRecords,
  ListQuery,
  LogEntry,
  NewReading,
  Photo,
  StoreOutcome,
} from '../../src/records/laboratoryRecords.ts';
import type { Reading } from '../../src/records/reading.ts';
import type { Test, TestInput } from '../../src/records/test.ts';
import { type BulkInsert, sqliteBulkInsert } from './bulkInsert.ts';
import type { DataFolder } from './dataFolder.ts';
import { identityOf, testOf } from './documents.ts';
import { type HistoryEntry, historyOfTest } from './history.ts';
import { listTestRows, rowOf, type TestFilter, type TestPage, type TestRow } from './listTests.ts';
import { keepLogEntries } from './logEntries.ts';
import {
  countMeasuring,
  type DueMeasurement,
  endTry,
  type MeasuringCounts,
  resume,
  takeNext,
} from './measuringQueue.ts';
import { orderedId } from './orderedId.ts';
import { hasPhotoFile, photoFilePath, putInPlace, takeIn } from './photoFiles.ts';
import {
  addPhotoRecord,
  endMeasurement,
  photosOfTest,
  queueMeasurement,
  readPhoto,
  setPhotoSize,
} from './photoRecords.ts';
import { readingRow, readingsOfTest, readingsOfTests, readReading } from './readings.ts';
import type { StoreSchema } from './schema.ts';
import { STANDING_REVISION, standingColumns } from './standing.ts';
import { type ChangeNote, newTestRow, readTestRecord, replaceFields } from './testRows.ts';

type Db = Kysely<StoreSchema>;

interface OpenedStore {
  readonly folder: DataFolder;
  readonly db: Db;
  /** The SQLite connection below `db`. */
  readonly raw: Database.Database;
  readonly clock: () => number;
}

/** A person waits for the result, or nobody does. */
export type Urgency = 'now' | 'later';
const PRIORITY: Readonly<Record<Urgency, number>> = { now: 0, later: 1 };

/** Everything the store knows about one test. */
export interface TestDossier {
  readonly test: Test;
  readonly photos: readonly Photo[];
  readonly readings: readonly Reading[];
}

/** One run of an import, with what it said. */
export interface ImportRecord {
  readonly id: string;
  readonly fileName: string;
  readonly dryRun: boolean;
  readonly startedAt: string;
  readonly endedAt: string;
  /** The summary as JSON text. */
  readonly summary: string;
}

const sameIdentity = (input: TestInput): LabError =>
  new LabError(
    'already-exists',
    `specimen id and test date together must be new, got "${input.specimenId}"${input.testDate ? ` of ${input.testDate}` : ' without a date'}, which is already there`,
    { input: 'specimenId', value: input.specimenId },
  );

/** The laboratory's records in a data folder. Every call happens whole or not at all; nothing is ever overwritten. */
export class LaboratoryStore implements LaboratoryRecords {
  readonly folder: DataFolder;
  readonly #db: Db;
  readonly #clock: () => number;
  readonly #bulkInsert: BulkInsert;

  constructor({ folder, db, raw, clock }: OpenedStore) {
    this.folder = folder;
    this.#db = db;
    this.#clock = clock;
    this.#bulkInsert = sqliteBulkInsert(raw);
  }

  #change<Result>(work: (db: Db) => Promise<Result>): Promise<Result> {
    return this.#db.transaction().execute(work);
  }

  #now(): string {
    return new Date(this.#clock()).toISOString();
  }

  async #identityTaken(db: Db, input: TestInput, exceptId: string | null): Promise<boolean> {
    const other = await db
      .selectFrom('tests')
      .select('id')
      .where('identity', '=', identityOf(input))
      .executeTakeFirst();
    return other !== undefined && other.id !== exceptId;
  }

  createTest(input: TestInput, note: ChangeNote = {}): Promise<Test> {
    return this.#change(async (db) => {
      if (await this.#identityTaken(db, input, null)) throw sameIdentity(input);
      const row = newTestRow(input, this.#clock(), note);
      await db.insertInto('tests').values(row).execute();
      return testOf(row);
    });
  }

  async readTest(id: string): Promise<Test> {
    return testOf(await readTestRecord(this.#db, id));
  }

  /** The test with all its photos and readings, as of one moment. @throws LabError `not-found` */
  readDossier(id: string): Promise<TestDossier> {
    return this.#change(async (db) => ({
      test: testOf(await readTestRecord(db, id)),
      photos: await photosOfTest(db, id),
      readings: await readingsOfTest(db, id),
    }));
  }

  async readRow(id: string): Promise<TestRow> {
    return rowOf(await readTestRecord(this.#db, id));
  }

  changeTest(id: string, expectedVersion: number, input: TestInput, note: ChangeNote = {}): Promise<Test> {
    return this.#change(async (db) => {
      const record = await readTestRecord(db, id);
      if (record.version !== expectedVersion) {
        throw new LabError(
          'changed-meanwhile',
          `the test must still be at version ${expectedVersion}, got version ${record.version}: somebody changed it at ${record.updated_at}`,
          { input: 'version', value: expectedVersion },
        );
      }
      if (await this.#identityTaken(db, input, id)) throw sameIdentity(input);
      return testOf(await replaceFields(db, record, input, await readingsOfTest(db, id), this.#now(), note));
    });
  }

  async listTests(query: ListQuery): Promise<{ tests: Test[]; nextCursor: string | null; total: number }> {
    return listTestRows(this.#db, query);
  }

  /** Like `listTests`, with what the readings say and more to narrow it by. */
  listRows(query: TestFilter): Promise<TestPage> {
    return listTestRows(this.#db, query);
  }

  async upsertTest(input: TestInput): Promise<{ outcome: StoreOutcome; test: Test }> {
    const [kept] = await this.upsertLogEntries([{ test: input, reading: null }]);
    if (!kept) throw new Error('one entry must give one answer');
    return { outcome: kept.outcome, test: await this.readTest(kept.testId) };
  }

  async upsertLogEntries(
    entries: readonly LogEntry[],
    options: { readonly dryRun?: boolean; readonly note?: ChangeNote } = {},
  ): Promise<KeptLogEntry[]> {
    const { dryRun = false, note = {} } = options;
    let kept: KeptLogEntry[] = [];
    const triedOut = new Error('a dry run is undone');
    try {
      await this.#change(async (db) => {
        kept = await keepLogEntries(db, entries, { clock: this.#clock, note, bulkInsert: this.#bulkInsert });
        if (dryRun) throw triedOut;
      });
    } catch (error) {
      if (error !== triedOut) throw error;
    }
    // SQLite answers without waiting for anything: without a pause, batch after batch would let nobody else have a turn.
    await nextTurn();
    return kept;
  }

  async #keepReading(db: Db, reading: NewReading): Promise<Reading> {
    const record = await readTestRecord(db, reading.testId);
    const nowMs = this.#clock();
    const row = readingRow(reading, nowMs);
    await db.insertInto('readings').values(row).execute();
    if (reading.method === 'photo-automatic' && reading.photoSha256 !== null) {
      await this.#setEarlierAside(db, row.id, reading, nowMs);
      await endMeasurement(db, reading.testId, reading.photoSha256, nowMs);
    }
    const { result } = reading;
    if (reading.photoSha256 !== null && result.outcome !== 'by-instrument' && result.widthPx && result.heightPx) {
      await setPhotoSize(db, reading.photoSha256, result.widthPx, result.heightPx);
    }
    await this.#renewStanding(db, reading.testId, testOf(record));
    return readReading(db, row.id);
  }

  /** A photo measured again: the new reading stands for the earlier automatic ones, unless it says less than they do. */
  async #setEarlierAside(db: Db, newId: string, reading: NewReading, nowMs: number): Promise<void> {
    for (const earlier of await readingsOfTest(db, reading.testId)) {
      if (earlier.id === newId || earlier.setAside || earlier.method !== 'photo-automatic') continue;
      if (earlier.photoSha256 !== reading.photoSha256) continue;
      if (reading.result.outcome === 'not-measured' && earlier.result.outcome !== 'not-measured') continue;
      await db
        .insertInto('reading_marks')
        .values({
          id: orderedId(nowMs),
          reading_id: earlier.id,
          set_aside: 1,
          made_at: new Date(nowMs).toISOString(),
          made_by: null,
          reason: `the photo was measured again (engine ${reading.engineVersion ?? 'unknown'})`,
        })
        .execute();
    }
  }

  async #renewStanding(db: Db, testId: string, test: Test): Promise<void> {
    const columns = standingColumns(test, await readingsOfTest(db, testId));
    await db.updateTable('tests').set(columns).where('id', '=', testId).execute();
  }

  addReading(reading: NewReading): Promise<Reading> {
    return this.#change((db) => this.#keepReading(db, reading));
  }

  /** Sets a reading aside or takes it back; both stay in history. @throws LabError `not-found` */
  setReadingAside(id: string, setAside: boolean, note: ChangeNote): Promise<Reading> {
    return this.#change(async (db) => {
      const reading = await readReading(db, id);
      if (reading.setAside === setAside) return reading;
      await db
        .insertInto('reading_marks')
        .values({
          id: orderedId(this.#clock()),
          reading_id: id,
          set_aside: setAside ? 1 : 0,
          made_at: this.#now(),
          made_by: note.by ?? null,
          reason: note.why ?? null,
        })
        .execute();
      await this.#renewStanding(db, reading.testId, testOf(await readTestRecord(db, reading.testId)));
      return readReading(db, id);
    });
  }

  readingsOf(testId: string): Promise<Reading[]> {
    return readingsOfTest(this.#db, testId);
  }

  readReading(id: string): Promise<Reading> {
    return readReading(this.#db, id);
  }

  historyOf(testId: string): Promise<HistoryEntry[]> {
    return this.#change((db) => historyOfTest(db, testId));
  }

  /**
   * Keeps a photo: the file at `temporaryPath` goes into the photo folder, and its measurement becomes due.
   * @throws LabError `contradiction` when the bytes do not belong to the SHA-256, `not-found` without the test
   */
  async addPhoto(photo: Omit<Photo, 'addedAt'>, temporaryPath: string, urgency: Urgency = 'later'): Promise<Photo> {
    const incoming = await takeIn(this.folder, photo.sha256, temporaryPath);
    try {
      const kept = await this.#change(async (db) => {
        if (photo.testId !== null) await readTestRecord(db, photo.testId);
        return addPhotoRecord(db, photo, this.#clock(), PRIORITY[urgency]);
      });
      if (!(await hasPhotoFile(this.folder, photo.sha256))) await putInPlace(this.folder, incoming);
      return kept;
    } finally {
      await rm(incoming.path, { force: true });
    }
  }

  photosOf(testId: string): Promise<Photo[]> {
    return photosOfTest(this.#db, testId);
  }

  readPhoto(sha256: string): Promise<Photo> {
    return readPhoto(this.#db, sha256);
  }

  async hasPhoto(sha256: string): Promise<boolean> {
    const row = await this.#db.selectFrom('photos').select('id').where('sha256', '=', sha256).executeTakeFirst();
    return row !== undefined;
  }

  async photoPath(sha256: string): Promise<string> {
    await readPhoto(this.#db, sha256);
    return photoFilePath(this.folder, sha256);
  }

  async countTests(): Promise<number> {
    const row = await this.#db
      .selectFrom('tests')
      .select((e) => e.fn.countAll().as('count'))
      .executeTakeFirstOrThrow();
    return Number(row.count);
  }

  // --- the measuring queue ---

  /** Makes a photo's measurement due (again). @throws LabError `not-found` when the test has no such photo */
  queueMeasurement(testId: string, sha256: string, urgency: Urgency): Promise<void> {
    return this.#change(async (db) => {
      const photos = await photosOfTest(db, testId);
      if (!photos.some((photo) => photo.sha256 === sha256)) {
        throw new LabError('not-found', `the test must have a photo with this SHA-256, got "${sha256}"`, {
          input: 'sha256',
          value: sha256,
        });
      }
      await queueMeasurement(db, testId, sha256, this.#clock(), PRIORITY[urgency]);
    });
  }

  /** Makes every photo due that no reading of this engine exists of. @returns how many */
  queueOlderThan(engineVersion: string): Promise<number> {
    return this.#change(async (db) => {
      const due = await db
        .selectFrom('photos')
        .select(['test_id', 'sha256'])
        .where('test_id', 'is not', null)
        .where((e) =>
          e.not(
            e.exists(
              e
                .selectFrom('readings')
                .select('readings.id')
                .whereRef('readings.test_id', '=', 'photos.test_id')
                .whereRef('readings.photo_sha256', '=', 'photos.sha256')
                .where('method', '=', 'photo-automatic')
                .where('engine_version', '=', engineVersion),
            ),
          ),
        )
        .orderBy('photos.id')
        .execute();
      for (const { test_id, sha256 } of due) {
        if (test_id !== null) await queueMeasurement(db, test_id, sha256, this.#clock(), PRIORITY.later);
      }
      return due.length;
    });
  }

  /** Takes the next due measurement; with `now` only one that a person waits for. */
  takeMeasurement(urgency: Urgency = 'later'): Promise<DueMeasurement | null> {
    return this.#change((db) => takeNext(db, this.#clock(), PRIORITY[urgency]));
  }

  /**
   * Keeps the reading of a due measurement, unless it was ended meanwhile: a measurement is kept once.
   * @param setAsideWhy the photo is set aside as poisonous, for this reason
   */
  keepMeasurement(
    due: DueMeasurement,
    reading: NewReading,
    setAsideWhy: string | null = null,
  ): Promise<Reading | null> {
    return this.#change(async (db) => {
      const row = await db.selectFrom('measuring').select('state').where('id', '=', due.id).executeTakeFirst();
      if (row?.state !== 'running') return null;
      if (setAsideWhy !== null) await endTry(db, due.id, 'set-aside', setAsideWhy, this.#clock());
      return this.#keepReading(db, reading);
    });
  }

  /** Gives a measurement back to the queue, to be tried again. */
  returnMeasurement(due: DueMeasurement, reason: string): Promise<void> {
    return this.#change((db) => endTry(db, due.id, 'waiting', reason, this.#clock()));
  }

  /** Takes everything that waits out of the queue; the photos stay. @returns how many */
  async cancelMeasuring(): Promise<number> {
    const result = await this.#db
      .updateTable('measuring')
      .set({ state: 'cancelled', ended_at: this.#now(), reason: 'cancelled' })
      .where('state', '=', 'waiting')
      .executeTakeFirst();
    return Number(result.numUpdatedRows);
  }

  measuringCounts(): Promise<MeasuringCounts> {
    return countMeasuring(this.#db);
  }

  /** Whether a measurement of this photo is due or running. */
  async isMeasurementDue(testId: string, sha256: string): Promise<boolean> {
    const row = await this.#db
      .selectFrom('measuring')
      .select('id')
      .where('test_id', '=', testId)
      .where('photo_sha256', '=', sha256)
      .where('state', 'in', ['waiting', 'running'])
      .executeTakeFirst();
    return row !== undefined;
  }

  /** After a start: what a crash interrupted is due again; what ended the program too often is a reading with the reason. */
  async resumeMeasuring(): Promise<void> {
    await this.#change(async (db) => {
      for (const due of await resume(db, this.#clock())) {
        await this.#keepReading(db, {
          testId: due.testId,
          method: 'photo-automatic',
          engineVersion: null,
          photoSha256: due.photoSha256,
          instrument: null,
          operator: null,
          remarks: null,
          setAside: false,
          result: {
            outcome: 'not-measured',
            reason: {
              code: 'fault',
              message: `the program ended ${due.tries} times while measuring this photo; measure it by hand`,
            },
            sha256: due.photoSha256,
            elapsedMs: 0,
            warnings: [],
          },
        });
      }
    });
  }

  /** Makes the derived columns anew where they come from an earlier revision of the rule. */
  async renewStandings(batch = 500): Promise<number> {
    let renewed = 0;
    for (;;) {
      const count = await this.#change(async (db) => {
        const records = await db
          .selectFrom('tests')
          .selectAll()
          .where('assessed_with', '!=', STANDING_REVISION)
          .limit(batch)
          .execute();
        const readings = await readingsOfTests(
          db,
          records.map((record) => record.id),
        );
        for (const record of records) {
          const columns = standingColumns(testOf(record), readings.get(record.id) ?? []);
          await db.updateTable('tests').set(columns).where('id', '=', record.id).execute();
        }
        return records.length;
      });
      renewed += count;
      if (count < batch) return renewed;
    }
  }

  // --- imports and settings ---

  async keepImport(record: ImportRecord): Promise<void> {
    await this.#db
      .insertInto('imports')
      .values({
        id: record.id,
        file_name: record.fileName,
        dry_run: record.dryRun ? 1 : 0,
        started_at: record.startedAt,
        ended_at: record.endedAt,
        summary: record.summary,
      })
      .execute();
  }

  /** @throws LabError `not-found` */
  async readImport(id: string): Promise<ImportRecord> {
    const row = await this.#db.selectFrom('imports').selectAll().where('id', '=', id).executeTakeFirst();
    if (!row) {
      throw new LabError('not-found', `an import must have this id, got "${id}" and there is none`, {
        input: 'id',
        value: id,
      });
    }
    return {
      id: row.id,
      fileName: row.file_name,
      dryRun: row.dry_run === 1,
      startedAt: row.started_at,
      endedAt: row.ended_at,
      summary: row.summary,
    };
  }

  async setting(name: string): Promise<string | null> {
    const row = await this.#db.selectFrom('settings').select('value').where('name', '=', name).executeTakeFirst();
    return row?.value ?? null;
  }

  async setSetting(name: string, value: string): Promise<void> {
    await this.#db
      .insertInto('settings')
      .values({ name, value })
      .onConflict((c) => c.column('name').doUpdateSet({ value }))
      .execute();
  }

  async close(): Promise<void> {
    await this.#db.destroy();
    this.folder.unlock();
  }
}
