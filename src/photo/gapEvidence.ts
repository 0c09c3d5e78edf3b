import type { UnrolledMap } from './unrolledMap.ts';

/**
 * How much each point of the unrolled face looks like the gap between two halves: different from the surface
 * on both sides of it in the same way (usually darker). `across` compares along the axis (for traces that run
 * round the bar), `along` compares round the bar (for splits along the axis). In units of what the intact
 * surface itself shows, so 1 is nothing and 3 is clear.
 */
export interface GapEvidence {
  readonly across: Float32Array;
  readonly along: Float32Array;
}

/** A gap lighter than its surroundings (background or a lit wall showing through) is possible but rarer. */
const LIGHT_GAP_WEIGHT = 0.6;
const FLOOR = 2.2;

export function gapEvidence(map: UnrolledMap, gapSizes: readonly number[]): GapEvidence {
  const { rows, columns } = map;
  const across = new Float32Array(rows * columns);
  const along = new Float32Array(rows * columns);
  valley(map, gapSizes, across, rows, columns, columns, 1);
  valley(map, gapSizes.slice(0, Math.max(1, gapSizes.length - 1)), along, columns, rows, 1, columns);
  normaliseRows(map, across);
  normaliseWhole(map, along);
  return { across, along };
}

/** Adds, for every line of the map, the largest valley contrast over the gap sizes. */
function valley(
  map: UnrolledMap,
  gapSizes: readonly number[],
  out: Float32Array,
  lines: number,
  length: number,
  lineStride: number,
  stride: number,
): void {
  const sums = [new Float64Array(length + 1), new Float64Array(length + 1), new Float64Array(length + 1)] as const;
  const channelWeight = [1, 1.4, 1.4] as const;
  for (let line = 0; line < lines; line++) {
    const base = line * lineStride;
    for (let k = 0; k < 3; k++) {
      const plane = map.planes[k as 0 | 1 | 2];
      const sum = sums[k as 0 | 1 | 2];
      let total = 0;
      for (let i = 0; i < length; i++) {
        total += plane[base + i * stride] as number;
        sum[i + 1] = total;
      }
    }
    for (const g of gapSizes) {
      const half = (g - 1) >> 1;
      const side = Math.max(2, g);
      for (let i = side + half + 1; i < length - side - half - 2; i++) {
        const a0 = i - half;
        const a1 = i - half + g;
        if (map.seen[base + (a0 - side) * stride] === 0 || map.seen[base + (a1 + side - 1) * stride] === 0) continue;
        let dot = 0;
        let dark = true;
        let leftSize = 0;
        let rightSize = 0;
        for (let k = 0; k < 3; k++) {
          const sum = sums[k as 0 | 1 | 2];
          const centre = ((sum[a1] as number) - (sum[a0] as number)) / g;
          const left =
            (((sum[a0] as number) - (sum[a0 - side] as number)) / side - centre) *
            (channelWeight[k as 0 | 1 | 2] as number);
          const right =
            (((sum[a1 + side] as number) - (sum[a1] as number)) / side - centre) *
            (channelWeight[k as 0 | 1 | 2] as number);
          dot += left * right;
          leftSize += left * left;
          rightSize += right * right;
          if (k === 0) dark = left > 0 && right > 0;
        }
        if (dot <= 0) continue;
        // The weaker of the two sides counts, in the direction both agree on.
        const agreed = (dot / Math.sqrt(leftSize * rightSize + 1e-9)) * Math.sqrt(Math.min(leftSize, rightSize));
        const value = dark ? agreed : LIGHT_GAP_WEIGHT * agreed;
        const at = base + i * stride;
        if (value > (out[at] as number)) out[at] = value;
      }
    }
  }
}

function quantileOf(values: Float32Array, count: number, share: number): number {
  if (count === 0) return 0;
  const part = values.subarray(0, count).slice().sort();
  return part[Math.min(count - 1, Math.floor(share * count))] as number;
}

/** Each row in units of its own 85th percentile: turning marks are in every column, the break is not. */
function normaliseRows(map: UnrolledMap, evidence: Float32Array): void {
  const { rows, columns } = map;
  const buffer = new Float32Array(columns);
  const units = new Float32Array(rows);
  for (let r = 0; r < rows; r++) {
    let count = 0;
    for (let c = 0; c < columns; c++) {
      const i = r * columns + c;
      if (map.seen[i] === 1) buffer[count++] = evidence[i] as number;
    }
    units[r] = quantileOf(buffer, count, 0.85);
  }
  for (let r = 0; r < rows; r++) {
    // A row's unit is smoothed over its neighbours so that one glaring row does not hide the break.
    let sum = 0;
    let n = 0;
    for (let q = Math.max(0, r - 2); q <= Math.min(rows - 1, r + 2); q++) {
      sum += units[q] as number;
      n += 1;
    }
    const unit = sum / n + FLOOR;
    for (let i = r * columns; i < (r + 1) * columns; i++) evidence[i] = (evidence[i] as number) / unit;
  }
}

function normaliseWhole(map: UnrolledMap, evidence: Float32Array): void {
  const buffer = new Float32Array(evidence.length);
  let count = 0;
  for (let i = 0; i < evidence.length; i += 3) if (map.seen[i] === 1) buffer[count++] = evidence[i] as number;
  const unit = quantileOf(buffer, count, 0.9) + FLOOR;
  for (let i = 0; i < evidence.length; i++) evidence[i] = (evidence[i] as number) / unit;
}
