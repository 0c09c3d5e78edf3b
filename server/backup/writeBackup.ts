import { createWriteStream } from 'node:fs';
import { access, rename, rm } from 'node:fs/promises';
import { pipeline } from 'node:stream/promises';
import { LabError } from '../../src/errors.ts';
import { openStore } from '../store/openStore.ts';
import { makeBackup } from './makeBackup.ts';

export interface WrittenBackup {
  readonly files: number;
  readonly bytes: number;
}

const exists = (path: string): Promise<boolean> =>
  access(path).then(
    () => true,
    () => false,
  );

/**
 * Backs a data folder up into a new file, which appears when it is whole.
 * @throws LabError `not-found` without a laboratory, `already-exists` for a file that is there, `busy` while a service uses the folder
 */
export async function writeBackup(dataDir: string, archive: string, programVersion: string): Promise<WrittenBackup> {
  if (!(await exists(`${dataDir}/laboratory.sqlite`))) {
    throw new LabError('not-found', `the data folder must hold a laboratory, got "${dataDir}"`, {
      input: '--data',
      value: dataDir,
    });
  }
  if (await exists(archive)) {
    throw new LabError('already-exists', `the archive must be a new file, got "${archive}", which is there`, {
      input: 'archive',
      value: archive,
    });
  }
  const part = `${archive}.part`;
  const store = await openStore(dataDir);
  try {
    const written = { files: 0, bytes: 0 };
    await pipeline(
      makeBackup(store, programVersion, (file) => {
        written.files += 1;
        written.bytes += file.bytes;
      }),
      createWriteStream(part, { flush: true }),
    );
    await rename(part, archive);
    return written;
  } catch (error) {
    await rm(part, { force: true });
    throw error;
  } finally {
    await store.close();
  }
}
