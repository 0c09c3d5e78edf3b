import { medianOf } from './leastSquares.ts';
import type { SurfacePoint } from './unroll.ts';
import type { UnrolledMap } from './unrolledMap.ts';

/** A trace moved to the middle between the two lips of its gap. */
export interface CentredTrace {
  readonly points: readonly SurfacePoint[];
  /** The two lips by themselves; a point without lips of its own takes the median half gap. */
  readonly lips: readonly [readonly SurfacePoint[], readonly SurfacePoint[]];
  /** Median distance between the lips, radii. */
  readonly gapRadii: number;
  /** Scatter of the centre of neighbouring points, radii: how well one point is placed. */
  readonly pointScatterRadii: number;
}

/**
 * Places every point of a path midway between the lips of its gap. Along the normal of the path the colour is
 * compared with the gap (at the path) and with the surface (beyond); a lip is where it is halfway between them.
 */
export function centreOfGap(map: UnrolledMap, path: readonly SurfacePoint[], reachRadii: number): CentredTrace {
  const step = map.stepRadii / 2;
  const half = Math.max(6, Math.round(reachRadii / step));
  const n = path.length;
  const span = Math.max(3, Math.round(0.05 / map.stepRadii));
  const shifts = new Float64Array(n).fill(Number.NaN);
  const gaps: number[] = [];
  const halfGaps = new Float64Array(n).fill(Number.NaN);
  const directions: { x: number; phi: number }[] = [];
  const profile = [
    new Float64Array(2 * half + 1),
    new Float64Array(2 * half + 1),
    new Float64Array(2 * half + 1),
  ] as const;
  const away = new Float64Array(2 * half + 1);
  for (let i = 0; i < n; i++) {
    const a = path[Math.max(0, i - span)] as SurfacePoint;
    const b = path[Math.min(n - 1, i + span)] as SurfacePoint;
    const length = Math.hypot(b.x - a.x, b.phi - a.phi) || 1;
    // Normal of the path on the surface.
    const normal = { x: (b.phi - a.phi) / length, phi: -(b.x - a.x) / length };
    directions.push(normal);
    const p = path[i] as SurfacePoint;
    if (!sampleLine(map, path, i, normal, step, half, profile)) continue;
    const lips = lipsOf(profile, away, half);
    if (lips === null) continue;
    shifts[i] = ((lips.low + lips.high) / 2 - half) * step;
    gaps.push((lips.high - lips.low) * step);
    halfGaps[i] = ((lips.high - lips.low) / 2) * step;
  }
  // A point without lips of its own, or far from its neighbours', takes the neighbours' shift.
  const smooth = new Float64Array(n);
  const window: number[] = [];
  const differences: number[] = [];
  for (let i = 0; i < n; i++) {
    window.length = 0;
    for (let k = Math.max(0, i - 4); k <= Math.min(n - 1, i + 4); k++) {
      if (Number.isFinite(shifts[k] as number)) window.push(shifts[k] as number);
    }
    const middle = window.length >= 3 ? medianOf(window) : 0;
    smooth[i] = middle;
    if (Number.isFinite(shifts[i] as number)) differences.push(Math.abs((shifts[i] as number) - middle));
  }
  const points = path.map((p, i) => ({
    x: p.x + (smooth[i] as number) * (directions[i]?.x ?? 0),
    phi: p.phi + (smooth[i] as number) * (directions[i]?.phi ?? 0),
  }));
  const gapRadii = gaps.length > 0 ? medianOf(gaps) : 0;
  const lip = (side: 1 | -1) =>
    points.map((p, i) => {
      const own = halfGaps[i] as number;
      const half = side * (Number.isFinite(own) ? own : gapRadii / 2);
      return { x: p.x + half * (directions[i]?.x ?? 0), phi: p.phi + half * (directions[i]?.phi ?? 0) };
    });
  return {
    points,
    lips: [lip(-1), lip(1)],
    gapRadii,
    pointScatterRadii: differences.length > 4 ? 1.4826 * medianOf(differences) : map.stepRadii,
  };
}

