import { continuationCost } from './beyondEdge.ts';
import { type GapEvidence, gapEvidence } from './gapEvidence.ts';
import { medianOf } from './leastSquares.ts';
import { withoutPeriodicMarks } from './periodicMarks.ts';
import type { Picture } from './picture.ts';
import { cheapestPath, type StepCosts, stepCosts, type TracePath } from './tracePath.ts';
import type { SpecimenFrame, SurfacePoint } from './unroll.ts';
import { type UnrolledMap, unrollFace } from './unrolledMap.ts';

/** Half-width of the visible face that is searched, radians (72°): beyond it the surface is seen too flat. */
export const SEARCHED_HALF_WIDTH = 1.25;

/** A gap or crack between two halves, followed from one edge of the visible face to the other. */
export interface PairTrace {
  readonly map: UnrolledMap;
  readonly evidence: GapEvidence;
  readonly costs: StepCosts;
  readonly path: TracePath;
  readonly points: readonly SurfacePoint[];
  /** Cost of each row of the map, smoothed over a few. */
  readonly rowCosts: Float64Array;
  /** Each row: how much darker the path is than the surface beside it, lightness units (negative: lighter). */
  readonly rowDepths: Float64Array;
  /**
   * How unlike the surfaces on the two sides of the gap are, median over the rows, in lightness units: two halves of one
   * specimen are alike, the rim of a single half has its own surface on one side only.
   */
  readonly sidesUnlike: number;
  /** How unlike the gap is to the surface beside it, median over the rows, lightness units. */
  readonly gapUnlike: number;
  /** Mean cost a row of the next best path that keeps away from this one: periodic marks are all alike, a break is one. */
  readonly secondCostPerRow: number;
  /** How the trace runs on beyond the lower and the upper edge, see {@link continuationCost}. */
  readonly beyondCosts: readonly [number, number];
  /** Mean cost of a step of the path, along or across. */
  readonly costPerStep: number;
  /** Mean cost a row; 0.03 for a clear gap, near 1 for none. */
  readonly costPerRow: number;
  /** Share of the rows in which the path crosses nothing like a gap. */
  readonly missingShare: number;
  /** Longest stretch of such rows at one end of the path, share of the rows. */
  readonly missingEnd: number;
}

export interface PairSearch {
  /** Stretch to search, radii from the frame's origin. */
  readonly fromX: number;
  readonly toX: number;
  readonly stepRadii: number;
  readonly gapSizes: readonly number[];
  /** Keep to this trace, at most `reachRadii` away from it. */
  readonly near?: { readonly points: readonly SurfacePoint[]; readonly reachRadii: number };
}

/** The cheapest trace across the visible face; null when the stretch is too short to search. */
export function searchPairTrace(picture: Picture, frame: SpecimenFrame, search: PairSearch): PairTrace | null {
  const face = unrollFace(picture, frame, search.fromX, search.toX, search.stepRadii, SEARCHED_HALF_WIDTH);
  const map = withoutPeriodicMarks(face);
  if (map.columns < 12) return null;
  const evidence = gapEvidence(map, search.gapSizes);
  const costs = stepCosts(evidence, map.rows, map.columns);
  const blocked = search.near === undefined ? undefined : bandAround(map, search.near.points, search.near.reachRadii);
  const path = cheapestPath(costs, blocked);
  if (path === null) return null;
  const found = describe(map, evidence, costs, path);
  if (found.missingEnd <= SHORT_OF_EDGE) return found;
  // A trace reaches both edges. When the cheapest path does not, the break may run along the specimen first (a split).
  const freely = cheapestPath({ ...costs, along: costs.along.map((cost) => FREE_RUN * cost) }, blocked);
  if (freely === null) return found;
  const other = describe(map, evidence, costs, freely);
  const reaches = other.missingEnd < 0.4 * found.missingEnd && other.missingShare < found.missingShare;
  return reaches && other.costPerStep < CLEAR_STEP ? { ...other, costPerRow: found.costPerRow } : found;
}

/** Share of rows without a gap at one end from which on the trace is looked for along the specimen too. */
const SHORT_OF_EDGE = 0.08;
/** How much less a run along the specimen then costs. */
const FREE_RUN = 0.15;
/** Such a run must be seen: mean cost a step. */
const CLEAR_STEP = 0.3;

/** Adds what only the comparison of candidates needs: the next best path and the continuation beyond the edges. */
export function compareTrace(picture: Picture, frame: SpecimenFrame, trace: PairTrace): PairTrace {
  const { map, points } = trace;
  const blocked = bandAround(map, points, AWAY);
  for (let i = 0; i < blocked.length; i++) blocked[i] = blocked[i] === 1 ? 0 : 1;
  const second = cheapestPath(trace.costs, blocked);
  const low = points[0];
  const high = points[points.length - 1];
  return {
    ...trace,
    secondCostPerRow: second === null ? 1 : second.cost / map.rows,
    beyondCosts: [
      low === undefined ? 1 : continuationCost(picture, frame, low.x, -1, map.stepRadii),
      high === undefined ? 1 : continuationCost(picture, frame, high.x, 1, map.stepRadii),
    ],
  };
}

/** A second path keeps this far away, radii. */
const AWAY = 0.3;

