import { spawnSync } from 'node:child_process';
import { PassThrough } from 'node:stream';
import { openStore } from '../../server/store/openStore.ts';
import { runCli } from '../../src/cli/main.ts';
import type { CliPorts, TextOutput } from '../../src/cli/ports.ts';
import type { PhotoMeasurement } from '../../src/records/reading.ts';
import { PROGRAM_DIR, poolInThisThread } from '../server/runningLaboratory.ts';

export interface CommandAnswer {
  readonly status: number;
  readonly stdout: string;
  readonly stderr: string;
}

/** Runs the executable from its sources, as a shell does. */
export function shell(args: readonly string[], cwd = PROGRAM_DIR, env: Record<string, string> = {}): CommandAnswer {
  const { status, stdout, stderr } = spawnSync(process.execPath, [`${PROGRAM_DIR}/server/breakplane.mjs`, ...args], {
    cwd,
    encoding: 'utf8',
    env: { ...process.env, BREAKPLANE_SOURCE: '1', ...env },
  });
  return { status: status ?? -1, stdout, stderr };
}

function collector(isTTY: boolean) {
  const chunks: string[] = [];
  const stream = new PassThrough();
  stream.on('data', (chunk: Buffer) => chunks.push(chunk.toString()));
  const output: TextOutput = Object.assign(stream, { isTTY, columns: 100 });
  return { output, text: () => chunks.join('') };
}

export interface RunOptions {
  /** Standard error and standard output are terminals. */
  readonly terminal?: boolean;
  readonly env?: Record<string, string>;
  /** Measures instead of the real measurement. */
  readonly measure?: (path: string) => Promise<PhotoMeasurement>;
}

/** Runs one command line in this process, with the real store; quicker than a shell. */
export async function command(args: readonly string[], options: RunOptions = {}): Promise<CommandAnswer> {
  const { terminal = false, env = {}, measure } = options;
  const stdout = collector(terminal);
  const stderr = collector(terminal);
  const ports: CliPorts = {
    stdout: stdout.output,
    stderr: stderr.output,
    env,
    version: '0.0.0-test',
    programDir: PROGRAM_DIR,
    openRecords: (dataDir) => openStore(dataDir),
    createMeasurePool: () =>
      measure ? { measure: (job) => measure(job.path), close: async () => {} } : poolInThisThread(),
    serve: () => Promise.reject(new Error('no service in this test')),
  };
  const status = await runCli(args, ports);
  return { status, stdout: stdout.text(), stderr: stderr.text() };
}
