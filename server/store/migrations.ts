import { type Kysely, type Migration, Migrator, SqliteAdapter, sql } from 'kysely';
import type { StoreSchema } from './schema.ts';

/** Whether the database is SQLite, which has a text index of its own. */
export const isSqlite = (db: Kysely<never> | Kysely<unknown> | Kysely<StoreSchema>): boolean =>
  db.getExecutor().adapter instanceof SqliteAdapter;

/** Setting: the rowid up to which texts are in the text index. */
export const INDEXED_TO = 'text-indexed-to';

/** Only the builder is used, so that the same steps run on SQLite and PostgreSQL. Steps are never changed, only added. */
const MIGRATIONS: Readonly<Record<string, Migration>> = {
  '0001-laboratory': {
    async up(db) {
      await db.schema
        .createTable('tests')
        .addColumn('id', 'text', (c) => c.primaryKey())
        .addColumn('specimen_id', 'text', (c) => c.notNull())
        .addColumn('identity', 'text', (c) => c.notNull().unique())
        .addColumn('sort_date', 'text', (c) => c.notNull())
        .addColumn('material_key', 'text')
        .addColumn('heat_key', 'text')
        .addColumn('operator_key', 'text')
        .addColumn('section', 'text', (c) => c.notNull())
        .addColumn('search_text', 'text', (c) => c.notNull())
        .addColumn('document', 'text', (c) => c.notNull())
        .addColumn('version', 'integer', (c) => c.notNull())
        .addColumn('created_at', 'text', (c) => c.notNull())
        .addColumn('updated_at', 'text', (c) => c.notNull())
        .addColumn('changed_by', 'text')
        .addColumn('change_reason', 'text')
        .addColumn('mode', 'text')
        .addColumn('probability', 'double precision')
        .addColumn('plane_angle_deg', 'double precision')
        .addColumn('expanded_uncertainty_deg', 'double precision')
        .addColumn('photo_count', 'integer', (c) => c.notNull())
        .addColumn('reading_count', 'integer', (c) => c.notNull())
        .addColumn('flags', 'text', (c) => c.notNull())
        .addColumn('flag_count', 'integer', (c) => c.notNull())
        .addColumn('assessed_with', 'text', (c) => c.notNull())
        .execute();
      await db.schema.createIndex('tests_by_date').on('tests').columns(['sort_date', 'id']).execute();
      await db.schema
        .createIndex('tests_by_material')
        .on('tests')
        .columns(['material_key', 'sort_date', 'id'])
        .execute();
      await db.schema.createIndex('tests_by_heat').on('tests').columns(['heat_key', 'sort_date', 'id']).execute();
      await db.schema.createIndex('tests_by_mode').on('tests').columns(['mode', 'sort_date', 'id']).execute();
      await db.schema.createIndex('tests_by_text').on('tests').columns(['search_text', 'sort_date', 'id']).execute();
      await db.schema.createIndex('tests_by_change').on('tests').columns(['updated_at', 'id']).execute();

      await db.schema
        .createTable('test_versions')
        .addColumn('test_id', 'text', (c) => c.notNull().references('tests.id'))
        .addColumn('version', 'integer', (c) => c.notNull())
        .addColumn('document', 'text', (c) => c.notNull())
        .addColumn('made_at', 'text', (c) => c.notNull())
        .addColumn('made_by', 'text')
        .addColumn('reason', 'text')
        .addPrimaryKeyConstraint('test_versions_key', ['test_id', 'version'])
        .execute();

      await db.schema
        .createTable('readings')
        .addColumn('id', 'text', (c) => c.primaryKey())
        .addColumn('test_id', 'text', (c) => c.notNull().references('tests.id'))
        .addColumn('method', 'text', (c) => c.notNull())
        .addColumn('engine_version', 'text')
        .addColumn('photo_sha256', 'text')
        .addColumn('instrument', 'text')
        .addColumn('operator', 'text')
        .addColumn('remarks', 'text')
        .addColumn('created_at', 'text', (c) => c.notNull())
        .addColumn('set_aside', 'integer', (c) => c.notNull())
        .addColumn('result', 'text', (c) => c.notNull())
        .execute();
      await db.schema.createIndex('readings_of_test').on('readings').columns(['test_id', 'id']).execute();

      await db.schema
        .createTable('reading_marks')
        .addColumn('id', 'text', (c) => c.primaryKey())
        .addColumn('reading_id', 'text', (c) => c.notNull().references('readings.id'))
        .addColumn('set_aside', 'integer', (c) => c.notNull())
        .addColumn('made_at', 'text', (c) => c.notNull())
        .addColumn('made_by', 'text')
        .addColumn('reason', 'text')
        .execute();
      await db.schema.createIndex('marks_of_reading').on('reading_marks').columns(['reading_id', 'id']).execute();

      await db.schema
        .createTable('photos')
        .addColumn('id', 'text', (c) => c.primaryKey())
        .addColumn('sha256', 'text', (c) => c.notNull())
        .addColumn('test_id', 'text', (c) => c.references('tests.id'))
        .addColumn('file_name', 'text', (c) => c.notNull())
        .addColumn('media_type', 'text', (c) => c.notNull())
        .addColumn('bytes', 'bigint', (c) => c.notNull())
        .addColumn('width_px', 'integer')
        .addColumn('height_px', 'integer')
        .addColumn('added_at', 'text', (c) => c.notNull())
        .execute();
      await db.schema.createIndex('photos_of_test').on('photos').columns(['test_id', 'sha256']).unique().execute();
      await db.schema.createIndex('photos_by_content').on('photos').columns(['sha256']).execute();

      await db.schema
        .createTable('measuring')
        .addColumn('id', 'text', (c) => c.primaryKey())
        .addColumn('photo_sha256', 'text', (c) => c.notNull())
        .addColumn('test_id', 'text', (c) => c.notNull().references('tests.id'))
        .addColumn('state', 'text', (c) => c.notNull())
        .addColumn('priority', 'integer', (c) => c.notNull())
        .addColumn('tries', 'integer', (c) => c.notNull())
        .addColumn('reason', 'text')
        .addColumn('queued_at', 'text', (c) => c.notNull())
        .addColumn('started_at', 'text')
        .addColumn('ended_at', 'text')
        .execute();
      await db.schema.createIndex('measuring_next').on('measuring').columns(['state', 'priority', 'id']).execute();
      await db.schema.createIndex('measuring_of_photo').on('measuring').columns(['test_id', 'photo_sha256']).execute();

      await db.schema
        .createTable('imports')
        .addColumn('id', 'text', (c) => c.primaryKey())
        .addColumn('file_name', 'text', (c) => c.notNull())
        .addColumn('dry_run', 'integer', (c) => c.notNull())
        .addColumn('started_at', 'text', (c) => c.notNull())
        .addColumn('ended_at', 'text', (c) => c.notNull())
        .addColumn('summary', 'text', (c) => c.notNull())
        .execute();

      await db.schema
        .createTable('settings')
        .addColumn('name', 'text', (c) => c.primaryKey())
        .addColumn('value', 'text', (c) => c.notNull())
        .execute();
    },
  },
  '0002-find': {
    async up(db) {
      await db.schema.dropIndex('tests_by_text').execute();
      // With what lists are often narrowed by, so that passing over tests that do not fit needs only the index.
      await db.schema.dropIndex('tests_by_date').execute();
      await db.schema
        .createIndex('tests_by_date')
        .on('tests')
        .columns(['sort_date', 'id', 'plane_angle_deg', 'flag_count'])
        .execute();
      await db.schema.createIndex('tests_by_flags').on('tests').columns(['flag_count']).execute();
      await db.schema.createIndex('tests_by_angle').on('tests').columns(['plane_angle_deg']).execute();
      await db.schema
        .createIndex('tests_by_operator')
        .on('tests')
        .columns(['operator_key', 'sort_date', 'id'])
        .execute();
      await createTextIndex(db);
    },
  },
  '0003-index-texts-together': {
    up: indexTextsTogether,
  },
  '0004-interrupted-last': {
    async up(db) {
      await db.schema.dropIndex('measuring_next').execute();
      await db.schema
        .createIndex('measuring_next')
        .on('measuring')
        .columns(['state', 'priority', 'tries', 'id'])
        .execute();
    },
  },
  '0005-reviews': {
    async up(db) {
      await db.schema
        .createTable('reviews')
        .addColumn('id', 'text', (c) => c.primaryKey())
        .addColumn('test_id', 'text', (c) => c.notNull().references('tests.id'))
        .addColumn('version', 'integer', (c) => c.notNull())
        .addColumn('made_at', 'text', (c) => c.notNull())
        .addColumn('made_by', 'text', (c) => c.notNull())
        .addColumn('note', 'text')
        .execute();
      await db.schema.createIndex('reviews_of_test').on('reviews').columns(['test_id', 'id']).execute();
      await db.schema
        .alterTable('tests')
        .addColumn('reviewed', 'integer', (c) => c.notNull().defaultTo(0))
        .execute();
      await db.schema.createIndex('tests_by_review').on('tests').columns(['reviewed', 'sort_date', 'id']).execute();
    },
  },
};

