import { createHash, randomUUID } from 'node:crypto';
import { createReadStream, createWriteStream } from 'node:fs';
import { mkdir, open, readdir, rename, rm, rmdir } from 'node:fs/promises';
import { basename, dirname, join, resolve } from 'node:path';
import { Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { LabError } from '../../src/errors.ts';
import { BackupManifest, MANIFEST } from './manifest.ts';
import { readTar } from './tar.ts';

/** No manifest is larger, bytes: half a million photos. */
const LARGEST_MANIFEST = 128 * 1024 * 1024;

const notWhole = (why: string): LabError =>
  new LabError('invalid-request', `the backup must be a whole archive of Breakplane: ${why}`, { input: 'backup' });

async function requireEmpty(folder: string): Promise<void> {
  const names = await readdir(folder).catch((error: NodeJS.ErrnoException) => {
    if (error.code === 'ENOENT') return [];
    throw new LabError('invalid-request', `the data folder must be a folder, got "${folder}": ${error.message}`, {
      input: '--data',
      value: folder,
    });
  });
  if (names.length === 0) return;
  throw new LabError(
    'already-exists',
    `a backup must be restored into an empty data folder, got "${folder}", which holds ${names.length} entries`,
    {
      input: '--data',
      value: folder,
    },
  );
}

function manifestOf(text: Buffer): BackupManifest {
  try {
    return BackupManifest.parse(JSON.parse(text.toString('utf8')));
  } catch {
    throw notWhole('its list of contents cannot be read');
  }
}

async function writeChecked(
  bytes: AsyncIterable<Uint8Array>,
  to: string,
  expected: BackupManifest['files'][number],
): Promise<void> {
  await mkdir(dirname(to), { recursive: true });
  const hash = createHash('sha256');
  const watch = new Transform({
    transform(chunk: Buffer, _encoding, done) {
      hash.update(chunk);
      done(null, chunk);
    },
  });
  await pipeline(bytes, watch, createWriteStream(to, { flags: 'wx', flush: true }));
  if (hash.digest('hex') !== expected.sha256) throw notWhole(`${expected.path} does not have its checksum`);
}

export interface RestoredBackup {
  readonly madeAt: string;
  readonly files: number;
  readonly bytes: number;
}

/**
 * Restores a backup into an empty (or not yet existing) data folder. Every file is held against its checksum; the folder
 * appears whole or not at all.
 * @throws LabError `already-exists` for a folder that holds something, `invalid-request` for a damaged archive
 */
export async function restoreBackup(archive: string, dataDir: string): Promise<RestoredBackup> {
  const target = resolve(dataDir);
  await requireEmpty(target);
  const part = join(dirname(target), `.${basename(target)}.${randomUUID()}.restoring`);
  let manifest: BackupManifest | null = null;
  const missing = new Map<string, BackupManifest['files'][number]>();
  try {
    await mkdir(part, { recursive: true });
    await readTar(createReadStream(archive, { highWaterMark: 256 * 1024 }), async (entry, bytes) => {
      if (manifest === null) {
        if (entry.path !== MANIFEST || entry.bytes > LARGEST_MANIFEST)
          throw notWhole('its list of contents must come first');
        const chunks: Uint8Array[] = [];
        for await (const chunk of bytes) chunks.push(chunk);
        manifest = manifestOf(Buffer.concat(chunks));
        for (const file of manifest.files) missing.set(file.path, file);
        return;
      }
      const expected = missing.get(entry.path);
      if (!expected || expected.bytes !== entry.bytes) throw notWhole(`"${entry.path}" is not on its list of contents`);
      await writeChecked(bytes, join(part, entry.path), expected);
      missing.delete(entry.path);
    });
    const found: BackupManifest | null = manifest;
    if (found === null) throw notWhole('it is empty');
    const { files, madeAt } = found as BackupManifest;
    const [first] = missing.keys();
    if (first !== undefined) throw notWhole(`"${first}" is missing`);
    await rmdir(target).catch(() => {});
    await rename(part, target);
    const folder = await open(dirname(target), 'r');
    await folder.sync().finally(() => folder.close());
    return { madeAt, files: files.length, bytes: files.reduce((sum, file) => sum + file.bytes, 0) };
  } catch (error) {
    await rm(part, { recursive: true, force: true });
    if (error instanceof Error && 'code' in error && error.code === 'ENOENT' && !(error instanceof LabError)) {
      throw new LabError('not-found', `the backup must be a file that can be read, got "${archive}"`, {
        input: 'backup',
        value: archive,
      });
    }
    throw error;
  }
}
