import { SEARCHED_HALF_WIDTH } from './pairTrace.ts';
import type { Picture } from './picture.ts';
import { cheapestPath, stepCosts } from './tracePath.ts';
import { type SpecimenFrame, type SurfacePoint, toPhoto } from './unroll.ts';
import { type UnrolledMap, unrollFace } from './unrolledMap.ts';

/** Where the intact surface of one half ends, from one edge of the visible face to the other. */
export interface RimTrace {
  readonly points: readonly SurfacePoint[];
  /** Mean step across the rim in units of the surface's own variation; below 2 there is hardly one. */
  readonly contrast: number;
  /** Share of the rows with a clear step. */
  readonly clearShare: number;
}

export interface IntactStretch {
  /** Both edges were seen between these, radii from the frame's origin. */
  readonly fromX: number;
  readonly toX: number;
}

/** How far beyond the stretch with both edges the rim may lie, radii: a 75° helix over half a turn needs more, but is rare. */
const BEYOND = 7;

/**
 * The rim at one end. The intact part of the specimen gives each row (azimuth) its own colour and scatter; the rim
 * is the boundary, one column a row, that best parts what looks like that row's surface from what does not, with a
 * clear step at the boundary and no needless jumps (dynamic programme, exact).
 * @param end +1: the end towards larger x
 */
export function searchRim(
  picture: Picture,
  frame: SpecimenFrame,
  intact: IntactStretch,
  end: 1 | -1,
  stepRadii: number,
): RimTrace | null {
  const length = intact.toX - intact.fromX;
  const middle = (intact.fromX + intact.toX) / 2;
  const start = middle + end * Math.min(0, length / 2 - 0.5);
  const limit = end === 1 ? intact.toX + BEYOND : intact.fromX - BEYOND;
  const fromX = Math.min(intact.fromX, start, limit);
  const toX = Math.max(intact.toX, start, limit);
  const map = boxed(unrollFace(picture, frame, fromX, toX, stepRadii, SEARCHED_HALF_WIDTH));
  const columnOf = (x: number) => Math.round((x - map.firstX) / map.stepRadii);
  const s0 = columnOf(intact.fromX + 0.2 * length);
  const s1 = columnOf(intact.fromX + 0.8 * length);
  const own = ownLook(map, s0, s1);
  const first = columnOf(start);
  const count = Math.min(end === 1 ? map.columns - first : first + 1, map.columns);
  if (count < 12) return null;
  const { rows } = map;
  const unlike = new Float32Array(rows * count);
  const step = new Float32Array(rows * count);
  const reach = Math.max(2, Math.round(0.06 / map.stepRadii));
  for (let r = 0; r < rows; r++) {
    for (let j = 0; j < count; j++) {
      const c = first + end * j;
      const i = r * map.columns + c;
      if (c < 0 || c >= map.columns || map.seen[i] !== 1) {
        unlike[r * count + j] = 0;
        continue;
      }
      unlike[r * count + j] = Math.min(UNLIKE_MOST, own.distance(r, i)) - UNLIKE_LIMIT;
      const a = c - reach;
      const b = c + reach;
      if (a < 0 || b >= map.columns || map.seen[r * map.columns + a] !== 1 || map.seen[r * map.columns + b] !== 1)
        continue;
      step[r * count + j] = own.stepBetween(r, r * map.columns + a, r * map.columns + b);
    }
  }
  const boundary = boundaryOf(unlike, step, rows, count, JUMP_COST);
  if (boundary === null) return null;
  const points: SurfacePoint[] = [];
  let sum = 0;
  let clear = 0;
  let outside = 0;
  for (let r = 0; r < rows; r++) {
    const j = boundary[r] as number;
    const beyond = first + end * Math.min(count - 1, j + reach + 1);
    if (map.seen[r * map.columns + Math.max(0, Math.min(map.columns - 1, beyond))] !== 1) outside += 1;
    points.push({
      x: map.firstX + (first + end * j - end * 0.5) * map.stepRadii,
      phi: map.firstPhi + r * map.stepRadii,
    });
    const s = step[r * count + j] as number;
    sum += s;
    if (s > 2) clear += 1;
  }
  // The border of the photo is no rim.
  if (outside > MOST_OUTSIDE * rows) return null;
  return { points, contrast: sum / rows, clearShare: clear / rows };
}

/** Share of the rim that may lie at the border of the photo. */
const MOST_OUTSIDE = 0.15;
const UNLIKE_MOST = 22;
const UNLIKE_LIMIT = 8;
const STEP_WEIGHT = 5;
const STEP_MOST = 6;
const JUMP_COST = 6;

