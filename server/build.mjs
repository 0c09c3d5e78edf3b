/**
 * Builds what a checkout needs to run: the program (service, command line, measuring worker) into dist/server and the
 * page into dist/web. Plain Node, no TypeScript: npm runs it right after `npm ci`. A part whose sources have not changed
 * since it was built is left as it is; `--force` builds it anyway. `--program` leaves the page out.
 */
import { createHash } from 'node:crypto';
import { existsSync } from 'node:fs';
import { lstat, mkdir, readdir, readFile, rename, rm, symlink, writeFile } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const PROGRAM_DIR = dirname(dirname(fileURLToPath(import.meta.url)));
const STAMP = '.sources';

/** Parts of the program that are loaded by their own file name: output name → source. */
const ENTRIES = {
  main: 'server/main.ts',
  measureWorker: 'src/photo/node/measureWorker.ts',
  uprightWorker: 'server/photos/uprightWorker.ts',
  copyDatabaseWorker: 'server/backup/copyDatabaseWorker.ts',
};

async function filesIn(folder) {
  const entries = await readdir(folder, { withFileTypes: true, recursive: true });
  return entries.filter((entry) => entry.isFile()).map((entry) => join(entry.parentPath, entry.name));
}

/** One number for the state of all sources a part is built from. */
async function stateOf(sources) {
  const hash = createHash('sha256');
  const files = [];
  for (const source of sources) {
    if (source.endsWith('/')) files.push(...(existsSync(source) ? await filesIn(source) : []));
    else files.push(source);
  }
  for (const file of files.sort())
    hash
      .update(`${file}\0`)
      .update(await readFile(file))
      .update('\0');
  return hash.digest('hex');
}

/** Files are replaced one by one, and stale ones go last: a program that runs from here does not lose its parts. */
async function replaceFiles(outdir, files) {
  await mkdir(outdir, { recursive: true });
  for (const file of files) {
    const part = `${file.path}.${process.pid}.new`;
    await writeFile(part, file.contents);
    await rename(part, file.path);
  }
  const kept = new Set(files.map((file) => basename(file.path)));
  for (const name of await readdir(outdir)) {
    // What ends in .new is being written by another build at this moment.
    if (!kept.has(name) && !name.endsWith('.new')) await rm(join(outdir, name), { force: true });
  }
}

async function buildProgram(outdir) {
  const { build } = await import('esbuild');
  const entryPoints = Object.entries(ENTRIES)
    .filter(([, source]) => existsSync(source))
    .map(([out, source]) => ({ out, in: source }));
  const { outputFiles } = await build({
    absWorkingDir: PROGRAM_DIR,
    entryPoints,
    outdir,
    bundle: true,
    write: false,
    splitting: true,
    packages: 'external',
    format: 'esm',
    platform: 'node',
    target: 'node20',
    sourcemap: 'linked',
    sourcesContent: false,
    logLevel: 'warning',
  });
  await replaceFiles(join(PROGRAM_DIR, outdir), outputFiles);
}

/**
 * Puts the executable where `npx breakplane` looks first. npm links the executables of dependencies only, and without
 * this npx goes through a cache of its own that several calls at once can spoil.
 */
async function linkExecutable() {
  const bin = join(PROGRAM_DIR, 'node_modules', '.bin');
  const link = join(bin, 'breakplane');
  if (process.platform === 'win32' || !existsSync(bin)) return;
  if (await lstat(link).catch(() => null)) return;
  await symlink(join('..', '..', 'server', 'breakplane.mjs'), link).catch((error) => {
    if (error.code !== 'EEXIST') throw error;
  });
}

async function buildPage() {
  const { build } = await import('vite');
  // The page is one file on purpose: it comes from this machine, and everything on it is needed at once.
  await build({ configFile: 'vite.config.ts', logLevel: 'warn', build: { chunkSizeWarningLimit: 2000 } });
}

async function part(what, outdir, sources, run) {
  const started = performance.now();
  try {
    const state = await stateOf(sources);
    const stamp = join(outdir, STAMP);
    const built = existsSync(stamp) ? await readFile(stamp, 'utf8') : null;
    if (built === state && !process.argv.includes('--force')) {
      process.stderr.write(`breakplane build: ${what} is up to date in ${outdir}\n`);
      return;
    }
    await run(outdir);
    await writeFile(stamp, state);
    const seconds = ((performance.now() - started) / 1000).toFixed(1);
    process.stderr.write(`breakplane build: ${what} → ${outdir} (${seconds} s)\n`);
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error);
    process.stderr.write(`breakplane build: the ${what} could not be built.\n${why}\n`);
    if (error instanceof Error && 'code' in error && error.code === 'ERR_MODULE_NOT_FOUND') {
      process.stderr.write('A package is missing: run "npm ci" first.\n');
    }
    process.exitCode = 1;
  }
}

// vite takes its root from where it runs.
process.chdir(PROGRAM_DIR);
const SHARED = ['src/', 'package-lock.json'];
await part('program', 'dist/server', ['server/', ...SHARED], buildProgram);
if (existsSync('web/index.html') && !process.argv.includes('--program'))
  await part('page', 'dist/web', ['web/', 'vite.config.ts', ...SHARED], buildPage);
await linkExecutable();
