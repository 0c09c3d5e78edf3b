import type { SurfacePoint } from './unroll.ts';

/** Straight pieces of a trace on the unrolled surface, found by least orthogonal squares. */
export interface StraightPiece {
  /** First and last point index (inclusive) in the resampled trace. */
  readonly from: number;
  readonly to: number;
  /** atan(dx/ds) of the piece, degrees, (−90, 90]. */
  readonly planeAngleDeg: number;
  /** Sum of squared orthogonal distances, radii². */
  readonly sse: number;
}

interface Sums {
  readonly x: Float64Array;
  readonly s: Float64Array;
  readonly xx: Float64Array;
  readonly ss: Float64Array;
  readonly xs: Float64Array;
}

function cumulate(points: readonly SurfacePoint[]): Sums {
  const n = points.length;
  const make = () => new Float64Array(n + 1);
  const sums = { x: make(), s: make(), xx: make(), ss: make(), xs: make() };
  points.forEach((p, i) => {
    sums.x[i + 1] = (sums.x[i] as number) + p.x;
    sums.s[i + 1] = (sums.s[i] as number) + p.phi;
    sums.xx[i + 1] = (sums.xx[i] as number) + p.x * p.x;
    sums.ss[i + 1] = (sums.ss[i] as number) + p.phi * p.phi;
    sums.xs[i + 1] = (sums.xs[i] as number) + p.x * p.phi;
  });
  return sums;
}

function pieceOf(sums: Sums, from: number, to: number): { sse: number; planeAngleDeg: number } {
  const n = to - from + 1;
  const d = (a: Float64Array) => (a[to + 1] as number) - (a[from] as number);
  const sx = d(sums.x);
  const ss = d(sums.s);
  const vx = d(sums.xx) - (sx * sx) / n;
  const vs = d(sums.ss) - (ss * ss) / n;
  const c = d(sums.xs) - (sx * ss) / n;
  const spread = Math.hypot((vx - vs) / 2, c);
  // Direction of largest spread, measured from the s axis towards x: that is the plane angle.
  const angle = 0.5 * Math.atan2(2 * c, vs - vx);
  return { sse: Math.max(0, (vx + vs) / 2 - spread), planeAngleDeg: (angle * 180) / Math.PI };
}

/**
 * The best division of a trace into `count` straight pieces (dynamic programme over all break points).
 * @param points at equal steps of arc length
 * @param minimumPoints fewest points of a piece, ≥ 3
 * @returns null when the trace is too short for that many pieces
 */
export function bestPieces(
  points: readonly SurfacePoint[],
  count: number,
  minimumPoints: number,
): StraightPiece[] | null {
  const n = points.length;
  if (n < count * minimumPoints) return null;
  const sums = cumulate(points);
  const cost: Float64Array[] = [];
  const back: Int32Array[] = [];
  for (let k = 0; k < count; k++) {
    const row = new Float64Array(n).fill(Number.POSITIVE_INFINITY);
    const from = new Int32Array(n).fill(-1);
    for (let end = (k + 1) * minimumPoints - 1; end < n; end++) {
      if (k === 0) {
        row[end] = pieceOf(sums, 0, end).sse;
        from[end] = 0;
        continue;
      }
      for (let start = k * minimumPoints; start <= end - minimumPoints + 1; start++) {
        const before = (cost[k - 1] as Float64Array)[start - 1] as number;
        if (before >= (row[end] as number)) continue;
        const total = before + pieceOf(sums, start, end).sse;
        if (total < (row[end] as number)) {
          row[end] = total;
          from[end] = start;
        }
      }
    }
    cost.push(row);
    back.push(from);
  }
  const pieces: StraightPiece[] = [];
  let end = n - 1;
  for (let k = count - 1; k >= 0; k--) {
    const start = (back[k] as Int32Array)[end] as number;
    if (start < 0) return null;
    pieces.unshift({ from: start, to: end, ...pieceOf(sums, start, end) });
    end = start - 1;
  }
  return pieces;
}

/** Orthogonal distances of the points from their own pieces, radii, in order along the trace. */
export function pieceResiduals(points: readonly SurfacePoint[], pieces: readonly StraightPiece[]): Float64Array {
  const out = new Float64Array(points.length);
  for (const piece of pieces) {
    const theta = (piece.planeAngleDeg * Math.PI) / 180;
    let mx = 0;
    let ms = 0;
    const n = piece.to - piece.from + 1;
    for (let i = piece.from; i <= piece.to; i++) {
      mx += (points[i] as SurfacePoint).x / n;
      ms += (points[i] as SurfacePoint).phi / n;
    }
    for (let i = piece.from; i <= piece.to; i++) {
      const p = points[i] as SurfacePoint;
      out[i] = (p.x - mx) * Math.cos(theta) - (p.phi - ms) * Math.sin(theta);
    }
  }
  return out;
}
