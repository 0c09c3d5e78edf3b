/// <reference path="../../src/photo/node/heic-decode.d.ts" />
import { readFile } from 'node:fs/promises';
import { fileTypeFromBuffer } from 'file-type';
import heic from 'heic-decode';
import sharp, { type Sharp } from 'sharp';

/** A photo to be shown: upright, at most this wide, as JPEG. */
export interface UprightJob {
  readonly path: string;
  readonly widthPx: number;
  /** Larger photos are not shown, pixels. */
  readonly mostPixels: number;
}

export type UprightAnswer =
  | { readonly ok: true; readonly jpeg: Uint8Array }
  | { readonly ok: false; readonly message: string };

async function open(job: UprightJob): Promise<Sharp> {
  const bytes = await readFile(job.path);
  const type = await fileTypeFromBuffer(bytes);
  // A photo that is cut short is shown as far as it goes: a person sees what happened to it.
  const options = { limitInputPixels: job.mostPixels, failOn: 'none' } as const;
  if (type?.mime !== 'image/heic' && type?.mime !== 'image/heif') return sharp(bytes, options).autoOrient();
  const [first] = await heic.all({ buffer: bytes });
  if (!first || first.width * first.height > job.mostPixels) throw new Error('the HEIC photo is damaged or too large');
  const { data, width, height } = await first.decode();
  return sharp(Buffer.from(data.buffer, data.byteOffset, data.byteLength), { raw: { width, height, channels: 4 } });
}

/** Entry of the worker that makes photos fit to be shown. */
export default async function uprightPhoto(job: UprightJob): Promise<UprightAnswer> {
  try {
    const jpeg = await (await open(job))
      .flatten({ background: '#808080' })
      .resize({ width: job.widthPx, withoutEnlargement: true })
      .toColourspace('srgb')
      .jpeg({ quality: 86 })
      .toBuffer();
    return { ok: true, jpeg: new Uint8Array(jpeg) };
  } catch (error) {
    return { ok: false, message: error instanceof Error ? (error.message.split('\n')[0] ?? '') : String(error) };
  }
}
