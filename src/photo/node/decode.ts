import ExifReader from 'exifreader';
import { fileTypeFromBuffer } from 'file-type';
import sharp, { type Sharp } from 'sharp';
import { type Picture, pictureFromRgb } from '../picture.ts';

/** Largest photo taken in, pixels (decoding takes three bytes each). */
export const MOST_PIXELS = 60_000_000;

const PHOTO_TYPES = new Set([
  'image/jpeg',
  'image/png',
  'image/webp',
  'image/tiff',
  'image/gif',
  'image/heic',
  'image/heif',
  'image/avif',
]);

/** A photo opened for measuring; pixels are decoded on demand, upright, 8-bit sRGB. */
export interface OpenPhoto {
  /** Size of the upright photo, px. */
  readonly widthPx: number;
  readonly heightPx: number;
  /** Focal length over the long side of the photo as the photo's EXIF data state it (35-mm equivalent over 36 mm); else null. */
  readonly focalOverLongSide: number | null;
  /** The whole photo with its long side at most `longSidePx`. */
  whole(longSidePx: number): Promise<Picture>;
  /** A window of the upright photo, `scale` picture px per photo px (≤ 1). */
  part(leftPx: number, topPx: number, widthPx: number, heightPx: number, scale: number): Promise<Picture>;
}

export type OpenOutcome =
  | { readonly outcome: 'open'; readonly photo: OpenPhoto }
  | {
      readonly outcome: 'refused';
      readonly code: 'not-a-photo' | 'too-many-pixels';
      readonly message: string;
      readonly widthPx?: number;
      readonly heightPx?: number;
    };

const refused = (code: 'not-a-photo' | 'too-many-pixels', message: string, size: object = {}): OpenOutcome => ({
  outcome: 'refused',
  code,
  message,
  ...size,
});

/** Opens photo bytes: type by content (never by name), size checked before any pixel is decoded. */
export async function openPhoto(bytes: Uint8Array): Promise<OpenOutcome> {
  if (bytes.length === 0) return refused('not-a-photo', 'the file is empty; take the photo again');
  const type = await fileTypeFromBuffer(bytes).catch(() => undefined);
  if (type === undefined || !PHOTO_TYPES.has(type.mime)) {
    return refused(
      'not-a-photo',
      `the file holds ${type === undefined ? 'no picture of a known kind' : type.mime}; expected JPEG, PNG, WebP, TIFF or HEIC`,
    );
  }
  let input: Uint8Array = bytes;
  let raw: { width: number; height: number; channels: 4 } | undefined;
  if (type.mime === 'image/heic' || type.mime === 'image/heif') {
    const decoded = await decodeHeic(bytes);
    if (decoded === null) return refused('not-a-photo', 'the HEIC photo cannot be decoded; it is damaged or cut short');
    if (decoded === 'too-many-pixels')
      return refused('too-many-pixels', `the photo has more than ${MOST_PIXELS / 1e6} megapixels`);
    input = decoded.data;
    raw = { width: decoded.width, height: decoded.height, channels: 4 };
  }
  const base = () =>
    sharp(input, { limitInputPixels: MOST_PIXELS, failOn: 'warning', ...(raw === undefined ? {} : { raw }) });
  let widthPx: number;
  let heightPx: number;
  try {
    // The size comes from the header, so a giant is refused before any pixel is decoded.
    const meta = await sharp(input, { limitInputPixels: false, ...(raw === undefined ? {} : { raw }) }).metadata();
    widthPx = meta.autoOrient?.width ?? meta.width;
    heightPx = meta.autoOrient?.height ?? meta.pageHeight ?? meta.height;
    if (!(widthPx > 0 && heightPx > 0)) throw new Error('no size');
  } catch {
    return refused('not-a-photo', 'the picture has no readable header; it is damaged or cut short');
  }
  const size = { widthPx, heightPx };
  if (widthPx * heightPx > MOST_PIXELS) {
    return refused(
      'too-many-pixels',
      `the photo has ${widthPx} × ${heightPx} px, at most ${MOST_PIXELS / 1e6} megapixels are taken; scale it down`,
      size,
    );
  }
  const upright = () => base().autoOrient().flatten({ background: '#808080' }).toColourspace('srgb');
  const toPicture = async (pipeline: Sharp, scale: number): Promise<Picture> => {
    const { data, info } = await pipeline.removeAlpha().raw({ depth: 'uchar' }).toBuffer({ resolveWithObject: true });
    return pictureFromRgb(rgbOf(data, info.width * info.height, info.channels), info.width, info.height, scale);
  };
  return {
    outcome: 'open',
    photo: {
      widthPx,
      heightPx,
      focalOverLongSide: focalOf(bytes),
      async whole(longSidePx) {
        const longSide = Math.max(widthPx, heightPx);
        if (longSide <= longSidePx) return toPicture(upright(), 1);
        const scale = longSidePx / longSide;
        const width = Math.round(widthPx * scale);
        return toPicture(upright().resize({ width, kernel: 'linear', fastShrinkOnLoad: true }), width / widthPx);
      },
      async part(leftPx, topPx, partWidthPx, partHeightPx, scale) {
        const window = upright().extract({ left: leftPx, top: topPx, width: partWidthPx, height: partHeightPx });
        return toPicture(
          scale >= 1
            ? window
            : window.resize({ width: Math.max(1, Math.round(partWidthPx * scale)), kernel: 'linear' }),
          Math.min(1, scale),
        );
      },
    },
  };
}

function rgbOf(data: Uint8Array, pixels: number, channels: number): Uint8Array {
  if (channels === 3) return data;
  const rgb = new Uint8Array(3 * pixels);
  for (let i = 0; i < pixels; i++) {
    for (let k = 0; k < 3; k++) rgb[3 * i + k] = data[i * channels + (channels >= 3 ? k : 0)] as number;
  }
  return rgb;
}

async function decodeHeic(
  bytes: Uint8Array,
): Promise<{ data: Uint8Array; width: number; height: number } | 'too-many-pixels' | null> {
  try {
    const { default: heic } = await import('heic-decode');
    const [first] = await heic.all({ buffer: bytes });
    if (first === undefined) return null;
    if (first.width * first.height > MOST_PIXELS) return 'too-many-pixels';
    const image = await first.decode();
    return {
      data: new Uint8Array(image.data.buffer, image.data.byteOffset, image.data.byteLength),
      width: image.width,
      height: image.height,
    };
  } catch {
    return null;
  }
}

/** A focal length outside what lenses have is a wrong entry. */
const SHORTEST_FOCAL_MM = 12;
const LONGEST_FOCAL_MM = 600;

function focalOf(bytes: Uint8Array): number | null {
  try {
    const tag = ExifReader.load(
      bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength),
    ).FocalLengthIn35mmFilm;
    const mm = typeof tag?.value === 'number' ? tag.value : Number.NaN;
    return mm >= SHORTEST_FOCAL_MM && mm <= LONGEST_FOCAL_MM ? mm / 36 : null;
  } catch {
    return null;
  }
}
