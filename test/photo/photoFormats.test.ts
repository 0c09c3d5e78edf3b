import fc from 'fast-check';
import sharp from 'sharp';
import { beforeAll, describe, expect, it } from 'vitest';
import { planeAngleDistanceDeg } from '../../src/angle.ts';
import { measurePhoto } from '../../src/photo/node/measurePhoto.ts';
import { NOT_MEASURED_CODES, PhotoMeasurement } from '../../src/records/reading.ts';
import { easyPair, type RenderedPhoto } from './renderedPhoto.ts';

let photo: RenderedPhoto;
let jpeg: Uint8Array;
let angleDeg: number;

async function measuredAngle(bytes: Uint8Array): Promise<number> {
  const result = await measurePhoto(bytes);
  if (result.outcome !== 'measured') throw new Error(`not measured: ${result.reason.code}, ${result.reason.message}`);
  expect(PhotoMeasurement.safeParse(result).error).toBeUndefined();
  return result.planeAngleDeg;
}

async function refusal(bytes: Uint8Array) {
  const result = await measurePhoto(bytes);
  if (result.outcome !== 'not-measured') throw new Error(`measured ${result.planeAngleDeg}° where nothing can be`);
  expect(NOT_MEASURED_CODES).toContain(result.reason.code);
  expect(result.reason.message.length).toBeGreaterThan(10);
  expect(result.sha256).toMatch(/^[0-9a-f]{64}$/);
  return result.reason;
}

beforeAll(async () => {
  photo = easyPair();
  jpeg = await photo.upright().jpeg({ quality: 95 }).toBuffer();
  angleDeg = await measuredAngle(jpeg);
}, 60_000);

describe('the same photo in other clothes', () => {
  it('is measured to its true angle', () => {
    expect(planeAngleDistanceDeg(angleDeg, photo.trueDeg)).toBeLessThan(2);
  });

  // EXIF 2.32, tag 0x0112: how the stored rows and columns lie in the upright picture.
  it.each([
    [3, 180, false],
    [6, 270, false],
    [8, 90, false],
    [2, 0, true],
    [4, 180, true],
  ] as const)('EXIF orientation %s gives the same angle', async (orientation, turnDeg, flopped) => {
    let stored = sharp(await photo.upright().png().toBuffer());
    if (flopped) stored = sharp(await stored.flop().png().toBuffer());
    const bytes = await stored.rotate(turnDeg).withMetadata({ orientation }).jpeg({ quality: 95 }).toBuffer();
    const result = await measurePhoto(bytes);
    expect(result.widthPx).toBe(photo.plan.scene.camera.widthPx);
    expect(result.heightPx).toBe(photo.plan.scene.camera.heightPx);
    expect(planeAngleDistanceDeg(await measuredAngle(bytes), angleDeg)).toBeLessThan(0.5);
  });

  it.each([90, 180, 270])('turned by %s° without a tag it keeps its angle', async (turnDeg) => {
    const bytes = await sharp(await photo.upright().png().toBuffer())
      .rotate(turnDeg)
      .jpeg({ quality: 95 })
      .toBuffer();
    expect(planeAngleDistanceDeg(await measuredAngle(bytes), angleDeg)).toBeLessThan(0.5);
  });

  it('mirrored it has the other hand', async () => {
    const bytes = await photo.upright().flop().jpeg({ quality: 95 }).toBuffer();
    expect(planeAngleDistanceDeg(await measuredAngle(bytes), -angleDeg)).toBeLessThan(0.5);
  });

  it.each([
    ['PNG', () => photo.upright().png()],
    ['PNG, 16 bit', () => photo.upright().toColourspace('rgb16').png()],
    ['PNG with transparency', () => photo.upright().ensureAlpha(1).png()],
    ['JPEG, grey', () => photo.upright().greyscale().jpeg({ quality: 95 })],
    ['JPEG, CMYK', () => photo.upright().toColourspace('cmyk').jpeg({ quality: 95 })],
    ['JPEG, progressive', () => photo.upright().jpeg({ quality: 90, progressive: true })],
    ['WebP', () => photo.upright().webp({ quality: 92 })],
    ['TIFF', () => photo.upright().tiff({ compression: 'lzw' })],
    ['AVIF', () => photo.upright().avif({ quality: 85, effort: 1 })],
  ] as const)('%s', async (_name, store) => {
    const bytes = await store().toBuffer();
    expect(planeAngleDistanceDeg(await measuredAngle(bytes), angleDeg)).toBeLessThan(1);
  });

  it('of an animated GIF the first frame counts', async () => {
    const first = await photo.upright().png().toBuffer();
    const second = await photo.upright().flop().png().toBuffer();
    const bytes = await sharp([first, second], { join: { animated: true } })
      .gif()
      .toBuffer();
    expect((await sharp(bytes, { animated: true }).metadata()).pages).toBe(2);
    expect(planeAngleDistanceDeg(await measuredAngle(bytes), angleDeg)).toBeLessThan(1.5);
  });
});

