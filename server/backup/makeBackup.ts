import { randomUUID } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { readdir, rm, stat } from 'node:fs/promises';
import { join } from 'node:path';
import Database from 'better-sqlite3';
import type { DataFolder } from '../store/dataFolder.ts';
import type { LaboratoryStore } from '../store/laboratoryStore.ts';
import { photoFilePath, sha256OfFile } from '../store/photoFiles.ts';
import { copyDatabase } from './copyDatabase.ts';
import { type BackupManifest, DATABASE, MANIFEST } from './manifest.ts';
import { tarEnd, tarHeader, tarPadding } from './tar.ts';

/** A file of the backup and where its bytes are now. */
interface Part {
  readonly path: string;
  readonly source: string;
  readonly bytes: number;
  readonly sha256: string;
}

const sizeOf = async (path: string): Promise<number> => (await stat(path)).size;

function photosIn(databaseCopy: string): string[] {
  const copy = new Database(databaseCopy, { readonly: true });
  try {
    return copy.prepare<[], string>('select distinct sha256 from photos order by sha256').pluck().all();
  } finally {
    copy.close();
  }
}

async function partsOf(folder: DataFolder, databaseCopy: string): Promise<Part[]> {
  const parts: Part[] = [
    {
      path: DATABASE,
      source: databaseCopy,
      bytes: await sizeOf(databaseCopy),
      sha256: await sha256OfFile(databaseCopy),
    },
  ];
  for (const sha256 of photosIn(databaseCopy)) {
    const source = photoFilePath(folder, sha256);
    const path = `photos/${sha256.slice(0, 2)}/${sha256.slice(2, 4)}/${sha256}`;
    parts.push({ path, source, bytes: await sizeOf(source), sha256 });
  }
  for (const name of (await readdir(folder.imports)).sort()) {
    const source = join(folder.imports, name);
    parts.push({ path: `imports/${name}`, source, bytes: await sizeOf(source), sha256: await sha256OfFile(source) });
  }
  return parts;
}

/**
 * Everything the laboratory keeps as one tar archive: manifest with checksums, database (with all history), photos,
 * refused rows. The database is copied as of one moment while the store goes on working; photos are never changed or
 * taken away, so that those the copy names are all there.
 */
export async function* makeBackup(
  store: LaboratoryStore,
  programVersion: string,
  onFile: (file: BackupManifest['files'][number]) => void = () => {},
): AsyncGenerator<Uint8Array> {
  const databaseCopy = join(store.folder.incoming, `backup-${randomUUID()}.sqlite`);
  const nowMs = Date.now();
  try {
    await copyDatabase(store.folder.database, databaseCopy);
    const parts = await partsOf(store.folder, databaseCopy);
    const manifest: BackupManifest = {
      format: 'breakplane-backup-1',
      madeAt: new Date(nowMs).toISOString(),
      programVersion,
      files: parts.map(({ path, bytes, sha256 }) => ({ path, bytes, sha256 })),
    };
    const text = Buffer.from(JSON.stringify(manifest, null, 1));
    yield Buffer.concat([tarHeader({ path: MANIFEST, bytes: text.length }, nowMs), text, tarPadding(text.length)]);
    for (const { path, source, bytes, sha256 } of parts) {
      onFile({ path, bytes, sha256 });
      yield tarHeader({ path, bytes }, nowMs);
      let seen = 0;
      for await (const chunk of createReadStream(source, { highWaterMark: 256 * 1024 })) {
        seen += chunk.length;
        yield chunk;
      }
      if (seen !== bytes) throw new Error(`${path} changed while it was backed up`);
      yield tarPadding(bytes);
    }
    yield tarEnd();
  } finally {
    for (const suffix of ['', '-wal', '-shm', '-journal']) await rm(`${databaseCopy}${suffix}`, { force: true });
  }
}
