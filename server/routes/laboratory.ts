import { z } from 'zod';
import { LabError } from '../../src/errors.ts';
import { ENGINE_VERSION } from '../../src/photo/measurement.ts';
import { ImportAnswer, LaboratoryAnswer } from '../http/schemas.ts';
import { demoFiles, importDemo } from '../log/demoLaboratory.ts';
import type { Service } from '../service.ts';
import type { TypedApp } from './route.ts';

/** The laboratory as a whole: health, size, demo data, description of the service. */
export function laboratoryRoutes(app: TypedApp, service: Service): void {
  const { store, programDir, version } = service;

  app.get(
    '/healthz',
    {
      schema: {
        tags: ['laboratory'],
        summary: 'Answers while the service and its store work',
        response: { 200: z.object({ status: z.literal('ok'), version: z.string() }) },
      },
    },
    async () => {
      await store.ping();
      return { status: 'ok' as const, version };
    },
  );

  app.get('/api/v1/openapi.json', { schema: { hide: true } }, async (_request, reply) =>
    reply.type('application/json; charset=utf-8').send(app.swagger()),
  );

  app.get(
    '/api/v1/laboratory',
    {
      schema: {
        tags: ['laboratory'],
        summary: 'How many tests there are, and which program serves them',
        response: { 200: LaboratoryAnswer },
      },
    },
    async () => ({
      tests: await store.countTests(),
      demoAvailable: demoFiles(programDir) !== null,
      engineVersion: ENGINE_VERSION,
      programVersion: version,
    }),
  );

  app.post(
    '/api/v1/demo-laboratory',
    {
      schema: {
        tags: ['laboratory'],
        summary: 'Load the demo laboratory (invented data) from samples/; its photos are measured in the background',
        response: { 201: ImportAnswer },
      },
    },
    async (_request, reply) => {
      const files = demoFiles(programDir);
      if (!files) {
        throw new LabError('not-found', `the demo laboratory must lie in samples/logs/demo.csv, got nothing there`, {
          input: 'samples',
        });
      }
      return reply.code(201).send(await importDemo(service, files));
    },
  );
}
