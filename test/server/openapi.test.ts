import { readdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { LaboratoryAnswer } from '../../server/http/schemas.ts';
import { PROGRAM_DIR, type RunningLaboratory, runLaboratory } from './runningLaboratory.ts';

let laboratory: RunningLaboratory;
beforeAll(async () => {
  laboratory = await runLaboratory();
});
afterAll(() => laboratory.stop());

describe('GET /api/v1/openapi.json', () => {
  test('describes every route of the service, with the limits of its fields', async () => {
    const { status, body } = await laboratory.ask('GET', '/api/v1/openapi.json');
    expect(status).toBe(200);
    expect(body.openapi).toMatch(/^3\.1/);
    const routes = Object.entries<Record<string, unknown>>(body.paths).flatMap(([path, methods]) =>
      Object.keys(methods).map((method) => `${method.toUpperCase()} ${path}`),
    );
    expect(routes).toEqual(
      expect.arrayContaining([
        'GET /healthz',
        'GET /api/v1/laboratory',
        'POST /api/v1/demo-laboratory',
        'GET /api/v1/tests',
        'POST /api/v1/tests',
        'GET /api/v1/tests/{id}',
        'PUT /api/v1/tests/{id}',
        'GET /api/v1/tests/{id}/history',
        'POST /api/v1/tests/{id}/photos',
        'POST /api/v1/tests/{id}/photos/{sha256}/measurements',
        'POST /api/v1/tests/{id}/readings',
        'GET /api/v1/photos/{sha256}',
        'GET /api/v1/photos/{sha256}/upright.jpg',
        'POST /api/v1/readings/{id}/set-aside',
        'POST /api/v1/classify',
        'POST /api/v1/logs',
        'GET /api/v1/logs/{id}/refused.csv',
        'GET /api/v1/measuring',
      ]),
    );
    const text = JSON.stringify(body);
    expect(text).toContain('outside diameter of the gauge section, mm, > 0 and ≤ 1000');
    for (const reference of text.matchAll(/"\$ref":"#\/components\/schemas\/([^"]+)"/g)) {
      expect(body.components.schemas).toHaveProperty([reference[1] ?? '']);
    }
  });

  test('every address the page calls is one of the service', async () => {
    const { body } = await laboratory.ask('GET', '/api/v1/openapi.json');
    const folder = join(PROGRAM_DIR, 'web', 'api');
    const sources = await Promise.all((await readdir(folder)).map((name) => readFile(join(folder, name), 'utf8')));
    const called = [
      ...sources
        .join('\n')
        .matchAll(
          /[`'](?:\/api\/v1)?(\/(?:laboratory|demo-laboratory|tests|photos|readings|logs|classify|measuring)[^`'\n]*)[`']/g,
        ),
    ];
    expect(called.length).toBeGreaterThan(8);
    const patterns = Object.keys(body.paths).map(
      (path) => new RegExp(`^${path.replace(/\{\w+\}/g, '[^/]+').replace(/\./g, '\\.')}$`),
    );
    for (const [, path = ''] of called) {
      const plain = `/api/v1${path.replace(/\$\{part\(\w+\)\}/g, 'x').split('?')[0]}`;
      expect(
        patterns.some((pattern) => pattern.test(plain)),
        plain,
      ).toBe(true);
    }
  });
});

test('GET /healthz says that the service works', async () => {
  expect(await laboratory.ask('GET', '/healthz')).toMatchObject({
    status: 200,
    body: { status: 'ok', version: '0.0.0-test' },
  });
});

test('GET /api/v1/laboratory says how many tests there are and which engine measures', async () => {
  const { body } = await laboratory.ask('GET', '/api/v1/laboratory');
  expect(LaboratoryAnswer.parse(body)).toEqual(body);
  expect(body.tests).toBe(0);
});
