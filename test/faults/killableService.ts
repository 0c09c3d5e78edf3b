import { type ChildProcess, spawn, spawnSync } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import sharp from 'sharp';
import { PROGRAM_DIR } from '../server/runningLaboratory.ts';
import { randomFrom } from './randomFrom.ts';

/** The built service in a process of its own, which can be killed and started again on the same data. */
export interface KillableService {
  readonly dataDir: string;
  /** Starts it as a laboratory does; resolves with its address. */
  start(): Promise<string>;
  /** SIGKILL: nothing of the program runs any more. */
  kill(): Promise<void>;
  remove(): Promise<void>;
}

export async function killableService(): Promise<KillableService> {
  const built = spawnSync(process.execPath, ['server/build.mjs', '--program'], { cwd: PROGRAM_DIR, encoding: 'utf8' });
  if (built.status !== 0) throw new Error(built.stderr);
  const dataDir = await mkdtemp(join(tmpdir(), 'breakplane-killed-'));
  let running: ChildProcess | null = null;
  const kill = async (): Promise<void> => {
    if (!running) return;
    const ended = once(running, 'exit');
    running.kill('SIGKILL');
    await ended;
    running = null;
  };
  return {
    dataDir,
    async start() {
      const child = spawn(process.execPath, ['server/breakplane.mjs', 'serve', '--port', '0', '--data', dataDir], {
        cwd: PROGRAM_DIR,
        stdio: ['ignore', 'pipe', 'pipe'],
      });
      running = child;
      let said = '';
      for (const stream of [child.stdout, child.stderr]) {
        stream.on('data', (text: Buffer) => {
          said += text.toString();
        });
      }
      for (let i = 0; i < 600; i++) {
        const address = /http:\/\/127\.0\.0\.1:\d+/.exec(said)?.[0];
        if (address) return address;
        if (child.exitCode !== null) break;
        await pause(50);
      }
      throw new Error(`the service did not start: ${said}`);
    },
    kill,
    async remove() {
      await kill();
      await rm(dataDir, { recursive: true, force: true });
    },
  };
}

/** Asks the service below /api/v1; with `json` by POST. */
// biome-ignore lint/suspicious/noExplicitAny: what came is looked at field by field
export async function ask(address: string, path: string, json?: unknown): Promise<any> {
  const response = await fetch(`${address}/api/v1${path}`, {
    ...(json === undefined
      ? {}
      : { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(json) }),
  });
  return response.json();
}

/** A photo that is measured at once (it is too small); `tailBytes` make it large on the wire. */
export async function noisePhoto(seed: number, tailBytes = 0): Promise<Buffer> {
  const random = randomFrom(seed);
  const pixels = Buffer.from(Array.from({ length: 60 * 60 * 3 }, () => Math.floor(256 * random())));
  const photo = await sharp(pixels, { raw: { width: 60, height: 60, channels: 3 } })
    .png({ compressionLevel: 0 })
    .toBuffer();
  return Buffer.concat([photo, Buffer.alloc(tailBytes, seed)]);
}
