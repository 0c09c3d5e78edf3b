import Database from 'better-sqlite3';
import { Kysely, SqliteDialect } from 'kysely';
import { type DataFolder, openDataFolder } from './dataFolder.ts';
import { LaboratoryStore } from './laboratoryStore.ts';
import { migrateToLatest } from './migrations.ts';
import { recoverIncoming } from './photoFiles.ts';
import type { StoreSchema } from './schema.ts';

/** How long a statement waits for another connection, ms. */
const BUSY_TIMEOUT_MS = 5000;

function openDatabase(folder: DataFolder): { raw: Database.Database; db: Kysely<StoreSchema> } {
  const raw = new Database(folder.database, { timeout: BUSY_TIMEOUT_MS });
  raw.pragma('journal_mode = WAL');
  // A commit is on the disk before it is answered: records of a laboratory survive the plug.
  raw.pragma('synchronous = FULL');
  raw.pragma('foreign_keys = ON');
  raw.pragma('cache_size = -65536');
  // Large imports change the same index pages again and again: they are written back once, not in every batch.
  raw.pragma('wal_autocheckpoint = 10000');
  return { raw, db: new Kysely<StoreSchema>({ dialect: new SqliteDialect({ database: raw }) }) };
}

/**
 * Opens the laboratory's data folder, making it where there is none, and ends what a crash interrupted.
 * @throws LabError `busy` when another process uses the folder, `invalid-request` when it cannot be one
 */
export async function openStore(
  dataDir: string,
  options: { readonly clock?: () => number } = {},
): Promise<LaboratoryStore> {
  const folder = await openDataFolder(dataDir);
  let raw: Database.Database | undefined;
  try {
    const opened = openDatabase(folder);
    raw = opened.raw;
    await migrateToLatest(opened.db);
    const store = new LaboratoryStore({ folder, db: opened.db, raw: opened.raw, clock: options.clock ?? Date.now });
    await recoverIncoming(folder, (sha256) => store.hasPhoto(sha256));
    await store.measuring.resume();
    await store.renewStandings();
    return store;
  } catch (error) {
    raw?.close();
    folder.unlock();
    throw error;
  }
}
