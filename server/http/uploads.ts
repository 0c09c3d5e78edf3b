import { createHash, randomUUID } from 'node:crypto';
import { createWriteStream } from 'node:fs';
import { mkdir, rm } from 'node:fs/promises';
import { join } from 'node:path';
import { type Readable, Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import type { FastifyRequest } from 'fastify';
import { LabError } from '../../src/errors.ts';

/** A file of a request, on the disk of the data folder. */
export interface UploadedFile {
  /** Name of the form field. */
  readonly field: string;
  /** Name the laboratory gave the file, without folders; only ever shown and compared. */
  readonly fileName: string;
  readonly path: string;
  readonly bytes: number;
  readonly sha256: string;
}

export interface UploadLimits {
  readonly fileBytes: number;
  readonly files: number;
  /** All files of one request together. */
  readonly requestBytes: number;
}

const LONGEST_NAME = 200;

/** The last part of a name, without what does not belong into one. */
export function plainFileName(name: string): string {
  const last = name.split(/[/\\]/).at(-1) ?? '';
  // biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is taken out
  return last.replace(/[\u0000-\u001f\u007f]/g, '').slice(-LONGEST_NAME) || 'unnamed';
}

const tooLarge = (what: string, limit: number): LabError =>
  new LabError('too-large', `${what} must have at most ${limit} bytes`, { input: what, value: limit });

async function saveFile(
  stream: Readable,
  path: string,
  name: string,
  limits: UploadLimits,
  before: number,
): Promise<{ bytes: number; sha256: string }> {
  const hash = createHash('sha256');
  let bytes = 0;
  const count = new Transform({
    transform(chunk: Buffer, _encoding, done) {
      bytes += chunk.length;
      if (bytes > limits.fileBytes) return done(tooLarge(`file "${name}"`, limits.fileBytes));
      if (before + bytes > limits.requestBytes) return done(tooLarge('all files together', limits.requestBytes));
      hash.update(chunk);
      done(null, chunk);
    },
  });
  await pipeline(stream, count, createWriteStream(path, { flags: 'wx' }));
  return { bytes, sha256: hash.digest('hex') };
}

/** What a form holds. */
export interface ReceivedForm {
  readonly files: readonly UploadedFile[];
  /** Text fields by name; of several with one name the last. */
  readonly fields: ReadonlyMap<string, string>;
}

async function receive(request: FastifyRequest, folder: string, limits: UploadLimits): Promise<ReceivedForm> {
  const files: UploadedFile[] = [];
  const fields = new Map<string, string>();
  let total = 0;
  const parts = request.parts({ limits: { fileSize: limits.fileBytes + 1, files: limits.files, fields: 50 } });
  for await (const part of parts) {
    if (part.type === 'field') {
      fields.set(part.fieldname, String(part.value));
      continue;
    }
    const fileName = plainFileName(part.filename);
    const path = join(folder, String(files.length));
    const saved = await saveFile(part.file, path, fileName, limits, total);
    total += saved.bytes;
    files.push({ field: part.fieldname, fileName, path, ...saved });
  }
  return { files, fields };
}

/**
 * Receives the files of a form, streamed to `incomingDir`, and throws away what is left of them when the work is done.
 * @throws LabError `invalid-request` for anything but a form, `too-large`
 */
export async function withUploads<Result>(
  request: FastifyRequest,
  incomingDir: string,
  limits: UploadLimits,
  work: (form: ReceivedForm) => Promise<Result>,
): Promise<Result> {
  if (!request.isMultipart()) {
    throw new LabError(
      'invalid-request',
      `files must be sent as multipart/form-data, got "${request.headers['content-type'] ?? 'no content type'}"`,
      { input: 'Content-Type', value: request.headers['content-type'] },
    );
  }
  const folder = join(incomingDir, `upload-${randomUUID()}`);
  await mkdir(folder, { recursive: true });
  try {
    return await work(await receive(request, folder, limits));
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}
