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
  // Where the neighbours of each column lie, the same for every row.
  const at = new Int32Array(columns * NEIGHBOURS.length).fill(-1);
  const part = new Float32Array(columns * NEIGHBOURS.length);
  for (let c = 0; c < columns; c++) {
    NEIGHBOURS.forEach((k, j) => {
      const x = c + k * period;
      if (x < 0 || x > columns - 1.001) return;
      at[c * NEIGHBOURS.length + j] = x | 0;
      part[c * NEIGHBOURS.length + j] = x - (x | 0);
    });
  }
  const values = new Float32Array(NEIGHBOURS.length);
  // Marks are relief: they change the light, hardly the colour.
  const plane = map.planes[0];
  const out = new Float32Array(plane.length);
  for (let r = 0; r < rows; r++) {
    const base = r * columns;
    let level = 0;
    for (let c = 0; c < columns; c++) level += plane[base + c] as number;
    level /= columns;
    for (let c = 0; c < columns; c++) {
      let n = 0;
      for (let j = c * NEIGHBOURS.length; j < (c + 1) * NEIGHBOURS.length; j++) {
        const i = at[j] as number;
        if (i < 0 || map.seen[base + i] !== 1 || map.seen[base + i + 1] !== 1) continue;
        const f = part[j] as number;
        const v = (plane[base + i] as number) * (1 - f) + (plane[base + i + 1] as number) * f;
        // Kept in order as they come: at most six.
        let place = n++;
        while (place > 0 && (values[place - 1] as number) > v) {
          values[place] = values[place - 1] as number;
          place -= 1;
        }
        values[place] = v;
      }
      if (n < 3) {
        out[base + c] = plane[base + c] as number;
        continue;
      }
      const median = ((values[(n - 1) >> 1] as number) + (values[n >> 1] as number)) / 2;
      out[base + c] = (plane[base + c] as number) - median + level;
    }
  }
  return { ...map, planes: [out, map.planes[1], map.planes[2]] };
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
