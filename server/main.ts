import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { runCli } from '../src/cli/main.ts';
import type { CliPorts } from '../src/cli/ports.ts';
import { createMeasurePool } from './measure/measurePool.ts';

function versionOf(programDir: string): string {
  const manifest: { version?: unknown } = JSON.parse(readFileSync(join(programDir, 'package.json'), 'utf8'));
  return typeof manifest.version === 'string' ? manifest.version : 'unknown';
}

/** What the commands work with on this machine. Store and service are loaded only by the commands that use them. */
function portsOf(programDir: string): CliPorts {
  const version = versionOf(programDir);
  return {
    stdout: process.stdout,
    stderr: process.stderr,
    env: process.env,
    version,
    programDir,
    createMeasurePool,
    async openRecords(dataDir) {
      const { openStore } = await import('./store/openStore.ts');
      return openStore(dataDir);
    },
    async backup(dataDir, archive) {
      const { writeBackup } = await import('./backup/writeBackup.ts');
      return writeBackup(dataDir, archive, version);
    },
    async restore(archive, dataDir) {
      const { restoreBackup } = await import('./backup/restoreBackup.ts');
      return restoreBackup(archive, dataDir);
    },
    async serve(options) {
      const { serve } = await import('./serve.ts');
      return serve({ ...options, programDir, version });
    },
  };
}

/** Runs one command line. @returns the exit status */
export function main(argv: readonly string[], programDir: string): Promise<number> {
  return runCli(argv, portsOf(programDir));
}
