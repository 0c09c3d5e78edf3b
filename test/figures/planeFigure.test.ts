import { describe, expect, test } from 'vitest';
import { planeFigure } from '../../src/figures/planeFigure.ts';
import { assessTest } from '../../src/verdict/assessTest.ts';
import { testInput } from '../server/runningLaboratory.ts';

const reading = { planeAngleDeg: 44, expandedUncertaintyDeg: 2, planeTiltDeg: null };

/** Points of the first path with the given stroke, in figure px. */
function pointsOf(svg: string, stroke: string): [number, number][] {
  const d = new RegExp(`<path d="([^"]+)" fill="none" stroke="${stroke}"`).exec(svg)?.[1] ?? '';
  return d
    .slice(1)
    .split('L')
    .map((pair) => pair.split(',').map(Number) as [number, number]);
}

describe('the figure of stresses on every plane', () => {
  const assessment = assessTest(testInput(), []);
  const svg = planeFigure(assessment, reading);

  test('draws σn = τ sin 2θ and τnt = τ cos 2θ of pure torsion (stress transformation, Mohr)', () => {
    for (const [stroke, curve] of [
      ['#1f5fa8', (a: number) => Math.sin(2 * a)],
      ['#b35a00', (a: number) => Math.cos(2 * a)],
    ] as const) {
      const points = pointsOf(svg, stroke);
      expect(points).toHaveLength(181);
      const ys = points.map((p) => p[1]);
      const middle = (Math.max(...ys) + Math.min(...ys)) / 2;
      const half = (Math.max(...ys) - Math.min(...ys)) / 2;
      points.forEach(([, y], i) => {
        expect((middle - y) / half).toBeCloseTo(curve(((i - 90) * Math.PI) / 180), 2);
      });
    }
  });

  test('is text a drawing program and a strict page policy accept', () => {
    expect(svg.startsWith('<svg')).toBe(true);
    expect(svg).not.toMatch(/<script|style=|onload|href/);
    expect((svg.match(/<(\w+)[^>]*[^/]>/g) ?? []).length).toBe((svg.match(/<\/\w+>/g) ?? []).length);
    expect(svg).toContain('measured θ ± U');
  });

  test('says in words what it shows', () => {
    expect(svg).toMatch(/<title>[^<]*tension plane at 45\.0°[^<]*measured plane angle 44\.0°/);
  });

  test('a hostile title stays text', () => {
    expect(planeFigure(assessment, null, { title: '<script>"&' })).toContain('&lt;script&gt;&quot;&amp;');
  });
});
