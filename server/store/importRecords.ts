import type { Kysely } from 'kysely';
import { LabError } from '../../src/errors.ts';
import type { StoreSchema } from './schema.ts';

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

export async function keepImport(db: Kysely<StoreSchema>, record: ImportRecord): Promise<void> {
  await db
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
export async function readImport(db: Kysely<StoreSchema>, id: string): Promise<ImportRecord> {
  const row = await db.selectFrom('imports').selectAll().where('id', '=', id).executeTakeFirst();
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
