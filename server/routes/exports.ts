import { Readable } from 'node:stream';
import { makeBackup } from '../backup/makeBackup.ts';
import { ListQueryText } from '../http/schemas.ts';
import { testsAsCsv, testsAsJsonLines } from '../log/exportTests.ts';
import type { Service } from '../service.ts';
import type { TypedApp } from './route.ts';
import { withoutUndefined } from './withoutUndefined.ts';

const TAG = { tags: ['exports'] };
const Filter = ListQueryText.omit({ limit: true, cursor: true });

/** Today as part of a file name. */
const day = (): string => new Date().toISOString().slice(0, 10);
const attachment = (name: string): string => `attachment; filename="${name}"`;

/** Everything the laboratory keeps, to be taken away: tests as CSV or JSON lines, all of it as a backup. */
export function exportRoutes(app: TypedApp, { store, version }: Service): void {
  app.get(
    '/api/v1/exports/tests.csv',
    {
      schema: {
        ...TAG,
        summary: 'Tests as CSV under the canonical headers of a log, narrowed like the list',
        querystring: Filter,
      },
    },
    async (request, reply) =>
      reply
        .type('text/csv; charset=utf-8')
        .header('content-disposition', attachment(`tests-${day()}.csv`))
        .send(Readable.from(testsAsCsv(store, withoutUndefined(request.query)))),
  );

  app.get(
    '/api/v1/exports/tests.jsonl',
    { schema: { ...TAG, summary: 'Tests with readings and photos, one JSON object a line', querystring: Filter } },
    async (request, reply) =>
      reply
        .type('application/x-ndjson; charset=utf-8')
        .header('content-disposition', attachment(`tests-${day()}.jsonl`))
        .send(Readable.from(testsAsJsonLines(store, withoutUndefined(request.query)))),
  );

  app.get(
    '/api/v1/exports/backup.tar',
    {
      schema: {
        ...TAG,
        summary: 'Everything as one archive with checksums, as of one moment; it restores into an empty data folder',
      },
    },
    async (_request, reply) =>
      reply
        .type('application/x-tar')
        .header('content-disposition', attachment(`breakplane-${day()}.tar`))
        .send(Readable.from(makeBackup(store, version))),
  );
}
