import { type Kysely, sql } from 'kysely';
import { INDEXED_TO, isSqlite } from './migrations.ts';
import type { StoreSchema } from './schema.ts';

/** Puts the texts of tests that came since into the text index; at the end of every transaction that adds tests. */
export async function indexTexts(db: Kysely<StoreSchema>): Promise<void> {
  if (!isSqlite(db)) return;
  await sql`
    insert into tests_text(rowid, search_text)
    select rowid, search_text from tests
    where rowid > (select cast(value as integer) from settings where name = ${INDEXED_TO})`.execute(db);
  await sql`
    update settings set value = (select coalesce(max(rowid), 0) from tests) where name = ${INDEXED_TO}`.execute(db);
}
