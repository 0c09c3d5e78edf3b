import { randomBytes } from 'node:crypto';

let lastMs = 0;
let counter = 0;
/** Chance is fetched for many ids at once: one call for each would cost more than the rest. */
let chancePool = Buffer.alloc(0);

function chanceBytes(): Buffer {
  if (chancePool.length < 8) chancePool = randomBytes(4096);
  const bytes = chancePool.subarray(0, 8);
  chancePool = chancePool.subarray(8);
  return bytes;
}

/**
 * A new id, a UUID of version 7 (RFC 9562, 5.7): milliseconds, then a counter within the millisecond (method 1 of 6.2),
 * then chance. Ids made later sort later, so that they keep the order of records that were made in the same moment.
 */
export function orderedId(nowMs: number = Date.now()): string {
  if (nowMs > lastMs) {
    lastMs = nowMs;
    counter = 0;
  } else if (++counter > 0xfff) {
    lastMs++;
    counter = 0;
  }
  const time = lastMs.toString(16).padStart(12, '0');
  const chance = chanceBytes();
  chance[0] = ((chance[0] ?? 0) & 0x3f) | 0x80;
  const tail = chance.toString('hex');
  const count = counter.toString(16).padStart(3, '0');
  return `${time.slice(0, 8)}-${time.slice(8)}-7${count}-${tail.slice(0, 4)}-${tail.slice(4)}`;
}
