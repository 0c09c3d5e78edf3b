import { spawnSync } from 'node:child_process';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { PROGRAM_DIR } from '../server/runningLaboratory.ts';

const run = (...args: string[]) =>
  spawnSync(process.execPath, [join(PROGRAM_DIR, 'server', 'breakplane.mjs'), ...args], {
    encoding: 'utf8',
    env: { ...process.env, BREAKPLANE_SOURCE: '1' },
  });
const classify = (angle: string) =>
  run(
    'classify',
    '--torque',
    '85N.m',
    '--diameter',
    '12mm',
    '--angle',
    angle,
    '--angle-uncertainty',
    '2',
    '--torque-direction',
    'ccw',
    '--json',
  );

describe('breakplane classify', () => {
  test('a 44° break under counter-clockwise torque is a normal-stress failure', () => {
    const { status, stdout } = classify('44');
    expect(status).toBe(0);
    const text = stdout;
    const answer = JSON.parse(stdout);
    // τ = 16 T/(π d³) = 16 · 85 000 N·mm / (π · 12³ mm³) = 250.5 MPa (torsion of a solid round bar).
    const expected = (16 * 85_000) / (Math.PI * 12 ** 3);
    expect(expected).toBeCloseTo(250.5, 1);
    expect(answer.failureMode).toBe('normal-stress');
    expect(text).toMatch(/250\.5/);
    expect(text).toMatch(/"planeAngleDeg":\s?45/);
  });

  test('a 2° break is a transverse shear failure', () => {
    expect(JSON.parse(classify('2').stdout).failureMode).toBe('shear-transverse');
  });

  test('a −44° break contradicts the recorded direction', () => {
    expect(classify('-44').stdout).toMatch(/"sign":\s?"contradicts"/);
  });
});

test.each(['measure', 'classify', 'import', 'report', 'serve'])(
  '%s --help says what it does and exits with 0',
  (command) => {
    const { status, stdout } = run(command, '--help');
    expect(status).toBe(0);
    expect(stdout).toMatch(/Usage: breakplane/);
    expect(stdout).toMatch(/Example/);
  },
);