/** Mean colour along the normal, over a few neighbouring points of the path: lips run on, noise does not. */
function sampleLine(
  map: UnrolledMap,
  path: readonly SurfacePoint[],
  index: number,
  normal: { x: number; phi: number },
  step: number,
  half: number,
  out: readonly [Float64Array, Float64Array, Float64Array],
): boolean {
  const { columns, rows, stepRadii } = map;
  for (const plane of out) plane.fill(0);
  const p = path[index] as SurfacePoint;
  const side = 1;
  for (let t = -side; t <= side; t++) {
    // Along the tangent, not along the stairs of the path.
    const px = p.x - t * normal.phi * stepRadii;
    const pphi = p.phi + t * normal.x * stepRadii;
    for (let k = -half; k <= half; k++) {
      const c = (px + k * step * normal.x - map.firstX) / stepRadii;
      const r = (pphi + k * step * normal.phi - map.firstPhi) / stepRadii;
      // Beyond the searched face the last row is repeated: the ends of the trace keep their lips.
      const rr = Math.max(0, Math.min(rows - 1.001, r));
      if (c < 0 || c > columns - 1.001) return false;
      const c0 = c | 0;
      const r0 = rr | 0;
      const fc = c - c0;
      const fr = rr - r0;
      const i = r0 * columns + c0;
      for (let m = 0; m < 3; m++) {
        const plane = map.planes[m as 0 | 1 | 2];
        const top = (plane[i] as number) * (1 - fc) + (plane[i + 1] as number) * fc;
        const low = (plane[i + columns] as number) * (1 - fc) + (plane[i + columns + 1] as number) * fc;
        const to = out[m as 0 | 1 | 2] as Float64Array;
        to[k + half] = (to[k + half] as number) + (top * (1 - fr) + low * fr) / (2 * side + 1);
      }
    }
  }
  return true;
}

/** Positions (in samples) of the two lips; null when there is no gap to speak of. */
function lipsOf(
  profile: readonly [Float64Array, Float64Array, Float64Array],
  away: Float64Array,
  half: number,
): { low: number; high: number } | null {
  const n = away.length;
  // The surface on each side: mean of the outer fifth; the gap: the sample near the path furthest from both.
  const outer = Math.max(2, Math.floor(half / 2.5));
  const mean = (from: number, to: number, m: 0 | 1 | 2) => {
    let sum = 0;
    for (let k = from; k < to; k++) sum += profile[m][k] as number;
    return sum / (to - from);
  };
  const side = ([0, 1, 2] as const).map((m) => ({ low: mean(0, outer, m), high: mean(n - outer, n, m) }));
  // Lightness decides the direction; colours add to it.
  let bottom = half;
  let depth = -1;
  const reach = Math.max(2, Math.round(half * 0.35));
  for (let k = half - reach; k <= half + reach; k++) {
    let toLow = 0;
    let toHigh = 0;
    for (const m of [0, 1, 2] as const) {
      toLow += ((profile[m][k] as number) - (side[m]?.low ?? 0)) ** 2;
      toHigh += ((profile[m][k] as number) - (side[m]?.high ?? 0)) ** 2;
    }
    const d = Math.min(toLow, toHigh);
    if (d > depth) {
      depth = d;
      bottom = k;
    }
  }
  if (depth < 16) return null;
  // The gap shows its walls, lit or in shade: a lip is where the surface's own colour begins, not where the dark ends.
  const pixel = 2;
  const crossing = (towards: -1 | 1): number | null => {
    const level = ([0, 1, 2] as const).map((m) => (towards === -1 ? (side[m]?.low ?? 0) : (side[m]?.high ?? 0)));
    let total = 0;
    for (let k = 0; k < n; k++) {
      let d = 0;
      for (const m of [0, 1, 2] as const) d += ((profile[m][k] as number) - (level[m] as number)) ** 2;
      away[k] = Math.sqrt(d);
    }
    for (let k = 0; k < outer; k++) total += (away[towards === -1 ? k : n - 1 - k] as number) ** 2;
    const scatter = Math.sqrt(total / outer);
    const limit = Math.max(4, 2 * scatter, 0.2 * (away[bottom] as number));
    let k = bottom;
    while (k > 0 && k < n - 1 && ((away[k] as number) > limit || (away[k + towards] as number) > limit)) k += towards;
    if (k <= 0 || k >= n - 1) return null;
    // Half of the step from the surface to what lies just inside the lip.
    let inside = 0;
    for (let q = k; q !== bottom && Math.abs(q - k) <= 3 * pixel; q -= towards)
      inside = Math.max(inside, away[q] as number);
    const target = inside / 2;
    let q = k;
    while (q !== bottom && (away[q] as number) < target) q -= towards;
    const at = away[q] as number;
    const next = away[q + towards] as number;
    return at > next ? q + towards * Math.min(1, (at - target) / (at - next)) : q;
  };
  const low = crossing(-1);
  const high = crossing(1);
  if (low === null || high === null) return null;
  return { low, high };
}
