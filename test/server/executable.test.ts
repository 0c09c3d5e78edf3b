import { type ChildProcess, spawn, spawnSync } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest';
import { brokenBarPng } from './drawnPhotos.ts';
import { PROGRAM_DIR } from './runningLaboratory.ts';

let folder: string;
beforeAll(async () => {
  const built = spawnSync(process.execPath, ['server/build.mjs', '--program'], { cwd: PROGRAM_DIR, encoding: 'utf8' });
  expect(built.status, built.stderr).toBe(0);
  folder = await mkdtemp(join(tmpdir(), 'breakplane-executable-'));
  await writeFile(join(folder, 'helix.png'), await brokenBarPng({ planeAngleDeg: -40 }));
  await writeFile(join(folder, 'notes.jpg'), 'no photo');
});
afterAll(() => rm(folder, { recursive: true, force: true }));

const run = (args: readonly string[], env: Record<string, string> = {}) =>
  spawnSync(process.execPath, [join(PROGRAM_DIR, 'server', 'breakplane.mjs'), ...args], {
    cwd: folder,
    encoding: 'utf8',
    env: { ...process.env, ...env },
  });

describe('the executable', () => {
  test.each([{}, { BREAKPLANE_SOURCE: '1' }])('classifies, built and from source (%j)', (env) => {
    const { status, stdout } = run(
      ['classify', '--torque', '85N.m', '--diameter', '12mm', '--angle', '44', '--angle-uncertainty', '2', '--json'],
      env,
    );
    expect(status).toBe(0);
    expect(JSON.parse(stdout)).toMatchObject({ failureMode: 'normal-stress' });
  });

  test('measures photos, one JSON line each in the order given; status 3 when one was not measured', () => {
    const { status, stdout } = run(['measure', 'notes.jpg', 'helix.png', '--json']);
    expect(status).toBe(3);
    const lines = stdout
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line));
    expect(lines).toMatchObject([
      { file: 'notes.jpg', outcome: 'not-measured', reason: { code: 'not-a-photo' } },
      { file: 'helix.png', outcome: 'measured', coverageFactor: 2, hand: 'right' },
    ]);
    expect(Math.abs(lines[1].planeAngleDeg + 40)).toBeLessThan(2);
  });

  test('wrong usage is status 2, with what to do and without a stack', () => {
    for (const args of [['classify', '--torque', '85'], ['nonsense'], ['serve', '--port', 'http'], []]) {
      const { status, stderr } = run(args);
      expect(status, `${args.join(' ')}: ${stderr}`).toBe(2);
      expect(stderr).not.toMatch(/\n\s+at /);
      expect(stderr.length).toBeGreaterThan(10);
    }
  });

  test('imports a log, backs it up, restores it elsewhere; refuses to write over anything', () => {
    const log = join(PROGRAM_DIR, 'samples', 'logs', 'demo.csv');
    const imported = run(['import', log, '--data', 'lab', '--json']);
    expect(imported.status, imported.stderr).toBe(0);
    expect(JSON.parse(imported.stdout)).toMatchObject({ refused: 0, updated: 0, unchanged: 0, photosQueued: 0 });
    const again = JSON.parse(run(['import', log, '--data', 'lab', '--json']).stdout);
    expect(again).toMatchObject({ stored: 0, updated: 0, unchanged: again.rows });
    expect(run(['backup', 'lab.tar', '--data', 'lab'])).toMatchObject({ status: 0 });
    expect(run(['restore', 'lab.tar', '--data', 'lab2'])).toMatchObject({
      status: 0,
      stdout: expect.stringContaining('all checksums right'),
    });
    expect(JSON.parse(run(['import', log, '--data', 'lab2', '--json']).stdout)).toMatchObject({
      stored: 0,
      unchanged: again.rows,
    });
    for (const args of [
      ['backup', 'lab.tar', '--data', 'lab'],
      ['restore', 'lab.tar', '--data', 'lab2'],
      ['backup', 'other.tar', '--data', 'nowhere'],
      ['restore', 'notes.jpg', '--data', 'lab3'],
    ]) {
      const { status, stderr } = run(args);
      expect(status, args.join(' ')).toBe(2);
      expect(stderr).not.toMatch(/\n\s+at /);
    }
  });

  test('says its version', () => {
    expect(run(['--version'])).toMatchObject({ status: 0, stdout: expect.stringMatching(/^\d+\.\d+\.\d+\n$/) });
  });
});

describe('breakplane serve', () => {
  const children: ChildProcess[] = [];
  afterEach(() => {
    for (const child of children.splice(0)) child.kill('SIGKILL');
  });

  function serve(...args: string[]) {
    const child = spawn(process.execPath, [join(PROGRAM_DIR, 'server', 'breakplane.mjs'), 'serve', ...args], {
      cwd: folder,
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    children.push(child);
    const said = { text: '' };
    for (const stream of [child.stdout, child.stderr])
      stream.on('data', (bytes: Buffer) => (said.text += bytes.toString()));
    return { child, said, ended: once(child, 'exit') };
  }

  async function addressIn(said: { text: string }): Promise<string> {
    for (let i = 0; i < 600; i++) {
      const address = /http:\/\/127\.0\.0\.1:\d+\//.exec(said.text)?.[0];
      if (address) return address;
      await pause(50);
    }
    throw new Error(`the service did not start: ${said.text}`);
  }

  test.each(['SIGINT', 'SIGTERM'] as const)(
    'prints its address, answers there, and stops in good order on %s',
    async (signal) => {
      const { child, said, ended } = serve('--port', '0', '--data', join(folder, `data-${signal}`));
      const address = await addressIn(said);
      expect(await (await fetch(`${address}healthz`)).json()).toMatchObject({ status: 'ok' });
      expect(said.text).toContain('no test yet');
      child.kill(signal);
      expect(await ended).toEqual([0, null]);
    },
  );

  test('the data folder of a running service is not opened a second time', async () => {
    const data = join(folder, 'data-shared');
    const first = serve('--port', '0', '--data', data);
    await addressIn(first.said);
    const second = serve('--port', '0', '--data', data);
    expect(await second.ended).toEqual([2, null]);
    expect(second.said.text).toContain(data);
    expect(second.said.text).toContain(`process ${first.child.pid}`);
  });

  test('a port that is taken is refused by name', async () => {
    const first = serve('--port', '0', '--data', join(folder, 'data-a'));
    const { port } = new URL(await addressIn(first.said));
    const second = serve('--port', port, '--data', join(folder, 'data-b'));
    expect(await second.ended).toEqual([2, null]);
    expect(second.said.text).toContain(`got ${port}: another program listens there`);
  });

  test.each(['0.0.0.0', '192.168.0.1', 'example.org'])('does not listen on %s', async (host) => {
    const { ended, said } = serve('--host', host, '--port', '0', '--data', join(folder, 'data-host'));
    expect(await ended).toEqual([2, null]);
    expect(said.text).toContain('not-loopback');
  });

  test('a data folder that cannot be one is refused', async () => {
    const { ended, said } = serve('--port', '0', '--data', join(folder, 'notes.jpg'));
    expect(await ended).toEqual([2, null]);
    expect(said.text).toContain('notes.jpg');
  });
});
