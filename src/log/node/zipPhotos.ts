import { createWriteStream } from 'node:fs';
import { basename } from 'node:path';
import { Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { crc32 } from 'node:zlib';
import { type Entry, getFileNameLowLevel, openPromise, validateFileName, type ZipFile } from 'yauzl';
import { LabError } from '../../errors.ts';
import {
  isHidden,
  LARGEST_PHOTO_BYTES,
  MOST_PHOTOS,
  notPhotos,
  type PhotoFile,
  type PhotoSource,
} from './photoSource.ts';

/** A photo hardly shrinks in an archive; an entry that grows more than this when unpacked is made to fill the disk. */
const LARGEST_GROWTH = 200;
const STORED = 0;
const DEFLATED = 8;

const reasonOf = (error: unknown): string => (error instanceof Error ? error.message : String(error));

/** Why an entry is not looked at, or null. */
function whyLeftOut(entry: Entry, innerPath: string): string | null {
  if (innerPath.includes('\0') || validateFileName(innerPath) !== null) return 'its name leads out of the archive';
  if (entry.isEncrypted()) return 'it is encrypted';
  if (entry.compressionMethod !== STORED && entry.compressionMethod !== DEFLATED) return 'its packing is not known';
  const { compressedSize, uncompressedSize } = entry;
  if (uncompressedSize > LARGEST_PHOTO_BYTES) return `it would unpack to ${uncompressedSize} bytes`;
  const growth = uncompressedSize / Math.max(compressedSize, 1);
  return uncompressedSize > 1024 * 1024 && growth > LARGEST_GROWTH
    ? `it would grow ${Math.round(growth)}-fold when unpacked`
    : null;
}

/** Passes bytes on only while they are what the archive says they are: no more of them, no fewer, with the right checksum. */
function asStated({ uncompressedSize, crc32: checksum }: Entry, name: string): Transform {
  let seen = 0;
  let crc = 0;
  return new Transform({
    transform(chunk: Buffer, _encoding, done) {
      seen += chunk.length;
      crc = crc32(chunk, crc);
      if (seen > uncompressedSize) done(damaged(name, `more than the ${uncompressedSize} bytes it claims`));
      else done(null, chunk);
    },
    flush(done) {
      if (seen < uncompressedSize) done(damaged(name, `${seen} bytes instead of the ${uncompressedSize} it claims`));
      else if (crc !== checksum) done(damaged(name, 'bytes with a wrong checksum'));
      else done();
    },
  });
}

const damaged = (name: string, why: string): LabError =>
  new LabError('not-a-photo', `photo must unpack whole from the archive, got "${name}" with ${why}`, {
    input: 'photo',
    value: name,
  });

async function copyEntry(zip: ZipFile, entry: Entry, name: string, to: string): Promise<void> {
  try {
    const stream = await zip.openReadStreamPromise(entry);
    await pipeline(stream, asStated(entry, name), createWriteStream(to, { flags: 'wx' }));
  } catch (error) {
    if (error instanceof LabError) throw error;
    throw damaged(name, reasonOf(error));
  }
}

interface Contents {
  readonly files: PhotoFile[];
  readonly refused: { name: string; message: string }[];
}

async function contentsOf(zip: ZipFile, archive: string): Promise<Contents> {
  const contents: Contents = { files: [], refused: [] };
  let seen = 0;
  for await (const entry of zip.eachEntry()) {
    if (++seen > MOST_PHOTOS) {
      contents.refused.push({ name: archive, message: `only the first ${MOST_PHOTOS} entries were looked at` });
      break;
    }
    const innerPath = getFileNameLowLevel(entry.generalPurposeBitFlag, entry.fileNameRaw, entry.extraFields, false);
    const parts = innerPath.split('/');
    if (innerPath.endsWith('/') || parts.some((part) => part !== '..' && isHidden(part))) continue;
    const why = whyLeftOut(entry, innerPath);
    if (why !== null) {
      contents.refused.push({ name: innerPath, message: why });
      continue;
    }
    contents.files.push({
      fileName: parts.at(-1) ?? innerPath,
      innerPath,
      bytes: entry.uncompressedSize,
      copyTo: (to) => copyEntry(zip, entry, innerPath, to),
    });
  }
  return contents;
}

/**
 * Photos of a zip archive. Entries that lead out of it, are encrypted or grow absurdly are left out and named.
 * @throws LabError `invalid-request` for a file that is no whole archive
 */
export async function openZipPhotos(path: string): Promise<PhotoSource> {
  const archive = basename(path);
  const zip = await openPromise(path, {
    lazyEntries: true,
    autoClose: false,
    // Names are looked at one by one (see `whyLeftOut`): a bad one costs its entry, not the archive.
    decodeStrings: false,
    // So are sizes and checksums (see `asStated`).
    validateEntrySizes: false,
  }).catch((error: unknown) => {
    throw notPhotos(archive, reasonOf(error));
  });
  try {
    return { ...(await contentsOf(zip, archive)), close: () => zip.close() };
  } catch (error) {
    zip.close();
    throw error instanceof LabError ? error : notPhotos(archive, reasonOf(error));
  }
}
