import { crc32, deflateRawSync } from 'node:zlib';

/** One entry of an archive made for a test; what is not stated is as an honest archive has it. */
export interface ZipEntry {
  readonly name: string;
  readonly bytes: Uint8Array;
  readonly deflate?: boolean;
  /** General-purpose flags; bit 0 says encrypted. Default: names in UTF-8. */
  readonly flags?: number;
  readonly method?: number;
  /** The size the archive claims, when it lies. */
  readonly claimedBytes?: number;
  /** The checksum the archive claims, when it lies. */
  readonly claimedCrc?: number;
}

const LOCAL = 0x04034b50;
const CENTRAL = 0x02014b50;
const END = 0x06054b50;

function header(signature: number, entry: ZipEntry, packed: Uint8Array, offset: number): Buffer {
  const name = Buffer.from(entry.name);
  const central = signature === CENTRAL;
  const fixed = Buffer.alloc(central ? 46 : 30);
  fixed.writeUInt32LE(signature, 0);
  let at = 4;
  if (central) at = fixed.writeUInt16LE(20, at);
  at = fixed.writeUInt16LE(20, at);
  at = fixed.writeUInt16LE(entry.flags ?? 0x0800, at);
  at = fixed.writeUInt16LE(entry.method ?? (entry.deflate ? 8 : 0), at);
  at = fixed.writeUInt32LE(0, at);
  at = fixed.writeUInt32LE(entry.claimedCrc ?? crc32(entry.bytes), at);
  at = fixed.writeUInt32LE(packed.length, at);
  at = fixed.writeUInt32LE(entry.claimedBytes ?? entry.bytes.length, at);
  fixed.writeUInt16LE(name.length, at);
  if (central) fixed.writeUInt32LE(offset, 42);
  return Buffer.concat([fixed, name]);
}

/** A zip archive by the letter of APPNOTE 6.3, written by hand so that it can also be wrong. */
export function zipArchive(entries: readonly ZipEntry[]): Buffer {
  const parts: Buffer[] = [];
  const directory: Buffer[] = [];
  let offset = 0;
  for (const entry of entries) {
    const packed = entry.deflate ? deflateRawSync(entry.bytes, { level: 9 }) : Buffer.from(entry.bytes);
    const local = Buffer.concat([header(LOCAL, entry, packed, 0), packed]);
    directory.push(header(CENTRAL, entry, packed, offset));
    parts.push(local);
    offset += local.length;
  }
  const central = Buffer.concat(directory);
  const end = Buffer.alloc(22);
  end.writeUInt32LE(END, 0);
  end.writeUInt16LE(entries.length & 0xffff, 8);
  end.writeUInt16LE(entries.length & 0xffff, 10);
  end.writeUInt32LE(central.length, 12);
  end.writeUInt32LE(offset, 16);
  return Buffer.concat([...parts, central, end]);
}
