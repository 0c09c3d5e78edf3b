import type { FastifyInstance, FastifyReply } from 'fastify';
import { LabError } from '../../src/errors.ts';
import type { PlaceOfPage } from './page.ts';
import { type ProblemDetails, problemOfFault, problemOfLabError, problemOfStatus } from './problem.ts';
import { RequestInvalid } from './requestInvalid.ts';

export const PROBLEM_TYPE = 'application/problem+json; charset=utf-8';

function sendProblem(reply: FastifyReply, problem: ProblemDetails, instance: string): FastifyReply {
  return reply
    .code(problem.status)
    .header('cache-control', 'no-store')
    .type(PROBLEM_TYPE)
    .serializer((body: unknown) => JSON.stringify(body))
    .send({ ...problem, instance });
}

const statusOf = (error: unknown): number =>
  typeof error === 'object' && error !== null && 'statusCode' in error && typeof error.statusCode === 'number'
    ? error.statusCode
    : 500;

const JSON_BROKEN = new Set(['FST_ERR_CTP_INVALID_JSON_BODY', 'FST_ERR_CTP_EMPTY_JSON_BODY']);

function problemOf(error: unknown, requestId: string): ProblemDetails {
  if (error instanceof RequestInvalid) return problemOfLabError(error, error.errors);
  if (error instanceof LabError) return problemOfLabError(error);
  const status = statusOf(error);
  const message = error instanceof Error ? error.message : String(error);
  const code = error instanceof Error && 'code' in error ? String(error.code) : '';
  if (JSON_BROKEN.has(code) || error instanceof SyntaxError) {
    return problemOfStatus(400, `the body must be JSON, got something else: ${message}`);
  }
  if (status >= 400 && status < 500) return problemOfStatus(status, message);
  return problemOfFault(requestId);
}

/** Methods by route pattern, to tell "no such address" from "not this way". */
function methodsByPattern(app: FastifyInstance): (path: string) => string[] {
  const routes: { pattern: RegExp; method: string }[] = [];
  app.addHook('onRoute', (route) => {
    if (route.url.includes('*')) return;
    const source = route.url
      .split('/')
      .map((part) => (part.startsWith(':') ? '[^/]+' : part.replace(/[.*+?^${}()|[\]\\]/g, '\\$&')))
      .join('/');
    for (const method of [route.method].flat()) routes.push({ pattern: new RegExp(`^${source}$`), method });
  });
  return (path) => [...new Set(routes.filter(({ pattern }) => pattern.test(path)).map(({ method }) => method))];
}

/** One place answers every error: problem details as in RFC 9457. Must be called before the routes. */
export function answerErrors(app: FastifyInstance, placeOf: (path: string) => PlaceOfPage): void {
  const methodsOf = methodsByPattern(app);
  app.setErrorHandler((error, request, reply) => {
    const problem = problemOf(error, request.id);
    if (problem.status >= 500 && problem.code === 'fault') request.log.error({ err: error }, 'fault');
    return sendProblem(reply, problem, request.url);
  });
  app.setNotFoundHandler((request, reply) => {
    const path = request.url.split('?')[0] ?? request.url;
    const methods = methodsOf(path);
    if (methods.length > 0) {
      const detail = `${path} must be asked with ${methods.join(', ')}, got ${request.method}`;
      return sendProblem(reply.header('allow', methods.join(', ')), problemOfStatus(405, detail), request.url);
    }
    const place = request.method === 'GET' || request.method === 'HEAD' ? placeOf(path) : 'none';
    if (place === 'page') return reply.header('cache-control', 'no-cache').sendFile('index.html');
    if (place === 'not-built') {
      const detail = 'the page must be built, got a program without it; run "npm run build" and start again';
      return sendProblem(reply, problemOfStatus(404, detail), request.url);
    }
    return sendProblem(reply, problemOfStatus(404, `there must be something at ${path}, got nothing`), request.url);
  });
}
