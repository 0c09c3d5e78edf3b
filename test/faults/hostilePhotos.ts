import { crc32, deflateSync } from 'node:zlib';
import sharp from 'sharp';
import { brokenBarPng } from '../server/drawnPhotos.ts';

/** A file as somebody could send it, and what must become of it. */
export interface HostilePhoto {
  readonly what: string;
  readonly name: string;
  readonly bytes: Uint8Array;
  /** Refused at the door with this code, or kept and not measured with one of these reasons, or measured. */
  readonly expected:
    | { readonly refused: 'not-a-photo' }
    | { readonly notMeasured: readonly string[] }
    | { readonly measuredDeg: number };
}

const text = (content: string): Uint8Array => new TextEncoder().encode(content);

function chunk(type: string, data: Uint8Array): Buffer {
  const body = Buffer.concat([Buffer.from(type, 'latin1'), data]);
  const length = Buffer.alloc(4);
  length.writeUInt32BE(data.length);
  const check = Buffer.alloc(4);
  check.writeUInt32BE(crc32(body));
  return Buffer.concat([length, body, check]);
}

/** A PNG that claims a size in its header; `data` is what follows as pixels. */
function pngOfSize(widthPx: number, heightPx: number, data: Uint8Array = new Uint8Array(0)): Buffer {
  const header = Buffer.alloc(13);
  header.writeUInt32BE(widthPx, 0);
  header.writeUInt32BE(heightPx, 4);
  header.set([8, 0, 0, 0, 0], 8);
  return Buffer.concat([
    Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]),
    chunk('IHDR', header),
    chunk('IDAT', deflateSync(data)),
    chunk('IEND', new Uint8Array(0)),
  ]);
}

/** Damages bytes in the middle, as a bad card reader does. */
function damaged(bytes: Uint8Array): Buffer {
  const copy = Buffer.from(bytes);
  const middle = Math.floor(copy.length / 2);
  for (let i = middle; i < middle + 64; i++) copy[i] = (copy[i] ?? 0) ^ 0xa5;
  return copy;
}

