import type { UnrolledMap } from './unrolledMap.ts';

/** Weakest correlation of the face with itself one period on that is taken for turning marks. */
const LEAST_CORRELATION = 0.3;
const LEAST_PERIOD = 3;
const NEIGHBOURS = [-3, -2, -1, 1, 2, 3] as const;

/**
 * Turning marks and threads repeat along the specimen, the break does not: from every point the median of what stands one,
 * two and three periods away on both sides is taken off (and the row's own level put back). A face without a period is
 * returned as it is.
 */
export function withoutPeriodicMarks(map: UnrolledMap): UnrolledMap {
  const period = periodOf(map);
  if (period === null) return map;
  const { rows, columns } = map;
  const values = new Float64Array(NEIGHBOURS.length);
  const planes = map.planes.map((plane) => {
    const out = new Float32Array(plane.length);
    for (let r = 0; r < rows; r++) {
      const base = r * columns;
      let level = 0;
      for (let c = 0; c < columns; c++) level += plane[base + c] as number;
      level /= columns;
      for (let c = 0; c < columns; c++) {
        let n = 0;
        for (const k of NEIGHBOURS) {
          const at = c + k * period;
          if (at < 0 || at > columns - 1.001) continue;
          const i = at | 0;
          if (map.seen[base + i] !== 1 || map.seen[base + i + 1] !== 1) continue;
          const f = at - i;
          values[n++] = (plane[base + i] as number) * (1 - f) + (plane[base + i + 1] as number) * f;
        }
        if (n < 3) {
          out[base + c] = plane[base + c] as number;
          continue;
        }
        const sorted = values.subarray(0, n).slice().sort();
        const median = ((sorted[(n - 1) >> 1] as number) + (sorted[n >> 1] as number)) / 2;
        out[base + c] = (plane[base + c] as number) - median + level;
      }
    }
    return out;
  });
  return { ...map, planes: planes as [Float32Array, Float32Array, Float32Array] };
}

/** Period of transverse marks, columns; null when the face shows none. */
function periodOf(map: UnrolledMap): number | null {
  const { rows, columns } = map;
  const profile = new Float64Array(columns);
  const l = map.planes[0];
  for (let c = 0; c < columns; c++) {
    let sum = 0;
    for (let r = 0; r < rows; r++) sum += l[r * columns + c] as number;
    profile[c] = sum / rows;
  }
  // Differences take off the slow change of light along the specimen.
  const change = Float64Array.from(
    { length: columns - 2 },
    (_, c) => (profile[c + 1] as number) * 2 - (profile[c] as number) - (profile[c + 2] as number),
  );
  const limit = 4 * Math.sqrt(change.reduce((a, v) => a + v * v, 0) / change.length);
  for (let c = 0; c < change.length; c++) change[c] = Math.max(-limit, Math.min(limit, change[c] as number));
  const longest = Math.min(Math.floor(change.length / 4), Math.round(1.2 / map.stepRadii));
  const correlation = (lag: number) => {
    let dot = 0;
    let a = 0;
    let b = 0;
    for (let c = 0; c + lag < change.length; c++) {
      const p = change[c] as number;
      const q = change[c + lag] as number;
      dot += p * q;
      a += p * p;
      b += q * q;
    }
    return dot / Math.sqrt(a * b + 1e-9);
  };
  let best = 0;
  let value = LEAST_CORRELATION;
  const all = Float64Array.from({ length: longest + 2 }, (_, lag) => (lag < LEAST_PERIOD - 1 ? 0 : correlation(lag)));
  for (let lag = LEAST_PERIOD; lag <= longest; lag++) {
    const v = all[lag] as number;
    if (v > value * 1.1 && v >= (all[lag - 1] as number) && v >= (all[lag + 1] as number)) {
      best = lag;
      value = v;
    }
  }
  if (best === 0) return null;
  const a = all[best - 1] as number;
  const c = all[best + 1] as number;
  const curve = a + c - 2 * value;
  return best + (curve < 0 ? Math.max(-0.5, Math.min(0.5, (a - c) / (2 * curve))) : 0);
}
