import type { Kysely } from 'kysely';
import type { MeasuringState, MeasuringTable, StoreSchema } from './schema.ts';

type Db = Kysely<StoreSchema>;

/** A photo that ends its worker this often is set aside. */
export const MOST_TRIES = 3;

/** A measurement taken from the queue. */
export interface DueMeasurement {
  readonly id: string;
  readonly testId: string;
  readonly photoSha256: string;
  /** How often it has been started, this time included. */
  readonly tries: number;
}

export type MeasuringCounts = Readonly<Record<MeasuringState, number>>;

const dueOf = (row: MeasuringTable): DueMeasurement => ({
  id: row.id,
  testId: row.test_id,
  photoSha256: row.photo_sha256,
  tries: row.tries,
});

/**
 * Takes the next due measurement; null when there is none. Must run inside a transaction.
 * @param mostPatient highest priority number that is taken: 0 takes only what a person waits for
 */
export async function takeNext(db: Db, nowMs: number, mostPatient: number): Promise<DueMeasurement | null> {
  const row = await db
    .selectFrom('measuring')
    .selectAll()
    .where('state', '=', 'waiting')
    .where('priority', '<=', mostPatient)
    .orderBy('priority')
    // What was interrupted comes after the others: it may be what ended the program, and they are innocent.
    .orderBy('tries')
    .orderBy('id')
    .limit(1)
    .executeTakeFirst();
  if (!row) return null;
  const tries = row.tries + 1;
  await db
    .updateTable('measuring')
    .set({ state: 'running', tries, started_at: new Date(nowMs).toISOString() })
    .where('id', '=', row.id)
    .execute();
  return dueOf({ ...row, tries });
}

/** Ends a measurement that cannot be made, or gives it back to the queue. */
export async function endTry(
  db: Db,
  id: string,
  state: 'waiting' | 'set-aside' | 'cancelled',
  reason: string | null,
  nowMs: number,
): Promise<void> {
  await db
    .updateTable('measuring')
    .set({ state, reason, ended_at: state === 'waiting' ? null : new Date(nowMs).toISOString() })
    .where('id', '=', id)
    .where('state', 'in', ['waiting', 'running'])
    .execute();
}

/** After a crash: what was being measured is due again, unless it has been tried too often. @returns those set aside */
export async function resume(db: Db, nowMs: number): Promise<DueMeasurement[]> {
  const running = await db.selectFrom('measuring').selectAll().where('state', '=', 'running').execute();
  const poisonous = running.filter((row) => row.tries >= MOST_TRIES).map(dueOf);
  await db
    .updateTable('measuring')
    .set({ state: 'waiting', started_at: null })
    .where('state', '=', 'running')
    .where('tries', '<', MOST_TRIES)
    .execute();
  for (const { id } of poisonous) {
    await endTry(db, id, 'set-aside', `the program ended ${MOST_TRIES} times while measuring this photo`, nowMs);
  }
  return poisonous;
}

export async function countMeasuring(db: Db): Promise<MeasuringCounts> {
  const rows = await db
    .selectFrom('measuring')
    .select(['state', (e) => e.fn.countAll().as('count')])
    .groupBy('state')
    .execute();
  const of = (state: MeasuringState) => Number(rows.find((row) => row.state === state)?.count ?? 0);
  return {
    waiting: of('waiting'),
    running: of('running'),
    done: of('done'),
    'set-aside': of('set-aside'),
    cancelled: of('cancelled'),
  };
}
