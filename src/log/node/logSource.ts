import { createReadStream } from 'node:fs';
import { stat } from 'node:fs/promises';
import { basename } from 'node:path';
import { LabError } from '../../errors.ts';

/** The bytes of a test log. It is opened twice: once to see how it is written, once to read its rows. */
export interface LogSource {
  /** Name for messages, without folders. */
  readonly name: string;
  readonly bytes: number;
  open(): AsyncIterable<Uint8Array>;
}

/** A log file on disk. @throws LabError `not-a-log` when it cannot be read */
export async function logFile(path: string, name: string = basename(path)): Promise<LogSource> {
  let bytes: number;
  try {
    const found = await stat(path);
    if (!found.isFile()) throw new LabError('not-a-log', `log must be a file, got "${path}"`, { input: path });
    bytes = found.size;
  } catch (error) {
    if (error instanceof LabError) throw error;
    const code = error instanceof Error && 'code' in error ? String(error.code) : '';
    const why = code === 'ENOENT' ? 'there is no such file' : code;
    throw new LabError('not-a-log', `log must be a file that can be read, got "${path}": ${why}`, { input: path });
  }
  return { name, bytes, open: () => createReadStream(path, { highWaterMark: 256 * 1024 }) };
}

/** A log that is held in memory, such as a small one typed or pasted. */
export function logFromBytes(bytes: Uint8Array, name: string): LogSource {
  return {
    name,
    bytes: bytes.length,
    async *open() {
      yield bytes;
    },
  };
}
