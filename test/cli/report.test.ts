import { mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { command, shell } from './commandLine.ts';

let folder: string;
const at = (name: string): string => join(folder, name);
const LOG = [
  'specimen_id,test_date,material,heat,diameter_mm,torque_max_Nm,torque_direction,angle_deg,angle_u_deg,operator',
  ...Array.from(
    { length: 12 },
    (_, i) => `G-${i},2026-03-${10 + i},grey cast iron,G-117,20,${410 + (i % 5)},ccw,${43 + (i % 3)},1,bench 2`,
  ),
  'G-20,2026-04-01,grey cast iron,G-118,20,380,cw,-44,1,bench 2',
  'G-21,2026-04-02,grey cast iron,G-118,20,382,cw,-45,1,bench 2',
  'S-1,2026-03-04,low-carbon steel,S-1,12,140,ccw,1,1,bench 1',
].join('\n');

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'breakplane-report-'));
  await writeFile(at('log.csv'), LOG);
  expect(await command(['import', at('log.csv'), '--data', at('data')])).toMatchObject({ status: 0 });
});
afterAll(() => rm(folder, { recursive: true, force: true }));

const report = (...args: string[]) => command(['report', '--data', at('data'), ...args]);

describe('breakplane report', () => {
  test('one test as PDF, the same bytes for the same moment', async () => {
    const moment = ['--date', '2026-05-01T08:00:00Z', '--test', 'G-3'];
    expect(await report(...moment, '--out', at('a.pdf'))).toMatchObject({ status: 0, stdout: '' });
    await report(...moment, '--out', at('b.pdf'));
    const [a, b] = await Promise.all([readFile(at('a.pdf')), readFile(at('b.pdf'))]);
    expect(a.subarray(0, 5).toString()).toBe('%PDF-');
    expect(a.equals(b)).toBe(true);
  });

  test('every test of a heat as JSON, with stress and failure mode', async () => {
    const { status, stderr } = await report('--where', 'heat=G-118', '--format', 'json', '--out', at('heat.json'));
    expect(status).toBe(0);
    expect(stderr).toContain('2 tests');
    const { tests } = JSON.parse(await readFile(at('heat.json'), 'utf8'));
    expect(tests.map((t: { test: { specimenId: string } }) => t.test.specimenId).sort()).toEqual(['G-20', 'G-21']);
    for (const { assessment } of tests) {
      expect(assessment.statement.mode).toBe('normal-stress');
      // τ = 16 T/(π d³), torsion of a solid round bar; negative torque has its tension plane at −45°.
      expect(Math.abs(assessment.stress.surface.tauMPa)).toBeGreaterThan(240);
      expect(assessment.planes.find((p: { plane: string }) => p.plane === 'tension').planeAngleDeg).toBeCloseTo(-45, 6);
    }
  });

  test('no half report is left, and an existing file is not damaged by a failure', async () => {
    await writeFile(at('keep.pdf'), 'the laboratory’s own');
    expect(await report('--test', 'nobody', '--out', at('keep.pdf'))).toMatchObject({ status: 2 });
    expect(await readFile(at('keep.pdf'), 'utf8')).toBe('the laboratory’s own');
    expect((await readdir(folder)).filter((name) => name.endsWith('.part'))).toEqual([]);
  });

  test.each([
    ['a test that is not there', ['--test', 'nobody'], /"nobody"/],
    ['a heat that is not there', ['--where', 'heat=none'], /no test fits/],
    ['a field that cannot be asked for', ['--where', 'colour=red'], /material=…, heat=… or text=…, got "colour=red"/],
    ['two choices at once', ['--where', 'heat=G-118', '--test', 'G-1'], /cannot be used together/],
    ['an unknown form', ['--format', 'xls'], /--format must be/],
    ['an unknown paper', ['--paper', 'a3'], /a4 or us-letter, got "a3"/],
    ['a moment that is none', ['--date', 'soon'], /--date must be a moment/],
  ])('%s is refused: status 2 and the reason', async (_what, args, words) => {
    const answer = await report(...args, '--out', at('never.pdf'));
    expect(answer).toMatchObject({ status: 2, stdout: '' });
    expect(answer.stderr).toMatch(words);
    expect(await readdir(folder)).not.toContain('never.pdf');
  });
});

describe('breakplane statistics', () => {
  test('by heat, as data: modes, mean axes turned to one direction of torque, strengths, comparison', async () => {
    const { status, stdout } = await command([
      ...['statistics', '--data', at('data'), '--where', 'material=grey cast iron', '--by', 'heat', '--json'],
    ]);
    expect(status).toBe(0);
    const answer = JSON.parse(stdout);
    expect(answer).toMatchObject({ tests: 14, by: 'heat' });
    const [g117, g118] = answer.groups;
    expect(g117).toMatchObject({ name: 'G-117', tests: 12 });
    expect(g117.modes).toMatchObject([{ mode: 'normal-stress', share: { count: 12, of: 12 } }]);
    expect(g117.planeAngles.meanAxisDeg).toBeCloseTo(44, 0);
    // The two of G-118 broke under clockwise torque at −44 and −45.
    expect(g118.planeAngles.meanAxisDeg).toBeCloseTo(44.5, 6);
    // τ = 16 T/(π d³) of the mean torque 381 N·m.
    expect(g118.strength.meanMPa).toBeCloseTo((16 * 381_000) / (Math.PI * 20 ** 3), 6);
    expect(answer.comparison.pairs).toMatchObject([{ first: 'G-117', second: 'G-118' }]);
    expect(answer.comparison.pairs[0].strength.p).toBeLessThan(0.05);
  });

  test('as text, with what too few tests cannot say', async () => {
    const { status, stdout } = await command(['statistics', '--data', at('data'), '--by', 'material']);
    expect(status).toBe(0);
    expect(stdout).toMatch(/material grey cast iron: 14 tests/);
    expect(stdout).toMatch(/plane angles \(14\) +mean axis 4[34]\.\d° ± 0\.\d°/);
    expect(stdout).toContain('One strength says nothing about scatter.');
    expect(stdout).not.toContain('NaN');
    expect(stdout).not.toContain('\u001b[');
  });

  test('an unknown grouping is refused', async () => {
    const { status, stderr } = await command(['statistics', '--data', at('data'), '--by', 'colour']);
    expect(status).toBe(2);
    expect(stderr).toContain('material, heat, section, operator, got "colour"');
  });
});

describe('as a shell runs them', () => {
  test('colours on a terminal only', async () => {
    const args = ['classify', '--angle', '44', '--angle-uncertainty', '2'];
    expect((await command(args, { terminal: true })).stdout).toContain('\u001b[');
    expect((await command(args, { terminal: true, env: { NO_COLOR: '1' } })).stdout).not.toContain('\u001b[');
    expect((await command(args)).stdout).not.toContain('\u001b[');
  });

  test('the report command takes the data folder from BREAKPLANE_DATA', () => {
    const { status, stderr } = shell(['report', '--test', 'G-1', '--format', 'json', '--out', at('env.json')], folder, {
      BREAKPLANE_DATA: at('data'),
    });
    expect(status, stderr).toBe(0);
  });
});
