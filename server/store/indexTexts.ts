import { type Kysely, sql } from 'kysely';
import { INDEXED_TO, isSqlite } from './migrations.ts';
import type { StoreSchema } from './schema.ts';

/**
 * Puts the texts of some tests that came since into the text index, inside a transaction.
 * @returns how many; 0 when all are in it
 */
export async function indexTexts(db: Kysely<StoreSchema>, most: number): Promise<number> {
  if (!isSqlite(db)) return 0;
  const due = await sql<{ rowid: number }>`
    select rowid from tests
    where rowid > (select cast(value as integer) from settings where name = ${INDEXED_TO})
    order by rowid limit ${most}`.execute(db);
  const [first, last] = [due.rows[0], due.rows.at(-1)];
  if (!first || !last) return 0;
  await sql`
    insert into tests_text(rowid, search_text)
    select rowid, search_text from tests where rowid between ${first.rowid} and ${last.rowid}`.execute(db);
  await db
    .updateTable('settings')
    .set({ value: String(last.rowid) })
    .where('name', '=', INDEXED_TO)
    .execute();
  return due.rows.length;
}
