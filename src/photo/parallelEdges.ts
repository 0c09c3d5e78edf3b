import { type AlignedCells, bandColour } from './alignedCells.ts';

/** A straight colour step found by adding signed steps along it. Positions in px of the detection picture. */
export interface AlignedEdge {
  /** Position across at along = 0. */
  readonly across: number;
  /** Change of `across` per px along. */
  readonly slope: number;
  /** Cells it spans, inclusive. */
  readonly fromCell: number;
  readonly toCell: number;
  /** Sum of the steps over √n, in units of their noise. */
  readonly strength: number;
  /** Step across 2 px over step across 6 px: near 1 for a sharp edge, near 1/3 for a soft gradient. */
  readonly sharpness: number;
  /** Mean step (upper side minus lower side), channel units. */
  readonly step: readonly [number, number, number];
}

/** Signed steps across every row of every cell, in noise units: [(cell × rows + row) × 3 + channel]. */
function stepMap(grid: AlignedCells, reach: number): { steps: Float32Array; noise: readonly number[] } {
  const { cells, rows } = grid;
  const steps = new Float32Array(cells * rows * 3);
  const noise: number[] = [];
  for (let k = 0; k < 3; k++) {
    const sums = grid.cumulative[k as 0 | 1 | 2];
    const sample: number[] = [];
    for (let c = 0; c < cells; c++) {
      const base = c * (rows + 1);
      for (let r = reach; r < rows - reach; r++) {
        const up = (grid.inside[base + r + reach] as number) - (grid.inside[base + r] as number);
        const low = (grid.inside[base + r] as number) - (grid.inside[base + r - reach] as number);
        if (up < reach || low < reach) continue;
        let v =
          ((sums[base + r + reach] as number) - 2 * (sums[base + r] as number) + (sums[base + r - reach] as number)) /
          reach;
        // What a slope of the shading would give is taken off: the sheen of a round bar is a slope, its edge is a step.
        const far = 2 * reach;
        if (r >= far && r + far < rows + 1) {
          const outer =
            ((sums[base + r + far] as number) -
              (sums[base + r + reach] as number) -
              (sums[base + r - reach] as number) +
              (sums[base + r - far] as number)) /
            reach;
          const whole = (grid.inside[base + r + far] as number) - (grid.inside[base + r - far] as number) >= 2 * far;
          if (whole) v = 1.5 * (v - Math.sign(v) * Math.min(Math.abs(v), Math.max(0, (outer * Math.sign(v)) / 3)));
        }
        steps[(c * rows + r) * 3 + k] = v;
        if ((c + r) % 3 === 0) sample.push(Math.abs(v));
      }
    }
    sample.sort((a, b) => a - b);
    const sigma = Math.max(1.4826 * (sample[sample.length >> 1] ?? 0), k === 0 ? 0.35 : 0.2);
    noise.push(sigma);
    for (let i = k; i < steps.length; i += 3) steps[i] = (steps[i] as number) / sigma;
  }
  return { steps, noise };
}

const CLIP = 12;

/**
 * Straight edges nearly parallel to the grid's direction.
 * @param maximumSlope largest tan of the angle to the direction (perspective taper and a wrong first guess)
 * @param most how many edges at the most
 */
