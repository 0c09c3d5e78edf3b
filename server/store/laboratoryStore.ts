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
import { type ImportRecord, keepImport, readImport } from './importRecords.ts';
import { indexTexts } from './indexTexts.ts';
import { keepReading, markReading, renewStanding } from './keepReading.ts';
import { listTestRows, rowOf, type TestFilter, type TestPage, type TestRow } from './listTests.ts';
import { keepLogEntries } from './logEntries.ts';
import { MeasuringWork, PRIORITY, type Urgency } from './measuringWork.ts';
import { orderedId } from './orderedId.ts';
import { forget, type IncomingPhoto, photoFilePath, putInPlace, takeAway, takeIn } from './photoFiles.ts';
import { addPhotoRecord, photosOfTest, readPhoto } from './photoRecords.ts';
import { readingsOfTest, readingsOfTests, readReading } from './readings.ts';
import type { StoreSchema, TestRecord } from './schema.ts';
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

/** Everything the store knows about one test. */
export interface TestDossier {
  readonly test: Test;
  readonly photos: readonly Photo[];
  readonly readings: readonly Reading[];
}

const sameIdentity = (input: TestInput): LabError =>
  new LabError(
    'already-exists',
    `specimen id and test date together must be new, got "${input.specimenId}"${input.testDate ? ` of ${input.testDate}` : ' without a date'}, which is already there`,
    { input: 'specimenId', value: input.specimenId },
  );

const changedMeanwhile = (expectedVersion: number, record: TestRecord): LabError =>
  new LabError(
    'changed-meanwhile',
    `the test must still be at version ${expectedVersion}, got version ${record.version}: somebody changed it at ${record.updated_at}`,
    { input: 'version', value: expectedVersion },
  );

/** The laboratory's records in a data folder. Every call happens whole or not at all; nothing is ever overwritten. */
export class LaboratoryStore implements LaboratoryRecords {
  readonly folder: DataFolder;
  /** The photos whose measurement is due. */
  readonly measuring: MeasuringWork;
  readonly #db: Db;
  readonly #clock: () => number;
  readonly #bulkInsert: BulkInsert;
  #placing: Promise<void> = Promise.resolve();

  constructor({ folder, db, raw, clock }: OpenedStore) {
    this.folder = folder;
    this.#db = db;
    this.#clock = clock;
    this.measuring = new MeasuringWork(db, clock);
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
      await indexTexts(db);
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
        throw changedMeanwhile(expectedVersion, record);
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

  addReading(reading: NewReading): Promise<Reading> {
    return this.#change((db) => keepReading(db, reading, this.#clock()));
  }

  /** Sets a reading aside or takes it back; both stay in history. @throws LabError `not-found` */
  setReadingAside(id: string, setAside: boolean, note: ChangeNote): Promise<Reading> {
    return this.#change(async (db) => {
      const reading = await readReading(db, id);
      if (reading.setAside === setAside) return reading;
      await markReading(db, id, setAside, this.#clock(), note);
      await renewStanding(db, testOf(await readTestRecord(db, reading.testId)));
      return readReading(db, id);
    });
  }

  /**
   * Says that a person has looked at a test as it stands; any later change of the test or its readings takes it back.
   * @throws LabError `changed-meanwhile` when the version looked at is no longer the newest, `not-found`
   */
  reviewTest(id: string, expectedVersion: number, by: string, note: string | null): Promise<TestRow> {
    return this.#change(async (db) => {
      const record = await readTestRecord(db, id);
      if (record.version !== expectedVersion) throw changedMeanwhile(expectedVersion, record);
      await db
        .insertInto('reviews')
        .values({
          id: orderedId(this.#clock()),
          test_id: id,
          version: record.version,
          made_at: this.#now(),
          made_by: by,
          note,
        })
        .execute();
      await db.updateTable('tests').set({ reviewed: 1 }).where('id', '=', id).execute();
      return rowOf({ ...record, reviewed: 1 });
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
      return await this.#oneAfterTheOther(() => this.#placePhoto(photo, incoming, urgency));
    } finally {
      await forget(incoming);
    }
  }

  /** The file is at its place before its measurement is due, and is taken away again when its record cannot be written. */
  async #placePhoto(photo: Omit<Photo, 'addedAt'>, incoming: IncomingPhoto, urgency: Urgency): Promise<Photo> {
    const isNew = await putInPlace(this.folder, incoming);
    try {
      return await this.#change(async (db) => {
        if (photo.testId !== null) await readTestRecord(db, photo.testId);
        return addPhotoRecord(db, photo, this.#clock(), PRIORITY[urgency]);
      });
    } catch (error) {
      if (isNew) await takeAway(this.folder, photo.sha256);
      throw error;
    }
  }

  /** Two photos with the same bytes must not meet between file and record. */
  #oneAfterTheOther<Result>(work: () => Promise<Result>): Promise<Result> {
    const result = this.#placing.then(work);
    this.#placing = result.then(
      () => {},
      () => {},
    );
    return result;
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

  /** What the laboratory has settled under this name; null when it has not. */
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

  /** Answers when the store can be read. */
  async ping(): Promise<void> {
    await this.#db.selectFrom('settings').select('name').limit(1).execute();
  }

  keepImport(record: ImportRecord): Promise<void> {
    return keepImport(this.#db, record);
  }

  /** @throws LabError `not-found` */
  readImport(id: string): Promise<ImportRecord> {
    return readImport(this.#db, id);
  }

  async close(): Promise<void> {
    await this.#db.destroy();
    this.folder.unlock();
  }
}
