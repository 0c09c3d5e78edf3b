import type { GapEvidence } from './gapEvidence.ts';

/** A path over the map from its first row to its last, one entry a step. */
export interface TracePath {
  readonly rows: Int32Array;
  readonly columns: Int32Array;
  /** Sum of the step costs. */
  readonly cost: number;
}

export interface StepCosts {
  readonly rows: number;
  readonly columns: number;
  /** Cost of a step that arrives at a point from the row before. */
  readonly across: Float32Array;
  /** Cost of a step along the row. */
  readonly along: Float32Array;
}

/** Cost of a step, 0.03 to 1: falls by e for every 1.2 units of evidence above 1. */
export function stepCosts(evidence: GapEvidence, rows: number, columns: number): StepCosts {
  const n = rows * columns;
  const across = new Float32Array(n);
  const along = new Float32Array(n);
  const cost = (z: number) => 0.03 + 0.97 * Math.exp(-Math.max(0, z - 0.8) / 1.2);
  for (let i = 0; i < n; i++) {
    across[i] = cost(evidence.across[i] as number);
    along[i] = Math.min(cost(evidence.along[i] as number), across[i] as number);
  }
  return { rows, columns, across, along };
}

/**
 * The cheapest path from the first row to the last that never turns back a row but may run along a row as far
 * as it likes (dynamic programme, exact): follows transverse breaks, helices and longitudinal splits alike.
 * @param blocked points the path must not use (1 = blocked)
 */
export function cheapestPath(costs: StepCosts, blocked?: Uint8Array): TracePath | null {
  const { rows, columns, across, along } = costs;
  const total = new Float64Array(rows * columns).fill(Number.POSITIVE_INFINITY);
  const from = new Int8Array(rows * columns); // −1, 0, 1: diagonal step from the row before; 2 from the left, 3 from the right
  const diagonal = Math.SQRT2;
  for (let r = 0; r < rows; r++) {
    const base = r * columns;
    for (let c = 0; c < columns; c++) {
      const i = base + c;
      if (blocked !== undefined && blocked[i] === 1) continue;
      const step = across[i] as number;
      if (r === 0) {
        total[i] = step;
        continue;
      }
      const up = i - columns;
      let best = (total[up] as number) + step;
      let move = 0;
      if (c > 0 && (total[up - 1] as number) + diagonal * step < best) {
        best = (total[up - 1] as number) + diagonal * step;
        move = -1;
      }
      if (c < columns - 1 && (total[up + 1] as number) + diagonal * step < best) {
        best = (total[up + 1] as number) + diagonal * step;
        move = 1;
      }
      total[i] = best;
      from[i] = move;
    }
    for (let c = 1; c < columns; c++) {
      const i = base + c;
      if (blocked !== undefined && blocked[i] === 1) continue;
      const candidate = (total[i - 1] as number) + (along[i] as number);
      if (candidate < (total[i] as number)) {
        total[i] = candidate;
        from[i] = 2;
      }
    }
    for (let c = columns - 2; c >= 0; c--) {
      const i = base + c;
      if (blocked !== undefined && blocked[i] === 1) continue;
      const candidate = (total[i + 1] as number) + (along[i] as number);
      if (candidate < (total[i] as number)) {
        total[i] = candidate;
        from[i] = 3;
      }
    }
  }
  const last = (rows - 1) * columns;
  let end = -1;
  for (let c = 0; c < columns; c++) {
    if (
      Number.isFinite(total[last + c] as number) &&
      (end < 0 || (total[last + c] as number) < (total[last + end] as number))
    )
      end = c;
  }
  if (end < 0) return null;
  const pathRows: number[] = [];
  const pathColumns: number[] = [];
  let r = rows - 1;
  let c = end;
  for (let guard = 0; guard < rows * 2 + columns * 4; guard++) {
    pathRows.push(r);
    pathColumns.push(c);
    const move = from[r * columns + c] as number;
    if (move === 2) c -= 1;
    else if (move === 3) c += 1;
    else {
      if (r === 0) break;
      r -= 1;
      c += move;
    }
  }
  return {
    rows: Int32Array.from(pathRows.reverse()),
    columns: Int32Array.from(pathColumns.reverse()),
    cost: total[last + end] as number,
  };
}