export function findParallelEdges(grid: AlignedCells, maximumSlope: number, most: number): AlignedEdge[] {
  const { cells, rows, cellPx, stepPx } = grid;
  const { steps, noise } = stepMap(grid, Math.max(2, Math.round(1.5 / stepPx)));
  const slopeStep = stepPx / (cells * cellPx * 0.6);
  const slopes = Math.max(1, Math.ceil(maximumSlope / slopeStep));
  // A clipped copy: no single glaring cell may outvote the rest.
  for (let i = 0; i < steps.length; i += 3) {
    const size = Math.hypot(steps[i] as number, steps[i + 1] as number, steps[i + 2] as number);
    if (size > CLIP) {
      const f = CLIP / size;
      steps[i] = (steps[i] as number) * f;
      steps[i + 1] = (steps[i + 1] as number) * f;
      steps[i + 2] = (steps[i + 2] as number) * f;
    }
  }
  interface Candidate extends AlignedEdge {
    readonly row: number;
  }
  const bestAtRow: (Candidate | null)[] = new Array(rows).fill(null);
  const total = new Float64Array(3);
  for (let si = -slopes; si <= slopes; si++) {
    const slope = si * slopeStep;
    for (let r0 = 0; r0 < rows; r0++) {
      // First the sum over all cells gives the colour direction; then the best run of cells in that direction.
      total.fill(0);
      for (let c = 0; c < cells; c++) {
        const r = Math.round(r0 + (slope * (grid.firstAlong + c * cellPx)) / stepPx);
        if (r < 0 || r >= rows) continue;
        const i = (c * rows + r) * 3;
        total[0] = (total[0] as number) + (steps[i] as number);
        total[1] = (total[1] as number) + (steps[i + 1] as number);
        total[2] = (total[2] as number) + (steps[i + 2] as number);
      }
      const size = Math.hypot(total[0] as number, total[1] as number, total[2] as number);
      if (size < 8) continue;
      const u0 = (total[0] as number) / size;
      const u1 = (total[1] as number) / size;
      const u2 = (total[2] as number) / size;
      // Kadane's best run of (step along u − 1): a cell must show at least the noise to carry the run on.
      let run = 0;
      let from = 0;
      let best = 0;
      let bestFrom = 0;
      let bestTo = -1;
      for (let c = 0; c < cells; c++) {
        const r = Math.round(r0 + (slope * (grid.firstAlong + c * cellPx)) / stepPx);
        const i = (c * rows + r) * 3;
        const v =
          r < 0 || r >= rows
            ? -1
            : (steps[i] as number) * u0 + (steps[i + 1] as number) * u1 + (steps[i + 2] as number) * u2 - 1;
        if (run <= 0) {
          run = 0;
          from = c;
        }
        run += Math.min(v, 8);
        if (run > best) {
          best = run;
          bestFrom = from;
          bestTo = c;
        }
      }
      const n = bestTo - bestFrom + 1;
      if (n < 2) continue;
      const strength = best / Math.sqrt(n);
      const held = bestAtRow[r0];
      if (held === null || held === undefined || best > held.strength * Math.sqrt(held.toCell - held.fromCell + 1)) {
        const mean = size / cells;
        bestAtRow[r0] = {
          row: r0,
          across: grid.firstAcross + (r0 - 0.5) * stepPx,
          slope,
          fromCell: bestFrom,
          toCell: bestTo,
          strength,
          sharpness: 0,
          step: [u0 * mean * (noise[0] as number), u1 * mean * (noise[1] as number), u2 * mean * (noise[2] as number)],
        };
      }
    }
  }
  const weightOf = (c: Candidate) => c.strength * Math.sqrt(c.toCell - c.fromCell + 1);
  const sorted = bestAtRow.filter((c): c is Candidate => c !== null).sort((a, b) => weightOf(b) - weightOf(a));
  const kept: Candidate[] = [];
  for (const candidate of sorted) {
    if (kept.length >= most) break;
    const middleOf = (c: Candidate, at: number) => c.across + c.slope * at;
    const clash = kept.some((k) => {
      const at = grid.firstAlong + ((candidate.fromCell + candidate.toCell) / 2) * cellPx;
      return Math.abs(middleOf(k, at) - middleOf(candidate, at)) < 2.2 * stepPx + 1;
    });
    if (!clash) kept.push(candidate);
  }
  return kept.map((edge) => ({ ...edge, sharpness: sharpnessOf(grid, edge) }));
}

function sharpnessOf(grid: AlignedCells, edge: AlignedEdge): number {
  const fine = new Float64Array(3);
  const coarse = new Float64Array(3);
  const a = new Float64Array(3);
  const b = new Float64Array(3);
  for (let c = edge.fromCell; c <= edge.toCell; c++) {
    const y = edge.across + edge.slope * (grid.firstAlong + c * grid.cellPx);
    for (const [sum, reach, width] of [
      [fine, 0, 1.5],
      [coarse, 2.2, 1.5],
    ] as const) {
      if (!bandColour(grid, c, y + reach, y + reach + width, a)) continue;
      if (!bandColour(grid, c, y - reach - width, y - reach, b)) continue;
      for (let k = 0; k < 3; k++) sum[k] = (sum[k] as number) + (a[k] as number) - (b[k] as number);
    }
  }
  const size = (v: Float64Array) => Math.hypot(v[0] as number, v[1] as number, v[2] as number);
  return Math.min(1.5, size(fine) / Math.max(1e-6, size(coarse)));
}
