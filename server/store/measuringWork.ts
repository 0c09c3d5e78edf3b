import type { Kysely } from 'kysely';
import { LabError } from '../../src/errors.ts';
import type { NewReading } from '../../src/records/laboratoryRecords.ts';
import type { Reading } from '../../src/records/reading.ts';
import { keepReading } from './keepReading.ts';
import {
  countMeasuring,
  type DueMeasurement,
  endTry,
  type MeasuringCounts,
  resume as resumeInterrupted,
  takeNext,
} from './measuringQueue.ts';
import { photosOfTest, queueMeasurement } from './photoRecords.ts';
import type { StoreSchema } from './schema.ts';

type Db = Kysely<StoreSchema>;

/** A person waits for the result, or nobody does. */
export type Urgency = 'now' | 'later';
export const PRIORITY: Readonly<Record<Urgency, number>> = { now: 0, later: 1 };

/** The measurements that are due: kept in the store, so that they survive the program; each is made once. */
export class MeasuringWork {
  readonly #db: Db;
  readonly #clock: () => number;

  constructor(db: Db, clock: () => number) {
    this.#db = db;
    this.#clock = clock;
  }

  #change<Result>(work: (db: Db) => Promise<Result>): Promise<Result> {
    return this.#db.transaction().execute(work);
  }

  /** Makes a photo's measurement due (again). @throws LabError `not-found` when the test has no such photo */
  add(testId: string, sha256: string, urgency: Urgency): Promise<void> {
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
  addOlderThan(engineVersion: string): Promise<number> {
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
  take(urgency: Urgency = 'later'): Promise<DueMeasurement | null> {
    return this.#change((db) => takeNext(db, this.#clock(), PRIORITY[urgency]));
  }

  /**
   * Keeps the reading of a due measurement, unless it was ended meanwhile: a measurement is kept once.
   * @param setAsideWhy the photo is set aside as poisonous, for this reason
   */
  keep(due: DueMeasurement, reading: NewReading, setAsideWhy: string | null = null): Promise<Reading | null> {
    return this.#change(async (db) => {
      const row = await db.selectFrom('measuring').select('state').where('id', '=', due.id).executeTakeFirst();
      if (row?.state !== 'running') return null;
      if (setAsideWhy !== null) await endTry(db, due.id, 'set-aside', setAsideWhy, this.#clock());
      return keepReading(db, reading, this.#clock());
    });
  }

  /** Gives a measurement back to the queue, to be tried again. */
  giveBack(due: DueMeasurement, reason: string): Promise<void> {
    return this.#change((db) => endTry(db, due.id, 'waiting', reason, this.#clock()));
  }

  /** Takes everything that waits out of the queue; the photos stay. @returns how many */
  async cancel(): Promise<number> {
    const result = await this.#db
      .updateTable('measuring')
      .set({ state: 'cancelled', ended_at: new Date(this.#clock()).toISOString(), reason: 'cancelled' })
      .where('state', '=', 'waiting')
      .executeTakeFirst();
    return Number(result.numUpdatedRows);
  }

  counts(): Promise<MeasuringCounts> {
    return countMeasuring(this.#db);
  }

  /** Whether a measurement of this photo is due or running. */
  async isDue(testId: string, sha256: string): Promise<boolean> {
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
  async resume(): Promise<void> {
    await this.#change(async (db) => {
      for (const due of await resumeInterrupted(db, this.#clock())) {
        await keepReading(
          db,
          {
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
          },
          this.#clock(),
        );
      }
    });
  }
}
