import { readdir, readFile } from 'node:fs/promises';
import { builtinModules } from 'node:module';
import { dirname, join, relative, resolve, sep } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';

const TOP = dirname(dirname(dirname(fileURLToPath(import.meta.url))));

interface Import {
  readonly from: string;
  /** Path below the top folder for a file, else the name of the package. */
  readonly to: string;
}

async function sourcesBelow(folder: string): Promise<string[]> {
  const entries = await readdir(join(TOP, folder), { withFileTypes: true, recursive: true });
  return entries
    .filter((entry) => entry.isFile() && /\.tsx?$/.test(entry.name) && !entry.name.endsWith('.d.ts'))
    .map((entry) => relative(TOP, join(entry.parentPath, entry.name)).split(sep).join('/'));
}

const IMPORT =
  /(?:^|\n)\s*(?:import|export)\b[^'"`;]*?from\s*['"]([^'"]+)['"]|(?:^|\n)\s*import\s*['"]([^'"]+)['"]|\bimport\(\s*['"]([^'"]+)['"]\s*\)/g;

async function importsOf(folder: string): Promise<Import[]> {
  const imports: Import[] = [];
  for (const from of await sourcesBelow(folder)) {
    const text = await readFile(join(TOP, from), 'utf8');
    for (const [, a, b, c] of text.matchAll(IMPORT)) {
      const name = a ?? b ?? c ?? '';
      const to = name.startsWith('.')
        ? relative(TOP, resolve(TOP, dirname(from), name))
            .split(sep)
            .join('/')
        : name;
      imports.push({ from, to });
    }
  }
  return imports;
}

const builtin = new Set(builtinModules);
const needsNode = (name: string): boolean => name.startsWith('node:') || builtin.has(name.split('/')[0] ?? name);
/** Packages that only run on Node. */
const NODE_PACKAGES = [
  'sharp',
  'better-sqlite3',
  'fastify',
  'piscina',
  'pino',
  'yauzl',
  'kysely',
  'vite',
  'esbuild',
  'commander',
  'heic-decode',
  'file-type',
  '@resvg/resvg-js',
  '@myriaddreamin/typst-ts-node-compiler',
];
/** Folders of src that may use Node: the command line, and what each part keeps in its node/ folder. */
const mayUseNode = (path: string): boolean => path.startsWith('src/cli/') || /^src\/[^/]+\/node\//.test(path);

describe('imports point one way', async () => {
  const src = await importsOf('src');

  test('there is something to look at', () => {
    expect(src.length).toBeGreaterThan(100);
    expect(src.some(({ to }) => needsNode(to))).toBe(true);
    expect(src.some(({ from, to }) => from === 'src/verdict/assessTest.ts' && to === 'src/records/reading.ts')).toBe(
      true,
    );
  });

  test('src imports neither the server nor the page', () => {
    expect(src.filter(({ to }) => /^(server|web|test|samples)\//.test(to))).toEqual([]);
  });

  test('nothing outside src/cli and node/ folders imports Node, a package that needs it, or those folders', () => {
    const pure = src.filter(({ from }) => !mayUseNode(from));
    expect(pure.length).toBeGreaterThan(50);
    expect(pure.filter(({ to }) => needsNode(to) || NODE_PACKAGES.includes(to) || mayUseNode(to))).toEqual([]);
  });

  test('the page imports no server and no part of src that needs Node', async () => {
    const web = await importsOf('web');
    expect(web.filter(({ to }) => needsNode(to) || /^(server|test)\//.test(to) || mayUseNode(to))).toEqual([]);
  });

  test('the server does not import the page', async () => {
    const server = await importsOf('server');
    expect(server.filter(({ to }) => /^(web|test)\//.test(to))).toEqual([]);
  });

  test.each([
    [
      'src/mechanics',
      ['src/mechanics', 'src/angle.ts', 'src/units.ts', 'src/errors.ts', 'src/records', 'src/statistics'],
    ],
    ['src/records', ['src/records', 'src/angle.ts', 'src/errors.ts']],
    ['src/statistics', ['src/statistics', 'src/angle.ts', 'src/errors.ts', 'src/records']],
  ])('%s imports only what is below it', (folder, allowed) => {
    const out = src.filter(
      ({ from, to }) =>
        from.startsWith(`${folder}/`) &&
        to.startsWith('src/') &&
        !allowed.some((part) => to === part || to.startsWith(`${part}/`)),
    );
    expect(out).toEqual([]);
  });
});
