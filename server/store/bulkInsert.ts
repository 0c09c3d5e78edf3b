import type Database from 'better-sqlite3';
import type { Kysely } from 'kysely';
import type { NewTestRecord, ReadingTable, StoreSchema } from './schema.ts';

interface BulkTables {
  readonly tests: NewTestRecord;
  readonly readings: ReadingTable;
}

/** Inserts many rows inside the running transaction; the fastest way differs between databases. */
export type BulkInsert = <Table extends keyof BulkTables>(
  db: Kysely<StoreSchema>,
  table: Table,
  rows: readonly BulkTables[Table][],
) => Promise<void>;

/** A prepared statement a row: twice as fast as statements of many rows, which SQLite must read anew each time. */
export function sqliteBulkInsert(raw: Database.Database): BulkInsert {
  const prepared = new Map<string, Database.Statement>();
  return async (_db, table, rows) => {
    const [first] = rows;
    if (!first) return;
    // `Kysely` holds the one connection there is, so that this runs inside its transaction.
    const columns = Object.keys(first);
    const text = `insert into "${table}" (${columns.map((name) => `"${name}"`).join(', ')}) values (${columns.map((name) => `@${name}`).join(', ')})`;
    let statement = prepared.get(text);
    if (!statement) {
      statement = raw.prepare(text);
      prepared.set(text, statement);
    }
    for (const row of rows) statement.run(row);
  };
}
