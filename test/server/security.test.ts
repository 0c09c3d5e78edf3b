import { request } from 'node:http';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { requireLoopback } from '../../server/http/loopback.ts';
import { ProblemDetails } from '../../server/http/problem.ts';
import { type RunningLaboratory, runLaboratory, testInput } from './runningLaboratory.ts';

let laboratory: RunningLaboratory;
beforeAll(async () => {
  laboratory = await runLaboratory({ limits: { bodyBytes: 4000 } });
});
afterAll(() => laboratory.stop());

/** Asks with headers that fetch would not let through. */
function askAs(
  path: string,
  headers: Record<string, string>,
  method = 'GET',
): Promise<{ status: number; body: string }> {
  return new Promise((resolve, reject) => {
    const call = request(laboratory.address + path, { method, headers }, (response) => {
      let body = '';
      response.setEncoding('utf8');
      response.on('data', (text) => {
        body += text;
      });
      response.on('end', () => resolve({ status: response.statusCode ?? 0, body }));
    });
    call.on('error', reject);
    call.end();
  });
}

describe('the service stays on this machine', () => {
  test.each(['0.0.0.0', '::', '192.168.1.5', 'example.org', '10.0.0.1', '127.0.0.1.example.org'])(
    'does not listen on %s',
    (host) => {
      expect(() => requireLoopback(host)).toThrow(expect.objectContaining({ code: 'not-loopback' }));
    },
  );
  test.each(['127.0.0.1', '127.0.1.1', 'localhost', '::1'])('listens on %s', (host) => {
    expect(() => requireLoopback(host)).not.toThrow();
  });

  test.each([
    'evil.example',
    'evil.example:80',
    '127.0.0.1.evil.example',
    'localhost.evil.example',
    '192.168.1.5:8080',
  ])('a request for host "%s" is answered 421', async (host) => {
    const { status, body } = await askAs('/api/v1/tests', { host });
    expect(status).toBe(421);
    expect(JSON.parse(body)).toMatchObject({ code: 'foreign-host', status: 421 });
  });

  test.each(['localhost', 'localhost:9999', '127.0.0.1', '[::1]:8080'])(
    'a request for host "%s" is answered',
    async (host) => {
      expect((await askAs('/healthz', { host })).status).toBe(200);
    },
  );

  test.each(['http://evil.example', 'null', 'https://127.0.0.1', 'http://localhost:1'])(
    'a request from the page of "%s" is answered 403, whatever the method',
    async (origin) => {
      for (const method of ['GET', 'POST', 'PUT', 'OPTIONS']) {
        const { status, body } = await askAs('/api/v1/tests', { origin }, method);
        expect(status).toBe(403);
        expect(JSON.parse(body)).toMatchObject({ code: 'foreign-origin' });
      }
    },
  );

  test('a request from its own page is answered; one that the browser calls cross-site is not', async () => {
    expect((await askAs('/healthz', { origin: laboratory.address })).status).toBe(200);
    expect((await askAs('/api/v1/tests', { 'sec-fetch-site': 'same-origin' })).status).toBe(200);
    expect((await askAs('/api/v1/tests', { 'sec-fetch-site': 'cross-site' })).status).toBe(403);
  });
});

test('every answer forbids sniffing, framing and anything from elsewhere', async () => {
  for (const path of ['/healthz', '/api/v1/tests', '/nowhere.txt', '/api/v1/nowhere']) {
    const { headers } = await laboratory.ask('GET', path);
    expect(headers.get('x-content-type-options')).toBe('nosniff');
    expect(headers.get('referrer-policy')).toBe('no-referrer');
    const policy = headers.get('content-security-policy') ?? '';
    expect(policy).toContain("default-src 'none'");
    expect(policy).toContain("script-src 'self'");
    expect(policy).toContain("frame-ancestors 'none'");
    expect(policy).not.toMatch(/unsafe|data:|\*|https?:/);
  }
});

describe('every error is a problem document', () => {
  const problemAt = async (method: string, path: string, body?: unknown, headers?: Record<string, string>) => {
    const answer = await laboratory.ask(method, path, body, headers);
    expect(answer.headers.get('content-type')).toMatch(/^application\/problem\+json/);
    const problem = ProblemDetails.parse(answer.body);
    expect(problem.status).toBe(answer.status);
    expect(problem.instance).toBe(path);
    expect(problem.fix).not.toBe('');
    return { ...problem, allow: answer.headers.get('allow') };
  };

  test('404 for an address that is none', async () => {
    expect(await problemAt('GET', '/api/v1/nowhere')).toMatchObject({ status: 404, code: 'no-such-address' });
    expect(await problemAt('GET', '/missing.js')).toMatchObject({ status: 404 });
    expect(await problemAt('POST', '/')).toMatchObject({ status: 404 });
  });

  test('405 with the methods that are allowed', async () => {
    expect(await problemAt('DELETE', '/api/v1/tests')).toMatchObject({ status: 405, allow: 'GET, HEAD, POST' });
    expect(await problemAt('DELETE', '/api/v1/tests/abc')).toMatchObject({ status: 405, allow: 'GET, HEAD, PUT' });
    expect(await problemAt('GET', '/api/v1/classify')).toMatchObject({ status: 405, allow: 'POST' });
    expect(await problemAt('PATCH', '/healthz')).toMatchObject({ status: 405 });
  });

  test('400 for a body that is no JSON', async () => {
    expect(await problemAt('POST', '/api/v1/tests', '{"specimenId":')).toMatchObject({ status: 400 });
    expect(await problemAt('POST', '/api/v1/tests', '')).toMatchObject({ status: 400 });
  });

  test('415 for a body of another kind', async () => {
    expect(await problemAt('POST', '/api/v1/tests', '<a/>', { 'content-type': 'application/xml' })).toMatchObject({
      status: 415,
    });
  });

  test('413 for a body that is too large', async () => {
    expect(await problemAt('POST', '/api/v1/tests', testInput({ remarks: 'x'.repeat(5000) }))).toMatchObject({
      status: 413,
    });
  });

  test('422 names every field that is wrong', async () => {
    const problem = await problemAt('POST', '/api/v1/tests', {
      specimenId: '',
      testDate: '2026-02-30',
      geometry: { section: 'solid-round', diameterMm: -3 },
    });
    expect(problem).toMatchObject({ status: 422, code: 'missing-value', input: 'specimenId' });
    expect(problem.errors?.map(({ input }) => input)).toEqual(['specimenId', 'testDate', 'geometry.diameterMm']);
    expect(problem.errors?.[2]).toEqual({
      input: 'geometry.diameterMm',
      code: 'out-of-range',
      message: 'geometry.diameterMm must be > 0, got -3',
    });
  });

  test('a body that tries to change the prototype is refused', async () => {
    expect(await problemAt('POST', '/api/v1/tests', '{"__proto__":{"a":1},"specimenId":"x"}')).toMatchObject({
      status: 400,
    });
  });

  test('500 shows nothing of the inside', async () => {
    const { store } = laboratory.service;
    const list = store.listRows;
    store.listRows = () => Promise.reject(new Error('secret path /srv/lab'));
    try {
      const problem = await problemAt('GET', '/api/v1/tests');
      expect(problem).toMatchObject({ status: 500, code: 'fault' });
      expect(JSON.stringify(problem)).not.toContain('secret');
    } finally {
      store.listRows = list;
    }
  });
});
