import { describe, expect, test } from 'vitest';
import { command, shell } from './commandLine.ts';

const LOADS = ['--torque', '85N.m', '--diameter', '12mm', '--torque-direction', 'ccw', '--json'];
const classify = async (...args: string[]) => {
  const answer = await command(['classify', ...args]);
  return { ...answer, json: answer.status === 0 ? JSON.parse(answer.stdout) : null };
};
const planeOf = (json: { planes: { plane: string; planeAngleDeg: number }[] }, name: string) =>
  json.planes.find(({ plane }) => plane === name)?.planeAngleDeg;

describe('breakplane classify', () => {
  test('a 44° break under counter-clockwise torque is a normal-stress failure, as a shell runs it', () => {
    const { status, stdout, stderr } = shell(['classify', ...LOADS, '--angle', '44', '--angle-uncertainty', '2']);
    expect(status, stderr).toBe(0);
    const answer = JSON.parse(stdout);
    // τ = 16 T/(π d³) = 16 · 85 000 N·mm / (π · 12³ mm³) = 250.5 MPa (torsion of a solid round bar).
    expect(answer.stress.elastic.shearStressMPa).toBeCloseTo((16 * 85_000) / (Math.PI * 12 ** 3), 9);
    expect(answer.stress.elastic.shearStressMPa).toBeCloseTo(250.5, 1);
    // Fully plastic: three quarters of it (Nadai).
    expect(answer.stress.fullyPlastic.shearStressMPa).toBeCloseTo(0.75 * answer.stress.elastic.shearStressMPa, 9);
    // Pure torsion: σ1 = τ on +45°, −τ on −45°, shear on 0° and 90°.
    expect(answer.stress.sigma1MPa).toBeCloseTo(250.5, 1);
    expect(planeOf(answer, 'tension')).toBeCloseTo(45, 9);
    expect(planeOf(answer, 'compression')).toBeCloseTo(-45, 9);
    expect(planeOf(answer, 'shear-transverse')).toBeCloseTo(0, 9);
    expect(planeOf(answer, 'shear-longitudinal')).toBeCloseTo(90, 9);
    expect(answer).toMatchObject({ failureMode: 'normal-stress', flags: [] });
    expect(answer.probabilities['normal-stress']).toBeGreaterThan(0.999);
    const sum = Object.values(answer.probabilities as Record<string, number>).reduce((a, b) => a + b, 0);
    expect(sum).toBeCloseTo(1, 9);
    expect(answer.statement.ruleText).toMatch(/95/);
  });

  test('a 2° break is a transverse shear failure', async () => {
    const { json } = await classify(...LOADS, '--angle', '2', '--angle-uncertainty', '2');
    expect(json).toMatchObject({ failureMode: 'shear-transverse', flags: [] });
  });

  test('an 88° break is a longitudinal shear failure, −91° too', async () => {
    for (const angle of ['88', '-91']) {
      const { json } = await classify(...LOADS, '--angle', angle, '--angle-uncertainty', '2');
      expect(json.failureMode).toBe('shear-longitudinal');
    }
  });

  test('a −44° break contradicts the recorded direction', async () => {
    const { json } = await classify(...LOADS, '--angle', '-44', '--angle-uncertainty', '2');
    expect(json.flags).toMatchObject([{ message: expect.stringMatching(/direction|torque/) }]);
    expect(json.statement.evidence).toContainEqual(expect.objectContaining({ sign: 'contradicts' }));
  });

  test('between two planes nothing is stated', async () => {
    const { json } = await classify(...LOADS, '--angle', '22.5', '--angle-uncertainty', '2');
    expect(json.failureMode).toBe('indeterminate');
    expect(json.statement.probability).toBeLessThan(0.95);
    // The cells meet at 22.5°: half of the distribution on each side.
    expect(json.probabilities['normal-stress']).toBeCloseTo(0.5, 6);
  });

  test('other units give the same: 752.3 lbf·in and 0.47244 in', async () => {
    // 1 lbf·in = 0.1129848290276167 N·m, 1 in = 25.4 mm (NIST SP 811, appendix B.8).
    const { json } = await classify(
      ...['--torque', `${85 / 0.1129848290276167} lbf·in`, '--diameter', `${12 / 25.4}in`, '--json'],
      ...['--angle', '44', '--angle-uncertainty', '2'],
    );
    expect(json.stress.elastic.shearStressMPa).toBeCloseTo((16 * 85_000) / (Math.PI * 12 ** 3), 6);
  });

  test('a negative torque is clockwise: the tension plane is at −45°', async () => {
    const { json } = await classify('--torque', '-85N.m', '--diameter', '12mm', '--json');
    expect(planeOf(json, 'tension')).toBeCloseTo(-45, 9);
    expect(json.failureMode).toBeNull();
  });

  test('axial tension turns the planes: tan 2θ = 2τ/σ', async () => {
    const { json } = await classify(...LOADS, '--axial-force', '20kN');
    const sigma = 20_000 / ((Math.PI * 12 ** 2) / 4);
    const tau = (16 * 85_000) / (Math.PI * 12 ** 3);
    const theta = (Math.atan2(2 * tau, sigma) * 90) / Math.PI;
    expect(planeOf(json, 'tension')).toBeCloseTo(theta, 9);
    expect(json.stress.sigma1MPa).toBeCloseTo(sigma / 2 + Math.hypot(sigma / 2, tau), 6);
  });

  test('a bore: the tube’s own polar second moment of area', async () => {
    const { json } = await classify(...LOADS, '--bore', '8mm');
    expect(json.stress.elastic.shearStressMPa).toBeCloseTo((16 * 85_000 * 12) / (Math.PI * (12 ** 4 - 8 ** 4)), 9);
  });

  test.each([
    ['a torque without its unit', ['--torque', '85', '--diameter', '12mm'], /unit/],
    ['a torque in a unit of stress', ['--torque', '85MPa', '--diameter', '12mm'], /MPa/],
    ['a bore as large as the bar', ['--torque', '85N.m', '--diameter', '12mm', '--bore', '12mm'], /bore must be/],
    ['a diameter of three kilometres', ['--torque', '85N.m', '--diameter', '3km'], /3km|diameter must be/],
    ['a diameter of zero', ['--torque', '85N.m', '--diameter', '0mm'], /diameter must be > 0/],
    ['an angle without its uncertainty', ['--angle', '44'], /expanded uncertainty/],
    ['an uncertainty without an angle', ['--angle-uncertainty', '2'], /--angle/],
    ['a negative uncertainty', ['--angle', '44', '--angle-uncertainty', '-2'], /uncertainty/],
    [
      'a direction that is none',
      ['--angle', '44', '--angle-uncertainty', '2', '--torque-direction', 'up'],
      /ccw or cw/,
    ],
    [
      'a sign against the direction',
      ['--torque', '-85N.m', '--diameter', '12mm', '--torque-direction', 'ccw'],
      /clockwise/,
    ],
    [
      'a limit beyond certainty',
      ['--angle', '44', '--angle-uncertainty', '2', '--minimum-probability', '2'],
      /0\.5|probability/,
    ],
  ])('%s is refused: status 2, the reason, no stack', async (_what, args, words) => {
    const answer = await command(['classify', ...args]);
    expect(answer).toMatchObject({ status: 2, stdout: '' });
    expect(answer.stderr).toMatch(words);
    expect(answer.stderr).not.toMatch(/\n\s+at /);
  });
});

test.each(['measure', 'classify', 'import', 'report', 'statistics', 'serve', 'backup', 'restore'])(
  '%s --help says what it does, with an example, and exits with 0',
  async (name) => {
    const { status, stdout } = await command([name, '--help']);
    expect(status).toBe(0);
    expect(stdout).toMatch(new RegExp(`Usage: breakplane ${name}`));
    expect(stdout).toMatch(/Example/);
  },
);
