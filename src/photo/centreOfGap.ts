import { medianOf } from './leastSquares.ts';
import type { SurfacePoint } from './unroll.ts';
import type { UnrolledMap } from './unrolledMap.ts';

/** A trace moved to the middle between the two lips of its gap. */
export interface CentredTrace {
  readonly points: readonly SurfacePoint[];
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
    if (!sampleLine(map, p, normal, step, half, profile)) continue;
    const lips = lipsOf(profile, away, half);
    if (lips === null) continue;
    shifts[i] = ((lips.low + lips.high) / 2 - half) * step;
    gaps.push((lips.high - lips.low) * step);
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
  return {
    points,
    gapRadii: gaps.length > 0 ? medianOf(gaps) : 0,
    pointScatterRadii: differences.length > 4 ? 1.4826 * medianOf(differences) : map.stepRadii,
  };
}

function sampleLine(
  map: UnrolledMap,
  p: SurfacePoint,
  normal: { x: number; phi: number },
  step: number,
  half: number,
  out: readonly [Float64Array, Float64Array, Float64Array],
): boolean {
  const { columns, rows, stepRadii } = map;
  for (let k = -half; k <= half; k++) {
    const c = (p.x + k * step * normal.x - map.firstX) / stepRadii;
    const r = (p.phi + k * step * normal.phi - map.firstPhi) / stepRadii;
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
      (out[m as 0 | 1 | 2] as Float64Array)[k + half] = top * (1 - fr) + low * fr;
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
  const crossing = (towards: -1 | 1): number | null => {
    let size = 0;
    for (const m of [0, 1, 2] as const) {
      const s = towards === -1 ? (side[m]?.low ?? 0) : (side[m]?.high ?? 0);
      size += (s - (profile[m][bottom] as number)) ** 2;
    }
    // Share of the way from gap to surface, by projection on the colour difference.
    const share = (k: number) => {
      let dot = 0;
      for (const m of [0, 1, 2] as const) {
        const s = towards === -1 ? (side[m]?.low ?? 0) : (side[m]?.high ?? 0);
        dot += (s - (profile[m][bottom] as number)) * ((profile[m][k] as number) - (profile[m][bottom] as number));
      }
      return dot / size;
    };
    let before = 0;
    for (let k = bottom + towards; k >= 0 && k < n; k += towards) {
      const v = share(k);
      if (v >= 0.5) return k - towards * ((v - 0.5) / Math.max(1e-6, v - before));
      before = v;
    }
    return null;
  };
  const low = crossing(-1);
  const high = crossing(1);
  if (low === null || high === null) return null;
  return { low, high };
}
