import { mkdir, readFile, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import Database from 'better-sqlite3';
import { LabError } from '../../src/errors.ts';

/** Where the parts of a laboratory's data lie. */
export interface DataFolder {
  readonly path: string;
  readonly database: string;
  /** Photos by content: photos/ab/cd/abcd…. */
  readonly photos: string;
  /** Files on their way in; what a crash leaves here is finished or thrown away at the next start. */
  readonly incoming: string;
  /** Refused rows of imported logs. */
  readonly imports: string;
  /** Lets the next process in. */
  unlock(): void;
}

const reasonOf = (error: unknown): string => (error instanceof Error ? error.message : String(error));

/**
 * Takes the folder for this process. The lock is one of the operating system on a small file: it ends with the process,
 * however that ends.
 */
async function lock(path: string): Promise<() => void> {
  const whoFile = join(path, 'in-use.txt');
  let file: Database.Database | undefined;
  try {
    file = new Database(join(path, 'in-use.lock'), { timeout: 0 });
    file.pragma('locking_mode = EXCLUSIVE');
    file.exec('BEGIN EXCLUSIVE');
  } catch (error) {
    file?.close();
    const busy = error instanceof Error && 'code' in error && String(error.code).startsWith('SQLITE_BUSY');
    if (!busy) throw error;
    const who = await readFile(whoFile, 'utf8').catch(() => '');
    throw new LabError(
      'busy',
      `the data folder must be used by one process at a time, got "${path}", which ${who.trim() || 'another process'} is using; stop that one first, or send the work to it`,
      { input: '--data', value: path },
    );
  }
  await writeFile(whoFile, `process ${process.pid}\n`);
  const held = file;
  return () => {
    if (held.open) held.close();
  };
}

/** Opens a data folder, making it where there is none. @throws LabError `invalid-request` for a path that cannot be one, `busy` when another process uses it */
export async function openDataFolder(path: string): Promise<DataFolder> {
  const folder = {
    path,
    database: join(path, 'laboratory.sqlite'),
    photos: join(path, 'photos'),
    incoming: join(path, 'incoming'),
    imports: join(path, 'imports'),
  };
  try {
    for (const part of [folder.photos, folder.incoming, folder.imports]) await mkdir(part, { recursive: true });
    return { ...folder, unlock: await lock(path) };
  } catch (error) {
    if (error instanceof LabError) throw error;
    throw new LabError(
      'invalid-request',
      `the data folder must be a folder that can be written, got "${path}": ${reasonOf(error)}`,
      {
        input: '--data',
        value: path,
      },
    );
  }
}
