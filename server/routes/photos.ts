import { createReadStream } from 'node:fs';
import { fileTypeFromFile } from 'file-type';
import { z } from 'zod';
import { LabError } from '../../src/errors.ts';
import { PhotoParam, SheetWithoutTest, TestIdParam, TestPhotoParam } from '../http/schemas.ts';
import { type UploadedFile, withUploads } from '../http/uploads.ts';
import type { Service } from '../service.ts';
import type { TypedApp } from './route.ts';
import { sheetWithoutTest } from './sheet.ts';

const TAG = { tags: ['photos'] };
const PHOTO_TYPES = new Set(['image/jpeg', 'image/png', 'image/webp', 'image/tiff', 'image/heic', 'image/heif']);
/** Bytes under one SHA-256 never change. */
const FOREVER = 'private, max-age=31536000, immutable';

/** What a file is by its content. @throws LabError `not-a-photo` */
async function photoTypeOf(file: UploadedFile): Promise<string> {
  const type = await fileTypeFromFile(file.path).catch(() => undefined);
  if (type && PHOTO_TYPES.has(type.mime)) return type.mime;
  const what = file.bytes === 0 ? 'an empty file' : (type?.mime ?? 'no picture');
  throw new LabError('not-a-photo', `photo "${file.fileName}" must be JPEG, PNG, WebP, TIFF or HEIC, got ${what}`, {
    input: 'photo',
    value: file.fileName,
  });
}

/** Photos: send and measure, measure again, fetch as they are or upright. */
export function photoRoutes(app: TypedApp, { store, measuring, upright, limits }: Service): void {
  app.post(
    '/api/v1/tests/:id/photos',
    {
      schema: {
        ...TAG,
        summary: 'Send photos of a test (multipart/form-data, field "photo"); answers when they are measured',
        consumes: ['multipart/form-data'],
        params: TestIdParam,
        response: { 201: SheetWithoutTest },
      },
    },
    async (request, reply) => {
      const testId = request.params.id;
      await store.readTest(testId);
      const kept = await withUploads(request, store.folder.incoming, limits.photos, async ({ files }) => {
        if (files.length === 0) {
          throw new LabError('missing-value', 'the form must hold at least one photo, got none', { input: 'photo' });
        }
        // All are looked at before any is kept: a request happens whole or not at all.
        const types: string[] = [];
        for (const file of files) types.push(await photoTypeOf(file));
        for (const [i, { sha256, fileName, bytes, path }] of files.entries()) {
          const mediaType = types[i] ?? 'application/octet-stream';
          await store.addPhoto(
            { sha256, testId, fileName, mediaType, bytes, widthPx: null, heightPx: null },
            path,
            'now',
          );
        }
        return files.map((file) => file.sha256);
      });
      await Promise.all(kept.map((sha256) => measuring.settled(testId, sha256)));
      return reply.code(201).send(await sheetWithoutTest(store, testId));
    },
  );

  app.post(
    '/api/v1/tests/:id/photos/:sha256/measurements',
    {
      schema: {
        ...TAG,
        summary: 'Measure a photo again with the engine of today; earlier readings stay',
        params: TestPhotoParam,
        response: { 201: SheetWithoutTest },
      },
    },
    async (request, reply) => {
      const { id, sha256 } = request.params;
      await store.readTest(id);
      await store.measuring.add(id, sha256, 'now');
      await measuring.settled(id, sha256);
      return reply.code(201).send(await sheetWithoutTest(store, id));
    },
  );

  app.get(
    '/api/v1/photos/:sha256',
    { schema: { ...TAG, summary: 'The photo as it was sent', params: PhotoParam } },
    async (request, reply) => {
      const { sha256 } = request.params;
      const photo = await store.readPhoto(sha256);
      return reply
        .header('cache-control', FOREVER)
        .header('etag', `"${sha256}"`)
        .header('content-disposition', `inline; filename*=UTF-8''${encodeURIComponent(photo.fileName)}`)
        .header('content-length', photo.bytes)
        .type(photo.mediaType)
        .send(createReadStream(await store.photoPath(sha256)));
    },
  );

  app.get(
    '/api/v1/photos/:sha256/upright.jpg',
    {
      schema: {
        ...TAG,
        summary: 'The photo turned upright, as JPEG, at most `width` px wide',
        params: PhotoParam,
        querystring: z.object({ width: z.coerce.number().int().min(16).max(8000).default(1600) }),
      },
    },
    async (request, reply) => {
      const { sha256 } = request.params;
      const path = await store.photoPath(sha256);
      const jpeg = await upright.jpeg(sha256, path, request.query.width);
      return reply.header('cache-control', FOREVER).type('image/jpeg').send(Buffer.from(jpeg));
    },
  );
}
