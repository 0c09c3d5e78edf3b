import type { FastifyReply } from 'fastify';
import { LabError } from '../../src/errors.ts';
import { Test } from '../../src/records/test.ts';
import {
  HistoryAnswer,
  ListQueryText,
  Review,
  SheetAnswer,
  TestIdParam,
  TestPageAnswer,
  TestRowAnswer,
  TestToChange,
  TestToCreate,
} from '../http/schemas.ts';
import type { Service } from '../service.ts';
import type { TypedApp } from './route.ts';
import { sheetOf } from './sheet.ts';
import { withoutUndefined } from './withoutUndefined.ts';

const TAG = { tags: ['tests'] };

/** The version an If-Match header names: `"3"`. @throws LabError `missing-value`, `invalid-request` */
function versionOf(ifMatch: string | undefined): number {
  if (ifMatch === undefined) {
    throw new LabError(
      'missing-value',
      'the If-Match header must name the version that is changed, such as "3", got nothing',
      { input: 'If-Match' },
    );
  }
  const version = /^(?:W\/)?"?(\d{1,9})"?$/.exec(ifMatch.trim())?.[1];
  if (version !== undefined) return Number(version);
  throw new LabError('invalid-request', `the If-Match header must be a version such as "3", got ${ifMatch}`, {
    input: 'If-Match',
    value: ifMatch,
  });
}

const tagged = (reply: FastifyReply, test: Test): Test => {
  reply.header('etag', `"${test.version}"`);
  return test;
};

/** Tests: list, enter, read, change, history. */
export function testRoutes(app: TypedApp, { store }: Service): void {
  app.get(
    '/api/v1/tests',
    {
      schema: {
        ...TAG,
        summary: 'List tests, newest first, narrowed by fields and text, page by page',
        querystring: ListQueryText,
        response: { 200: TestPageAnswer },
      },
    },
    async (request) => {
      const { angleFromDeg, angleToDeg } = request.query;
      if (angleFromDeg !== undefined && angleToDeg !== undefined && angleFromDeg > angleToDeg) {
        throw new LabError(
          'contradiction',
          `angleFromDeg must be ≤ angleToDeg, got ${angleFromDeg} and ${angleToDeg} degrees`,
          { input: 'angleFromDeg', value: angleFromDeg },
        );
      }
      return store.listRows(withoutUndefined(request.query));
    },
  );

  app.post(
    '/api/v1/tests',
    { schema: { ...TAG, summary: 'Enter a test', body: TestToCreate, response: { 201: Test } } },
    async (request, reply) => {
      const { change, ...input } = request.body;
      const test = await store.createTest(input, noteOf(change));
      return reply.code(201).header('location', `/api/v1/tests/${test.id}`).send(tagged(reply, test));
    },
  );

  app.get(
    '/api/v1/tests/:id',
    {
      schema: {
        ...TAG,
        summary: 'A test with its photos, readings and assessment',
        params: TestIdParam,
        response: { 200: SheetAnswer },
      },
    },
    async (request, reply) => {
      const sheet = await sheetOf(store, request.params.id);
      tagged(reply, sheet.test);
      return reply.send(sheet);
    },
  );

  app.put(
    '/api/v1/tests/:id',
    {
      schema: {
        ...TAG,
        summary: 'Change a test; If-Match names the version that is changed, the earlier one stays in history',
        params: TestIdParam,
        body: TestToChange,
        response: { 200: Test },
      },
    },
    async (request, reply) => {
      const { change, ...input } = request.body;
      const version = versionOf(request.headers['if-match']);
      return tagged(reply, await store.changeTest(request.params.id, version, input, noteOf(change)));
    },
  );

  app.post(
    '/api/v1/tests/:id/reviews',
    {
      schema: {
        ...TAG,
        summary: 'Say that a person has looked at a test as it stands; any later change takes it back',
        params: TestIdParam,
        body: Review,
        response: { 201: TestRowAnswer },
      },
    },
    async (request, reply) => {
      const { version, by, note } = request.body;
      return reply.code(201).send(await store.reviewTest(request.params.id, version, by, note || null));
    },
  );

  app.get(
    '/api/v1/tests/:id/history',
    {
      schema: {
        ...TAG,
        summary: 'Everything that happened to a test: who, when, why, before, after',
        params: TestIdParam,
        response: { 200: HistoryAnswer },
      },
    },
    async (request) => ({ history: await store.historyOf(request.params.id) }),
  );
}

const noteOf = (change: { by?: string | undefined; why?: string | undefined } | undefined) => ({
  by: change?.by ?? null,
  why: change?.why ?? null,
});
