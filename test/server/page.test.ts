import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { type RunningLaboratory, runLaboratory } from './runningLaboratory.ts';

let programDir: string;
let laboratory: RunningLaboratory;

beforeAll(async () => {
  programDir = await mkdtemp(join(tmpdir(), 'breakplane-page-'));
  const web = join(programDir, 'dist', 'web');
  await mkdir(join(web, 'assets'), { recursive: true });
  await writeFile(join(web, 'index.html'), '<!doctype html><title>the page</title>');
  await writeFile(join(web, 'assets', 'index-AbCd1234.js'), 'export {};');
  await writeFile(join(web, '.sources'), 'of the build');
  await writeFile(join(programDir, 'dist', 'secret.txt'), 'hidden words');
  laboratory = await runLaboratory({ programDir });
});
afterAll(async () => {
  await laboratory.stop();
  await rm(programDir, { recursive: true, force: true });
});

describe('the page', () => {
  test.each(['/', '/tests/abc', '/import', '/help/photo'])(
    '%s is answered with index.html, never from a cache unasked',
    async (path) => {
      const { status, headers, text } = await laboratory.ask('GET', path);
      expect(status).toBe(200);
      expect(headers.get('content-type')).toMatch(/^text\/html/);
      expect(headers.get('cache-control')).toBe('no-cache');
      expect(headers.get('content-security-policy')).toContain("default-src 'none'");
      expect(text).toContain('the page');
    },
  );

  test('a file named after its content is kept by the browser', async () => {
    const { status, headers } = await laboratory.ask('GET', '/assets/index-AbCd1234.js');
    expect(status).toBe(200);
    expect(headers.get('content-type')).toMatch(/javascript/);
    expect(headers.get('cache-control')).toContain('immutable');
  });

  test.each([
    '/assets/missing.js',
    '/.sources',
    '/..%2fsecret.txt',
    '/%2e%2e/secret.txt',
    '/assets/..%2f..%2fsecret.txt',
    '/api/v1/unknown',
  ])('%s is not there', async (path) => {
    const { status, text } = await laboratory.ask('GET', path);
    expect(status).toBeGreaterThanOrEqual(400);
    expect(status).toBeLessThan(500);
    expect(text).not.toContain('hidden words');
    expect(text).not.toContain('of the build');
    expect(JSON.parse(text)).toMatchObject({ status });
  });

  test('without samples there is no demo laboratory', async () => {
    expect((await laboratory.ask('GET', '/api/v1/laboratory')).body).toMatchObject({ demoAvailable: false });
    expect(await laboratory.ask('POST', '/api/v1/demo-laboratory', {})).toMatchObject({
      status: 404,
      body: { code: 'not-found' },
    });
  });
});

test('a program whose page is not built says so at its address', async () => {
  const bare = await mkdtemp(join(tmpdir(), 'breakplane-bare-'));
  const without = await runLaboratory({ programDir: bare });
  try {
    const { status, body } = await without.ask('GET', '/');
    expect(status).toBe(404);
    expect(body.detail).toContain('npm run build');
  } finally {
    await without.stop();
    await rm(bare, { recursive: true, force: true });
  }
});