/** Everything that has been sent to a service that wanted a photo. */
export async function hostilePhotos(): Promise<HostilePhoto[]> {
  const helix = await brokenBarPng({ planeAngleDeg: 45 });
  const open = () => sharp(helix).toColourspace('srgb');
  const jpeg = await open().jpeg({ quality: 92 }).toBuffer();
  const refused = { refused: 'not-a-photo' } as const;
  const frames = await Promise.all(
    ['#222', '#ddd'].map((background) =>
      sharp({ create: { width: 200, height: 200, channels: 3, background } })
        .png()
        .toBuffer(),
    ),
  );
  const gif = await sharp(frames, { join: { animated: true } })
    .gif()
    .toBuffer();
  const broken = ['not-a-photo'];
  return [
    { what: 'an empty file', name: 'empty.jpg', bytes: new Uint8Array(0), expected: refused },
    { what: 'text named .jpg', name: 'notes.jpg', bytes: text('specimen 7, broke at the shoulder'), expected: refused },
    { what: 'zeros', name: 'zeros.jpg', bytes: new Uint8Array(100_000), expected: refused },
    {
      what: 'a web page named .png',
      name: 'page.png',
      bytes: text('<!doctype html><script>alert(1)</script>'),
      expected: refused,
    },
    {
      what: 'an SVG with a script',
      name: 'x.svg',
      bytes: text('<svg xmlns="http://www.w3.org/2000/svg"><script>1</script></svg>'),
      expected: refused,
    },
    { what: 'a PDF named .jpg', name: 'scan.jpg', bytes: text('%PDF-1.7\n1 0 obj\n<<>>\nendobj\n'), expected: refused },
    {
      what: 'a program named .jpg',
      name: 'run.jpg',
      bytes: Buffer.concat([Buffer.from([0x7f, 0x45, 0x4c, 0x46, 2, 1, 1]), Buffer.alloc(64)]),
      expected: refused,
    },
    { what: 'an animated GIF', name: 'moving.gif', bytes: gif, expected: refused },
    {
      what: 'the first bytes of a JPEG and no more',
      name: 'start.jpg',
      bytes: jpeg.subarray(0, 20),
      expected: { notMeasured: broken },
    },
    {
      what: 'a JPEG cut off in its header',
      name: 'head.jpg',
      bytes: jpeg.subarray(0, 300),
      expected: { notMeasured: broken },
    },
    {
      what: 'a JPEG cut off half way',
      name: 'half.jpg',
      bytes: jpeg.subarray(0, Math.floor(jpeg.length / 2)),
      expected: { notMeasured: broken },
    },
    {
      what: 'a PNG cut off half way',
      name: 'half.png',
      bytes: helix.subarray(0, Math.floor(helix.length / 2)),
      expected: { notMeasured: broken },
    },
    { what: 'a PNG damaged in the middle', name: 'bad.png', bytes: damaged(helix), expected: { notMeasured: broken } },
    {
      what: 'a PNG that claims 50,000 × 50,000 pixels',
      name: 'huge.png',
      bytes: pngOfSize(50_000, 50_000),
      expected: { notMeasured: ['too-many-pixels'] },
    },
    {
      what: 'a small PNG that unpacks to 100 megapixels',
      name: 'bomb.png',
      bytes: pngOfSize(10_000, 10_000, Buffer.alloc(10_001 * 10_000)),
      expected: { notMeasured: ['too-many-pixels'] },
    },
    { what: 'a PNG of no width', name: 'none.png', bytes: pngOfSize(0, 100), expected: { notMeasured: broken } },
    {
      what: 'a PNG without its pixels',
      name: 'nopixels.png',
      bytes: pngOfSize(800, 600),
      expected: { notMeasured: broken },
    },
    {
      what: 'a photo of 64 × 64 pixels',
      name: 'tiny.png',
      bytes: await open().resize(64, 64, { fit: 'fill' }).png().toBuffer(),
      expected: { notMeasured: ['too-small', 'no-specimen'] },
    },
    {
      what: 'one pixel',
      name: 'one.png',
      bytes: await open().resize(1, 1).png().toBuffer(),
      expected: { notMeasured: ['too-small', 'no-specimen'] },
    },
    {
      what: 'an all-black photo',
      name: 'black.png',
      bytes: await sharp({ create: { width: 800, height: 600, channels: 3, background: '#000' } })
        .png()
        .toBuffer(),
      expected: { notMeasured: ['too-dark', 'no-specimen'] },
    },
    {
      what: 'an all-white photo',
      name: 'white.png',
      bytes: await sharp({ create: { width: 800, height: 600, channels: 3, background: '#fff' } })
        .png()
        .toBuffer(),
      expected: { notMeasured: ['over-exposed', 'no-specimen'] },
    },
    { what: 'a plain JPEG, for comparison', name: 'plain.jpg', bytes: jpeg, expected: { measuredDeg: 45 } },
    {
      what: 'a JPEG with text behind its end',
      name: 'tail.jpg',
      bytes: Buffer.concat([jpeg, text('<?php 1; ?>')]),
      expected: { measuredDeg: 45 },
    },
    {
      what: 'a CMYK JPEG',
      name: 'cmyk.jpg',
      bytes: await open().toColourspace('cmyk').jpeg({ quality: 92 }).toBuffer(),
      expected: { measuredDeg: 45 },
    },
    {
      what: 'a PNG of 16 bits',
      name: 'deep.png',
      bytes: await sharp(helix).toColourspace('rgb16').png().toBuffer(),
      expected: { measuredDeg: 45 },
    },
    {
      what: 'a TIFF of 16 bits',
      name: 'deep.tif',
      bytes: await sharp(helix).toColourspace('rgb16').tiff().toBuffer(),
      expected: { measuredDeg: 45 },
    },
    {
      what: 'a WebP',
      name: 'photo.webp',
      bytes: await open().webp({ quality: 92 }).toBuffer(),
      expected: { measuredDeg: 45 },
    },
    {
      what: 'a see-through PNG',
      name: 'alpha.png',
      bytes: await open().ensureAlpha(0.9).png().toBuffer(),
      expected: { measuredDeg: 45 },
    },
    // Turning a photo changes nothing (the angle is measured against the axis); mirroring flips the sign.
    {
      what: 'a JPEG that EXIF turns by a quarter',
      name: 'turned.jpg',
      bytes: await open().jpeg({ quality: 92 }).withMetadata({ orientation: 6 }).toBuffer(),
      expected: { measuredDeg: 45 },
    },
    {
      what: 'a JPEG that EXIF turns upside down',
      name: 'over.jpg',
      bytes: await open().jpeg({ quality: 92 }).withMetadata({ orientation: 3 }).toBuffer(),
      expected: { measuredDeg: 45 },
    },
    {
      what: 'a JPEG that EXIF mirrors',
      name: 'mirrored.jpg',
      bytes: await open().jpeg({ quality: 92 }).withMetadata({ orientation: 2 }).toBuffer(),
      expected: { measuredDeg: -45 },
    },
    { what: 'a photo named like a path', name: '../../../etc/passwd', bytes: jpeg, expected: { measuredDeg: 45 } },
  ];
}