/** Mean over 3 × 3 map points. */
function boxed(map: UnrolledMap): UnrolledMap {
  const { rows, columns } = map;
  const planes = map.planes.map((plane) => {
    const mid = new Float32Array(plane.length);
    const out = new Float32Array(plane.length);
    for (let r = 0; r < rows; r++) {
      for (let c = 0; c < columns; c++) {
        const i = r * columns + c;
        const a = c > 0 ? (plane[i - 1] as number) : (plane[i] as number);
        const b = c < columns - 1 ? (plane[i + 1] as number) : (plane[i] as number);
        mid[i] = (a + b + (plane[i] as number)) / 3;
      }
    }
    for (let r = 0; r < rows; r++) {
      for (let c = 0; c < columns; c++) {
        const i = r * columns + c;
        const a = r > 0 ? (mid[i - columns] as number) : (mid[i] as number);
        const b = r < rows - 1 ? (mid[i + columns] as number) : (mid[i] as number);
        out[i] = (a + b + (mid[i] as number)) / 3;
      }
    }
    return out;
  });
  return { ...map, planes: planes as [Float32Array, Float32Array, Float32Array] };
}

const SCATTER_FLOOR = [3, 1.6, 1.6] as const;

/** Each row's own colour and scatter on the intact part. */
function ownLook(map: UnrolledMap, fromColumn: number, toColumn: number) {
  const { rows, columns } = map;
  const level = [new Float32Array(rows), new Float32Array(rows), new Float32Array(rows)] as const;
  const scatter = [new Float32Array(rows), new Float32Array(rows), new Float32Array(rows)] as const;
  const from = Math.max(0, fromColumn);
  const to = Math.min(columns - 1, toColumn);
  // Some sixty places along the specimen tell a row's look.
  const every = Math.max(1, Math.floor((to - from) / 60));
  const buffer = new Float32Array(3 * (Math.floor((to - from) / every) + 2));
  for (let k = 0; k < 3; k++) {
    const plane = map.planes[k as 0 | 1 | 2];
    for (let r = 0; r < rows; r++) {
      let n = 0;
      for (let q = Math.max(0, r - 1); q <= Math.min(rows - 1, r + 1); q++) {
        for (let c = from; c <= to; c += every) {
          const i = q * columns + c;
          if (map.seen[i] === 1) buffer[n++] = plane[i] as number;
        }
      }
      const values = buffer.subarray(0, n).sort();
      const median = values[n >> 1] ?? 0;
      // Half the central 80 % over 1.28: wide tails (grain, marks) count, single specks do not.
      const spread = ((values[Math.floor(0.9 * n)] ?? 0) - (values[Math.floor(0.1 * n)] ?? 0)) / 2.56;
      level[k as 0 | 1 | 2][r] = median;
      scatter[k as 0 | 1 | 2][r] = Math.max(SCATTER_FLOOR[k as 0 | 1 | 2] as number, spread);
    }
  }
  // Grain and marks differ from row to row: a row's scatter takes in how its neighbours differ from it.
  const reach = Math.max(1, Math.round(0.08 / map.stepRadii));
  for (const k of [0, 1, 2] as const) {
    const own = Float32Array.from(scatter[k]);
    for (let r = 0; r < rows; r++) {
      let sum = 0;
      let n = 0;
      for (let q = Math.max(0, r - reach); q <= Math.min(rows - 1, r + reach); q++) {
        // The shading across the bar is no scatter: only what a straight line through the neighbours leaves.
        const mirror = Math.max(0, Math.min(rows - 1, 2 * r - q));
        const bend = ((level[k][q] as number) + (level[k][mirror] as number)) / 2 - (level[k][r] as number);
        sum += (own[q] as number) ** 2 + bend * bend;
        n += 1;
      }
      scatter[k][r] = Math.sqrt(sum / n);
    }
  }
  return {
    /** Squared distance of a map point from its row's own look, in scatters; 3 is usual. */
    distance(row: number, at: number): number {
      let sum = 0;
      for (let k = 0; k < 3; k++) {
        const d =
          ((map.planes[k as 0 | 1 | 2][at] as number) - (level[k as 0 | 1 | 2][row] as number)) /
          (scatter[k as 0 | 1 | 2][row] as number);
        sum += d * d;
      }
      return sum;
    },
    /** Colour step between two map points of a row, in scatters. */
    stepBetween(row: number, a: number, b: number): number {
      let sum = 0;
      for (let k = 0; k < 3; k++) {
        const plane = map.planes[k as 0 | 1 | 2];
        const d = ((plane[b] as number) - (plane[a] as number)) / (scatter[k as 0 | 1 | 2][row] as number);
        sum += d * d;
      }
      return Math.sqrt(sum);
    },
  };
}

