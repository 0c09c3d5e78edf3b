import { createReadStream, existsSync } from 'node:fs';
import { z } from 'zod';
import { LabError } from '../../src/errors.ts';
import { logFile } from '../../src/log/node/logSource.ts';
import { ImportAnswer, TestIdParam } from '../http/schemas.ts';
import { withUploads } from '../http/uploads.ts';
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

/** Test logs: import (or try out), fetch the refused rows. */
export function logRoutes(app: TypedApp, service: Service): void {
  const { store, limits } = service;

  app.post(
    '/api/v1/logs',
    {
      schema: {
        ...TAG,
        summary:
          'Import a test log (multipart/form-data: field "log", and photos or zip archives of photos in field "photo"); with dryRun=true nothing is kept',
        consumes: ['multipart/form-data'],
        querystring: ImportQuery,
        response: { 200: ImportAnswer },
      },
    },
    (request) =>
      withUploads(request, store.folder.incoming, limits.logs, async (files) => {
        const { dryRun, ...declared } = request.query;
        const logs = files.filter((file) => file.field === 'log');
        const [log] = logs;
        if (!log || logs.length > 1) {
          throw new LabError(
            'invalid-request',
            `the form must hold exactly one file in field "log", got ${logs.length}`,
            {
              input: 'log',
              value: logs.length,
            },
          );
        }
        const photos = await uploadedPhotos(files.filter((file) => file.field === 'photo'));
        try {
          return await runImport(service, {
            source: await logFile(log.path, log.fileName),
            photos,
            dryRun,
            declared: withoutUndefined(declared),
          });
        } finally {
          photos?.close();
        }
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