/**
 * Substring search over all tests. SQLite keeps the pieces of three letters of every text in an index of its own (FTS5,
 * tokenizer "trigram"), kept in step with the tests; it names tests by their rowid, so that the file must never be
 * vacuumed. Elsewhere the search compares the text itself.
 */
async function createTextIndex(db: Kysely<unknown>): Promise<void> {
  if (!isSqlite(db)) return;
  for (const statement of [
    `create virtual table tests_text using fts5(search_text, content='tests', content_rowid='rowid', tokenize='trigram')`,
    `insert into tests_text(tests_text) values ('rebuild')`,
    `create trigger tests_text_added after insert on tests begin
       insert into tests_text(rowid, search_text) values (new.rowid, new.search_text);
     end`,
    `create trigger tests_text_changed after update of search_text on tests
     when old.search_text is not new.search_text begin
       insert into tests_text(tests_text, rowid, search_text) values ('delete', old.rowid, old.search_text);
       insert into tests_text(rowid, search_text) values (new.rowid, new.search_text);
     end`,
  ]) {
    await sql.raw(statement).execute(db);
  }
}

/**
 * Made one by one, by a trigger, the pieces of a text cost five times as much as made for many texts at once, which
 * `indexTexts` does at the end of every transaction that adds tests. The setting says up to which rowid they are made.
 */
async function indexTextsTogether(db: Kysely<unknown>): Promise<void> {
  if (!isSqlite(db)) return;
  for (const statement of [
    'drop trigger tests_text_added',
    'drop trigger tests_text_changed',
    `insert into settings(name, value) select '${INDEXED_TO}', coalesce(max(rowid), 0) from tests`,
    `create trigger tests_text_changed after update of search_text on tests
     when old.search_text is not new.search_text
       and old.rowid <= (select cast(value as integer) from settings where name = '${INDEXED_TO}')
     begin
       insert into tests_text(tests_text, rowid, search_text) values ('delete', old.rowid, old.search_text);
       insert into tests_text(rowid, search_text) values (new.rowid, new.search_text);
     end`,
  ]) {
    await sql.raw(statement).execute(db);
  }
}

/** Brings a database to the newest form. @throws the error of the step that failed; that step left nothing behind */
export async function migrateToLatest(db: Kysely<StoreSchema>): Promise<void> {
  const migrator = new Migrator({ db, provider: { getMigrations: async () => ({ ...MIGRATIONS }) } });
  const { error } = await migrator.migrateToLatest();
  if (error) throw error;
}