/** Points further than `reach` from the trace, as a mask (1 = outside). */
function bandAround(map: UnrolledMap, points: readonly SurfacePoint[], reach: number): Uint8Array {
  const blocked = new Uint8Array(map.rows * map.columns).fill(1);
  const steps = Math.ceil(reach / map.stepRadii);
  const limit = steps * steps;
  const mark = (x: number, phi: number) => {
    const c0 = Math.round((x - map.firstX) / map.stepRadii);
    const r0 = Math.round((phi - map.firstPhi) / map.stepRadii);
    for (let r = Math.max(0, r0 - steps); r <= Math.min(map.rows - 1, r0 + steps); r++) {
      const left = Math.floor(Math.sqrt(limit - (r - r0) ** 2));
      const from = Math.max(0, c0 - left);
      const to = Math.min(map.columns - 1, c0 + left);
      if (to >= from) blocked.fill(0, r * map.columns + from, r * map.columns + to + 1);
    }
  };
  for (let i = 0; i < points.length; i++) {
    const a = points[i] as SurfacePoint;
    const b = points[Math.min(points.length - 1, i + 1)] as SurfacePoint;
    const pieces = Math.max(1, Math.ceil(Math.hypot(b.x - a.x, b.phi - a.phi) / (reach / 2)));
    for (let k = 0; k < pieces; k++) mark(a.x + ((b.x - a.x) * k) / pieces, a.phi + ((b.phi - a.phi) * k) / pieces);
  }
  return blocked;
}

const MISSING_COST = 0.7;

function describe(map: UnrolledMap, evidence: GapEvidence, costs: StepCosts, path: TracePath): PairTrace {
  const n = path.rows.length;
  const points: SurfacePoint[] = [];
  const perRow = new Float64Array(map.rows);
  let stepSum = 0;
  const counts = new Float64Array(map.rows);
  const depths = new Float64Array(map.rows);
  const aside = Math.max(3, Math.round(0.15 / map.stepRadii));
  for (let i = 0; i < n; i++) {
    const r = path.rows[i] as number;
    const c = path.columns[i] as number;
    points.push({ x: map.firstX + c * map.stepRadii, phi: map.firstPhi + r * map.stepRadii });
    const at = r * map.columns + c;
    const inRow = i > 0 && path.rows[i - 1] === r;
    const step = (inRow ? costs.along[at] : costs.across[at]) as number;
    stepSum += step;
    perRow[r] = (perRow[r] as number) + step;
    counts[r] = (counts[r] as number) + 1;
    const left = Math.max(0, c - aside);
    const right = Math.min(map.columns - 1, c + aside);
    const l = map.planes[0];
    const base = r * map.columns;
    depths[r] = ((l[base + left] as number) + (l[base + right] as number)) / 2 - (l[at] as number);
  }
  const sides = sidesOf(map, path);
  const smoothed = new Float64Array(map.rows);
  const reach = Math.max(1, Math.round(0.06 / map.stepRadii));
  for (let r = 0; r < map.rows; r++) {
    let sum = 0;
    let m = 0;
    for (let q = Math.max(0, r - reach); q <= Math.min(map.rows - 1, r + reach); q++) {
      sum += (perRow[q] as number) / Math.max(1, counts[q] as number);
      m += 1;
    }
    smoothed[r] = sum / m;
  }
  let missing = 0;
  for (const v of smoothed) if (v > MISSING_COST) missing += 1;
  let low = 0;
  while (low < map.rows && (smoothed[low] as number) > MISSING_COST) low += 1;
  let high = 0;
  while (high < map.rows && (smoothed[map.rows - 1 - high] as number) > MISSING_COST) high += 1;
  return {
    map,
    evidence,
    costs,
    path,
    points,
    ...sides,
    secondCostPerRow: 1,
    beyondCosts: [1, 1],
    rowCosts: smoothed,
    rowDepths: depths,
    costPerStep: stepSum / n,
    costPerRow: path.cost / map.rows,
    missingShare: missing / map.rows,
    missingEnd: Math.max(low, high) / map.rows,
  };
}

const SIDE_FROM = 0.12;
const SIDE_TO = 0.45;

function sidesOf(map: UnrolledMap, path: TracePath): { sidesUnlike: number; gapUnlike: number } {
  const near = Math.max(2, Math.round(SIDE_FROM / map.stepRadii));
  const far = Math.max(near + 2, Math.round(SIDE_TO / map.stepRadii));
  const apart: number[] = [];
  const deep: number[] = [];
  for (let k = 0; k < path.rows.length; k++) {
    const r = path.rows[k] as number;
    // Only where the path crosses the row: along a split both sides lie in other rows.
    if ((k > 0 && path.rows[k - 1] === r) || (k + 1 < path.rows.length && path.rows[k + 1] === r)) continue;
    const c = path.columns[k] as number;
    if (c - far < 0 || c + far >= map.columns) continue;
    let difference = 0;
    let depth = 0;
    for (const plane of map.planes) {
      let left = 0;
      let right = 0;
      const base = r * map.columns + c;
      for (let d = near; d <= far; d++) {
        left += plane[base - d] as number;
        right += plane[base + d] as number;
      }
      left /= far - near + 1;
      right /= far - near + 1;
      difference += (left - right) ** 2;
      depth += ((left + right) / 2 - (plane[base] as number)) ** 2;
    }
    apart.push(Math.sqrt(difference));
    deep.push(Math.sqrt(depth));
  }
  if (apart.length < 5) return { sidesUnlike: 0, gapUnlike: 0 };
  return { sidesUnlike: medianOf(apart), gapUnlike: medianOf(deep) };
}
