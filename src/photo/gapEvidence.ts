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
/** Colour steps are smaller than lightness steps and less noisy. */
const COLOUR_WEIGHT = 1.4;

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
  const s0 = new Float64Array(length + 1);
  const s1 = new Float64Array(length + 1);
  const s2 = new Float64Array(length + 1);
  const [p0, p1, p2] = map.planes;
  const { seen } = map;
  for (let line = 0; line < lines; line++) {
    const base = line * lineStride;
    let t0 = 0;
    let t1 = 0;
    let t2 = 0;
    for (let i = 0, at = base; i < length; i++, at += stride) {
      t0 += p0[at] as number;
      t1 += COLOUR_WEIGHT * (p1[at] as number);
      t2 += COLOUR_WEIGHT * (p2[at] as number);
      s0[i + 1] = t0;
      s1[i + 1] = t1;
      s2[i + 1] = t2;
    }
    for (const g of gapSizes) {
      const half = (g - 1) >> 1;
      const side = Math.max(2, g);
      const perGap = 1 / g;
      const perSide = 1 / side;
      for (let i = side + half + 1; i < length - side - half - 2; i++) {
        const a0 = i - half;
        const a1 = a0 + g;
        const b0 = a0 - side;
        const b1 = a1 + side;
        // Lightness first: most places are no valley in it, and colour alone is rare.
        const c0 = ((s0[a1] as number) - (s0[a0] as number)) * perGap;
        const l0 = ((s0[a0] as number) - (s0[b0] as number)) * perSide - c0;
        const r0 = ((s0[b1] as number) - (s0[a1] as number)) * perSide - c0;
        const c1 = ((s1[a1] as number) - (s1[a0] as number)) * perGap;
        const l1 = ((s1[a0] as number) - (s1[b0] as number)) * perSide - c1;
        const r1 = ((s1[b1] as number) - (s1[a1] as number)) * perSide - c1;
        const c2 = ((s2[a1] as number) - (s2[a0] as number)) * perGap;
        const l2 = ((s2[a0] as number) - (s2[b0] as number)) * perSide - c2;
        const r2 = ((s2[b1] as number) - (s2[a1] as number)) * perSide - c2;
        const dot = l0 * r0 + l1 * r1 + l2 * r2;
        if (dot <= 0) continue;
        const leftSize = l0 * l0 + l1 * l1 + l2 * l2;
        const rightSize = r0 * r0 + r1 * r1 + r2 * r2;
        // The weaker of the two sides counts, in the direction both agree on.
        const larger = leftSize > rightSize ? leftSize : rightSize;
        const agreed = dot / Math.sqrt(larger + 1e-9);
        const value = l0 > 0 && r0 > 0 ? agreed : LIGHT_GAP_WEIGHT * agreed;
        const at = base + i * stride;
        if (value <= (out[at] as number)) continue;
        if (seen[base + b0 * stride] === 0 || seen[base + (b1 - 1) * stride] === 0) continue;
        out[at] = value;
      }
    }
  }
}

function quantileOf(values: Float32Array, count: number, share: number): number {
  if (count === 0) return 0;
  // Every so-many-th value: some hundred give a quantile well enough.
  const every = Math.max(1, Math.floor(count / 160));
  const part = new Float32Array(Math.floor((count - 1) / every) + 1);
  for (let i = 0, j = 0; j < part.length; i += every, j++) part[j] = values[i] as number;
  part.sort();
  return part[Math.min(part.length - 1, Math.floor(share * part.length))] as number;
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