describe('what is no photo', () => {
  it.each([
    ['an empty file', () => new Uint8Array(0)],
    ['one byte', () => new Uint8Array([0xff])],
    ['text with the name of a photo', () => new TextEncoder().encode('specimen 12, broke at 45 degrees\n'.repeat(50))],
    ['the head of a JPEG', () => jpeg.subarray(0, 300)],
    ['half a JPEG', () => jpeg.subarray(0, Math.round(jpeg.length / 2))],
    ['a PDF', () => new TextEncoder().encode('%PDF-1.7\n1 0 obj\n<<>>\nendobj\n')],
    [
      'a drawing',
      () => new TextEncoder().encode('<svg xmlns="http://www.w3.org/2000/svg" width="900" height="600"></svg>'),
    ],
  ] as const)('%s is refused as such', async (_name, bytes) => {
    expect((await refusal(bytes())).code).toBe('not-a-photo');
  });

  it('a picture of 50 000 × 50 000 px is refused by its header', async () => {
    const reason = await refusal(pngHeader(50_000, 50_000));
    expect(reason.code).toBe('too-many-pixels');
    expect(reason.message).toMatch(/50.?000/);
  });

  it('any damage of a JPEG ends in an answer', async () => {
    const small = await photo.upright().resize(240).jpeg({ quality: 70 }).toBuffer();
    await fc.assert(
      fc.asyncProperty(
        fc.array(fc.tuple(fc.nat(small.length - 1), fc.nat(255)), { minLength: 1, maxLength: 8 }),
        async (damage) => {
          const bytes = Uint8Array.from(small);
          for (const [at, value] of damage) bytes[at] = value;
          const result = await measurePhoto(bytes);
          expect(PhotoMeasurement.safeParse(result).error).toBeUndefined();
        },
      ),
      { numRuns: 25 },
    );
  }, 60_000);
});

describe('pictures too small for a specimen', () => {
  it('64 × 64 px', async () => {
    await refusal(await photo.upright().resize(64, 64, { fit: 'fill' }).jpeg().toBuffer());
  });

  it.each([1, 2, 9])('%s px across', async (size) => {
    const background = '#777777';
    await refusal(
      await sharp({ create: { width: size, height: size, channels: 3, background } })
        .png()
        .toBuffer(),
    );
  });
});

/** A PNG that is nothing but a header: IHDR with a right checksum, a little data, IEND. */
function pngHeader(widthPx: number, heightPx: number): Uint8Array {
  const chunk = (name: string, data: Uint8Array): Uint8Array => {
    const body = new Uint8Array(4 + data.length);
    body.set(new TextEncoder().encode(name));
    body.set(data, 4);
    const out = new Uint8Array(8 + body.length);
    new DataView(out.buffer).setUint32(0, data.length);
    out.set(body, 4);
    new DataView(out.buffer).setUint32(out.length - 4, crc32(body));
    return out;
  };
  const header = new Uint8Array(13);
  const view = new DataView(header.buffer);
  view.setUint32(0, widthPx);
  view.setUint32(4, heightPx);
  header.set([8, 2, 0, 0, 0], 8);
  const parts = [
    new Uint8Array([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]),
    chunk('IHDR', header),
    chunk('IDAT', new Uint8Array([0x78, 0x9c, 0x63, 0, 0, 0, 1, 0, 1])),
    chunk('IEND', new Uint8Array(0)),
  ];
  const out = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    out.set(part, at);
    at += part.length;
  }
  return out;
}

/** CRC-32 of ISO 3309 as PNG uses it (W3C PNG, annex D). */
function crc32(bytes: Uint8Array): number {
  let crc = 0xffffffff;
  for (const byte of bytes) {
    crc ^= byte;
    for (let bit = 0; bit < 8; bit++) crc = (crc & 1) === 1 ? (crc >>> 1) ^ 0xedb88320 : crc >>> 1;
  }
  return (crc ^ 0xffffffff) >>> 0;
}
