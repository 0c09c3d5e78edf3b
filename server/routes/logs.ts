import { createReadStream, existsSync } from 'node:fs';
import { z } from 'zod';
import { LabError } from '../../src/errors.ts';
import { logFile } from '../../src/log/node/logSource.ts';
import { ImportAnswer, LogPreviewAnswer, TestIdParam } from '../http/schemas.ts';
import { type UploadedFile, withUploads } from '../http/uploads.ts';
import { mappingOf, rememberedMapping, rememberMapping } from '../log/columnMapping.ts';
import { previewLog } from '../log/previewLog.ts';
import { refusedRowsPath, runImport } from '../log/runImport.ts';
import { uploadedPhotos } from '../log/uploadedPhotos.ts';
import type { Service } from '../service.ts';
import type { TypedApp } from './route.ts';
import { withoutUndefined } from './withoutUndefined.ts';

const TAG = { tags: ['logs'] };

const ImportQuery = z.object({
  dryRun: z
    .enum(['true', 'false'])
    .default('false')
    .transform((text) => text === 'true'),
  dateOrder: z.enum(['ymd', 'dmy', 'mdy']).optional(),
  decimalMark: z.enum(['point', 'comma']).optional(),
  angleStandardUncertaintyDeg: z.coerce.number().positive().max(45).optional(),
});

/** The one log of a form. @throws LabError `invalid-request` */
function onlyLog(files: readonly UploadedFile[]): UploadedFile {
  const logs = files.filter((file) => file.field === 'log');
  const [log] = logs;
  if (log && logs.length === 1) return log;
  throw new LabError('invalid-request', `the form must hold exactly one file in field "log", got ${logs.length}`, {
    input: 'log',
    value: logs.length,
  });
}

/** Test logs: import (or try out), fetch the refused rows. */
export function logRoutes(app: TypedApp, service: Service): void {
  const { store, limits } = service;
  // An import ends between two batches when the service stops, and says at which line; the same import again goes on there.
  const stopping = new AbortController();
  app.addHook('preClose', async () => stopping.abort());

  app.post(
    '/api/v1/logs',
    {
      schema: {
        ...TAG,
        summary:
          'Import a test log (multipart/form-data: field "log", photos or zip archives of photos in field "photo", and columns mapped by hand as JSON in field "mapping"); with dryRun=true nothing is kept',
        consumes: ['multipart/form-data'],
        querystring: ImportQuery,
        response: { 200: ImportAnswer },
      },
    },
    (request) =>
      withUploads(request, store.folder.incoming, limits.logs, async ({ files, fields }) => {
        const { dryRun, ...declared } = request.query;
        const log = onlyLog(files);
        const photos = await uploadedPhotos(files.filter((file) => file.field === 'photo'));
        try {
          const source = await logFile(log.path, log.fileName);
          const mapping = mappingOf(fields.get('mapping')) ?? (await rememberedMapping(store, source));
          const answer = await runImport(service, {
            source,
            photos,
            dryRun,
            declared: { ...withoutUndefined(declared), ...(mapping && { mapping }) },
            signal: stopping.signal,
          });
          if (mapping && !dryRun) await rememberMapping(store, source, mapping);
          return answer;
        } finally {
          photos?.close();
        }
      }),
  );

  app.post(
    '/api/v1/logs/preview',
    {
      schema: {
        ...TAG,
        summary:
          'See how a log would be read (multipart/form-data: field "log", and "mapping" as for the import): encoding, columns, first rows; nothing is kept',
        consumes: ['multipart/form-data'],
        querystring: ImportQuery.omit({ dryRun: true }),
        response: { 200: LogPreviewAnswer },
      },
    },
    (request) =>
      withUploads(request, store.folder.incoming, limits.logs, async ({ files, fields }) => {
        const log = onlyLog(files);
        const source = await logFile(log.path, log.fileName);
        return previewLog(store, source, mappingOf(fields.get('mapping')), withoutUndefined(request.query));
      }),
  );

  app.get(
    '/api/v1/logs/:id/refused.csv',
    {
      schema: {
        ...TAG,
        summary: 'The refused rows of an import with their reasons, to be mended',
        params: TestIdParam,
      },
    },
    async (request, reply) => {
      const { id } = request.params;
      const record = await store.readImport(id);
      const path = refusedRowsPath(service, record.id);
      if (!existsSync(path)) {
        throw new LabError('not-found', `the import must have refused rows, got none in import "${id}"`, {
          input: 'id',
          value: id,
        });
      }
      const name = record.fileName.replace(/\.[^.]*$/, '');
      return reply
        .header('content-disposition', `attachment; filename*=UTF-8''${encodeURIComponent(`${name}-refused.csv`)}`)
        .type('text/csv; charset=utf-8')
        .send(createReadStream(path));
    },
  );
}