/** The boundary of least cost: unlike points before it cost, like points before it pay, a step at it pays, jumps cost. */
function boundaryOf(
  unlike: Float32Array,
  step: Float32Array,
  rows: number,
  count: number,
  jumpCost: number,
): Int32Array | null {
  const total = new Float64Array(rows * count);
  const from = new Int32Array(rows * count);
  const carried = new Float64Array(count);
  const carriedFrom = new Int32Array(count);
  for (let r = 0; r < rows; r++) {
    let run = 0;
    for (let j = 0; j < count; j++) {
      const i = r * count + j;
      total[i] = run - STEP_WEIGHT * Math.min(STEP_MOST, step[i] as number);
      run += unlike[i] as number;
    }
    if (r === 0) continue;
    const before = (r - 1) * count;
    for (let j = 0; j < count; j++) {
      carried[j] = total[before + j] as number;
      carriedFrom[j] = j;
    }
    for (let j = 1; j < count; j++) {
      const v = (carried[j - 1] as number) + jumpCost;
      if (v < (carried[j] as number)) {
        carried[j] = v;
        carriedFrom[j] = carriedFrom[j - 1] as number;
      }
    }
    for (let j = count - 2; j >= 0; j--) {
      const v = (carried[j + 1] as number) + jumpCost;
      if (v < (carried[j] as number)) {
        carried[j] = v;
        carriedFrom[j] = carriedFrom[j + 1] as number;
      }
    }
    for (let j = 0; j < count; j++) {
      const i = r * count + j;
      total[i] = (total[i] as number) + (carried[j] as number);
      from[i] = carriedFrom[j] as number;
    }
  }
  const last = (rows - 1) * count;
  let best = 0;
  for (let j = 1; j < count; j++) if ((total[last + j] as number) < (total[last + best] as number)) best = j;
  const out = new Int32Array(rows);
  for (let r = rows - 1; r >= 0; r--) {
    out[r] = best;
    best = from[r * count + best] as number;
  }
  return out;
}

/**
 * The rim at full resolution: inside a band round a rim known roughly, the path of steepest colour change, across
 * the rows or along them.
 */
export function refineRim(
  picture: Picture,
  frame: SpecimenFrame,
  rough: readonly SurfacePoint[],
  stepRadii: number,
  reachRadii: number,
): SurfacePoint[] | null {
  const xs = rough.map((p) => p.x);
  const map = boxed(
    unrollFace(
      picture,
      frame,
      Math.min(...xs) - 3 * reachRadii,
      Math.max(...xs) + 3 * reachRadii,
      stepRadii,
      SEARCHED_HALF_WIDTH,
    ),
  );
  const { rows, columns } = map;
  const across = new Float32Array(rows * columns);
  const along = new Float32Array(rows * columns);
  const reach = Math.max(2, Math.min(5, Math.round(0.025 / stepRadii)));
  for (let r = 0; r < rows; r++) {
    for (let c = 0; c < columns; c++) {
      const i = r * columns + c;
      if (c >= reach && c < columns - reach) across[i] = stepAt(map, i - reach, i + reach);
      if (r >= reach && r < rows - reach) along[i] = stepAt(map, i - reach * columns, i + reach * columns);
    }
  }
  // In units of what lies in the band: the rim is the strongest step in it.
  const blocked = new Uint8Array(rows * columns).fill(1);
  const inBand: number[] = [];
  const mark = (p: SurfacePoint) => {
    const c0 = (p.x - map.firstX) / stepRadii;
    const r0 = (p.phi - map.firstPhi) / stepRadii;
    const n = reachRadii / stepRadii;
    for (let r = Math.max(0, Math.ceil(r0 - n)); r <= Math.min(rows - 1, Math.floor(r0 + n)); r++) {
      const w = Math.sqrt(Math.max(0, n * n - (r - r0) ** 2));
      const a = Math.max(0, Math.ceil(c0 - w));
      const b = Math.min(columns - 1, Math.floor(c0 + w));
      if (b >= a) blocked.fill(0, r * columns + a, r * columns + b + 1);
    }
  };
  for (let k = 0; k < rough.length; k++) {
    const a = rough[k] as SurfacePoint;
    const b = rough[Math.min(rough.length - 1, k + 1)] as SurfacePoint;
    const pieces = Math.max(1, Math.ceil(Math.hypot(b.x - a.x, b.phi - a.phi) / (reachRadii / 2)));
    for (let m = 0; m < pieces; m++)
      mark({ x: a.x + ((b.x - a.x) * m) / pieces, phi: a.phi + ((b.phi - a.phi) * m) / pieces });
  }
  for (let i = 0; i < blocked.length; i += 3) if (blocked[i] === 0) inBand.push(across[i] as number);
  inBand.sort((a, b) => a - b);
  const unit = Math.max(1.5, (inBand[Math.floor(0.8 * inBand.length)] ?? 0) / 1.5);
  for (let i = 0; i < across.length; i++) {
    across[i] = (across[i] as number) / unit;
    along[i] = (along[i] as number) / unit;
  }
  const path = cheapestPath(stepCosts({ across, along }, rows, columns), blocked);
  if (path === null) return null;
  return Array.from(path.rows, (r, k) => ({
    x: map.firstX + (path.columns[k] as number) * stepRadii,
    phi: map.firstPhi + r * stepRadii,
  }));
}

function stepAt(map: UnrolledMap, a: number, b: number): number {
  let sum = 0;
  for (const plane of map.planes) sum += ((plane[b] as number) - (plane[a] as number)) ** 2;
  return Math.sqrt(sum);
}

/** True when a surface point lies inside the photo, `margin` px from its border at the least. */
export function insidePhoto(picture: Picture, frame: SpecimenFrame, point: SurfacePoint, margin: number): boolean {
  const q = toPhoto(frame, point);
  return (
    q.xPx >= margin &&
    q.yPx >= margin &&
    q.xPx <= picture.widthPx - 1 - margin &&
    q.yPx <= picture.heightPx - 1 - margin
  );
}
