import { LabError } from '../../src/errors.ts';

/** One file of an archive. */
export interface TarEntry {
  /** Path inside the archive, at most 100 bytes. */
  readonly path: string;
  readonly bytes: number;
}

const BLOCK = 512;
const CHECKSUM_AT = 148;

/** Bytes that fill the last block of a file. */
export const tarPadding = (bytes: number): Buffer => Buffer.alloc((BLOCK - (bytes % BLOCK)) % BLOCK);

/** What ends an archive. */
export const tarEnd = (): Buffer => Buffer.alloc(2 * BLOCK);

function checksumOf(header: Uint8Array): number {
  let sum = 0;
  for (const [i, byte] of header.entries()) sum += i >= CHECKSUM_AT && i < CHECKSUM_AT + 8 ? 0x20 : byte;
  return sum;
}

/** Header of a file in the ustar form of IEEE Std 1003.1 (pax, "ustar Interchange Format"). */
export function tarHeader({ path, bytes }: TarEntry, modifiedMs: number): Buffer {
  const header = Buffer.alloc(BLOCK);
  if (Buffer.byteLength(path) > 100) throw new Error(`a path in the archive is too long: ${path}`);
  const octal = (value: number, length: number): string => `${value.toString(8).padStart(length - 1, '0')}\0`;
  header.write(path, 0, 'utf8');
  header.write(octal(0o644, 8), 100);
  header.write(octal(0, 8), 108);
  header.write(octal(0, 8), 116);
  header.write(octal(bytes, 12), 124);
  header.write(octal(Math.floor(modifiedMs / 1000), 12), 136);
  header.write('0', 156);
  header.write('ustar\x0000', 257);
  header.write(`${checksumOf(header).toString(8).padStart(6, '0')}\0 `, CHECKSUM_AT);
  return header;
}

const notWhole = (why: string): LabError =>
  new LabError('invalid-request', `the backup must be a whole archive of Breakplane: ${why}`, { input: 'backup' });

function entryOf(header: Buffer): TarEntry {
  const textAt = (from: number, length: number): string => {
    const field = header.subarray(from, from + length);
    const end = field.indexOf(0);
    return field.subarray(0, end < 0 ? length : end).toString('utf8');
  };
  const stated = Number.parseInt(textAt(CHECKSUM_AT, 8).trim(), 8);
  if (stated !== checksumOf(header)) throw notWhole('a header is damaged');
  if (textAt(156, 1) !== '0') throw notWhole('it holds something that is no plain file');
  const bytes = Number.parseInt(textAt(124, 12).trim(), 8);
  if (!Number.isSafeInteger(bytes) || bytes < 0) throw notWhole('a size is damaged');
  return { path: textAt(0, 100), bytes };
}

/**
 * Reads an archive file by file as it comes.
 * @param each gets the entry and its bytes; must read them to the end
 * @throws LabError `invalid-request` for an archive that is damaged or cut short
 */
export async function readTar(
  source: AsyncIterable<Uint8Array>,
  each: (entry: TarEntry, bytes: AsyncIterable<Uint8Array>) => Promise<void>,
): Promise<void> {
  const chunks = source[Symbol.asyncIterator]();
  let rest: Buffer = Buffer.alloc(0);
  /** At most this many bytes; fewer only at the end. */
  const take = async (most: number): Promise<Buffer> => {
    if (rest.length === 0) {
      const next = await chunks.next();
      if (next.done) return Buffer.alloc(0);
      rest = Buffer.from(next.value.buffer, next.value.byteOffset, next.value.byteLength);
    }
    const taken = rest.subarray(0, most);
    rest = rest.subarray(taken.length);
    return taken;
  };
  const takeAll = async (bytes: number): Promise<Buffer> => {
    const parts: Buffer[] = [];
    for (let left = bytes; left > 0; ) {
      const part = await take(left);
      if (part.length === 0) throw notWhole('it ends too early');
      parts.push(part);
      left -= part.length;
    }
    return Buffer.concat(parts);
  };
  for (;;) {
    const header = await takeAll(BLOCK);
    if (header.every((byte) => byte === 0)) return;
    const entry = entryOf(header);
    let left = entry.bytes;
    const bytes = (async function* () {
      while (left > 0) {
        const part = await take(left);
        if (part.length === 0) throw notWhole('it ends too early');
        left -= part.length;
        yield part;
      }
    })();
    await each(entry, bytes);
    if (left > 0) throw new Error('an entry of the archive must be read to its end');
    await takeAll(tarPadding(entry.bytes).length);
  }
}
