#!/usr/bin/env node
/**
 * The executable `breakplane`: runs the built program, or with BREAKPLANE_SOURCE=1 the TypeScript sources as they are.
 * Exit status: what the command says (0, 2, 3); 70 when the program itself is at fault.
 */
import { existsSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';

const FAULT = 70;
const programDir = dirname(dirname(fileURLToPath(import.meta.url)));
const fromSource = Boolean(process.env.BREAKPLANE_SOURCE);
const entry = join(programDir, fromSource ? 'server/main.ts' : 'dist/server/main.js');

function fail(error) {
  process.stderr.write(`breakplane: fault of the program: ${error instanceof Error ? error.message : String(error)}\n`);
  if (process.env.BREAKPLANE_DEBUG && error instanceof Error) process.stderr.write(`${error.stack}\n`);
  else process.stderr.write('Run again with BREAKPLANE_DEBUG=1 to see where.\n');
  process.exitCode = FAULT;
}

try {
  if (!existsSync(entry)) throw new Error(`it is not built yet; run "npm run build" in ${programDir}`);
  if (fromSource) (await import('tsx/esm/api')).register();
  const { main } = await import(pathToFileURL(entry).href);
  process.exitCode = await main(process.argv.slice(2), programDir);
} catch (error) {
  fail(error);
}
