import { LabError } from '../../src/errors.ts';
import { TestIdParam } from '../http/schemas.ts';
import type { Service } from '../service.ts';
import type { TypedApp } from './route.ts';
import { sheetOf } from './sheet.ts';

/** The report of a test as a document. */
export function reportRoutes(app: TypedApp, { store, report }: Service): void {
  app.get(
    '/api/v1/tests/:id/report.pdf',
    { schema: { tags: ['reports'], summary: 'The report of a test as PDF', params: TestIdParam } },
    async (request, reply) => {
      const sheet = await sheetOf(store, request.params.id);
      if (report === null) {
        throw new LabError('busy', 'reports must be part of the program that serves, got one without them', {
          input: 'report.pdf',
        });
      }
      const pdf = await report(sheet, (sha256) => store.photoPath(sha256));
      const name = `${sheet.test.specimenId.replace(/[^\w.-]+/g, '_')}.pdf`;
      return reply
        .type('application/pdf')
        .header('content-disposition', `inline; filename="${name}"`)
        .send(Buffer.from(pdf));
    },
  );
}
