import type { Picture } from './picture.ts';

/** An edge pixel with the direction of steepest change across it. */
export interface EdgeSet {
  readonly count: number;
  readonly x: Float32Array;
  readonly y: Float32Array;
  /** Direction of the gradient, radians in [0, π). */
  readonly direction: Float32Array;
  /** 0 to 1: how far the change stands above the texture of the photo. */
  readonly weight: Float32Array;
}

/** A straight edge: points p with p·(cos, sin) = rho, supported between `from` and `to` along it. */
export interface EdgeLine {
  /** Direction of the normal, radians in [0, π). */
  readonly normal: number;
  readonly rho: number;
  /** Support along the direction (−sin, cos), px. */
  readonly from: number;
  readonly to: number;
  /** Sum of the weights of the edge pixels on it, px. */
  readonly support: number;
}

function blurred(plane: Float32Array, w: number, h: number): Float32Array {
  const mid = new Float32Array(plane.length);
  const out = new Float32Array(plane.length);
  for (let y = 0; y < h; y++) {
    const r = y * w;
    mid[r] = plane[r] as number;
    mid[r + w - 1] = plane[r + w - 1] as number;
    for (let x = 1; x < w - 1; x++) {
      const i = r + x;
      mid[i] = 0.25 * (plane[i - 1] as number) + 0.5 * (plane[i] as number) + 0.25 * (plane[i + 1] as number);
    }
  }
  out.set(mid);
  for (let y = 1; y < h - 1; y++) {
    for (let i = y * w; i < (y + 1) * w; i++) {
      out[i] = 0.25 * (mid[i - w] as number) + 0.5 * (mid[i] as number) + 0.25 * (mid[i + w] as number);
    }
  }
  return out;
}

/**
 * Edge pixels of the colour photo: largest eigenvector of the colour structure tensor (Di Zenzo 1986), each
 * channel in units of its own median gradient, thinned across the edge.
 */
export function findEdges(picture: Picture): EdgeSet {
  const { widthPx: w, heightPx: h } = picture;
  const n = w * h;
  const e = new Float32Array(n);
  const f = new Float32Array(n);
  const g = new Float32Array(n);
  picture.planes.forEach((raw, channel) => {
    const plane = blurred(raw, w, h);
    const gx = new Float32Array(n);
    const gy = new Float32Array(n);
    const sizes: number[] = [];
    for (let y = 1; y < h - 1; y++) {
      for (let x = 1; x < w - 1; x++) {
        const i = y * w + x;
        const dx = ((plane[i + 1] as number) - (plane[i - 1] as number)) / 2;
        const dy = ((plane[i + w] as number) - (plane[i - w] as number)) / 2;
        gx[i] = dx;
        gy[i] = dy;
        if ((x & 7) === 0 && (y & 3) === 0) sizes.push(dx * dx + dy * dy);
      }
    }
    sizes.sort((p, q) => p - q);
    const median = sizes[sizes.length >> 1] ?? 0;
    const unit = 1 / Math.max(median, channel === 0 ? 0.3 : 0.15);
    for (let i = 0; i < n; i++) {
      const dx = gx[i] as number;
      const dy = gy[i] as number;
      e[i] = (e[i] as number) + dx * dx * unit;
      f[i] = (f[i] as number) + dx * dy * unit;
      g[i] = (g[i] as number) + dy * dy * unit;
    }
  });
  const size = new Float32Array(n);
  const angle = new Float32Array(n);
  for (let i = 0; i < n; i++) {
    const half = ((e[i] as number) - (g[i] as number)) / 2;
    const root = Math.sqrt(half * half + (f[i] as number) ** 2);
    size[i] = Math.sqrt(((e[i] as number) + (g[i] as number)) / 2 + root);
    angle[i] =
      (size[i] as number) >= 2 ? 0.5 * Math.atan2(2 * (f[i] as number), (e[i] as number) - (g[i] as number)) : 0;
  }
  const xs: number[] = [];
  const ys: number[] = [];
  const directions: number[] = [];
  const weights: number[] = [];
  for (let y = 2; y < h - 2; y++) {
    for (let x = 2; x < w - 2; x++) {
      const i = y * w + x;
      const m = size[i] as number;
      if (m < 2) continue;
      const a = angle[i] as number;
      const dx = Math.cos(a);
      const dy = Math.sin(a);
      const ahead = between(size, w, x + dx, y + dy);
      const behind = between(size, w, x - dx, y - dy);
      if (m < ahead || m <= behind) continue;
      const curve = ahead + behind - 2 * m;
      const shift = curve < 0 ? Math.max(-0.5, Math.min(0.5, (behind - ahead) / (2 * curve))) : 0;
      xs.push(x + shift * dx);
      ys.push(y + shift * dy);
      directions.push(a < 0 ? a + Math.PI : a);
      weights.push(m / (m + 4));
    }
  }
  return {
    count: xs.length,
    x: Float32Array.from(xs),
    y: Float32Array.from(ys),
    direction: Float32Array.from(directions),
    weight: Float32Array.from(weights),
  };
}

function between(plane: Float32Array, w: number, x: number, y: number): number {
  const x0 = x | 0;
  const y0 = y | 0;
  const fx = x - x0;
  const fy = y - y0;
  const i = y0 * w + x0;
  return (
    ((plane[i] as number) * (1 - fx) + (plane[i + 1] as number) * fx) * (1 - fy) +
    ((plane[i + w] as number) * (1 - fx) + (plane[i + w + 1] as number) * fx) * fy
  );
}

const STEPS = 360;
const WINDOW = 4;

/**
 * The straight edges of a photo: Hough transform (normal form, Duda & Hart 1972) in which an edge pixel votes
 * only for lines along its own direction ± 2°; the strongest line is taken, refined, its pixels withdrawn, and so on.
 * @param most how many lines at the most
 * @param minimumSupport weight a line needs, px
 */
export function findLines(
  edges: EdgeSet,
  widthPx: number,
  heightPx: number,
  most: number,
  minimumSupport: number,
): EdgeLine[] {
  const reach = Math.ceil(Math.hypot(widthPx, heightPx)) + 2;
  const columns = 2 * reach + 1;
  const votes = new Float32Array(STEPS * columns);
  const cosines = Float64Array.from({ length: STEPS }, (_, k) => Math.cos((k * Math.PI) / STEPS));
  const sines = Float64Array.from({ length: STEPS }, (_, k) => Math.sin((k * Math.PI) / STEPS));
  const vote = (i: number, sign: number) => {
    const centre = Math.round(((edges.direction[i] as number) * STEPS) / Math.PI);
    const weight = sign * (edges.weight[i] as number);
    for (let k = centre - WINDOW; k <= centre + WINDOW; k++) {
      const step = k < 0 ? k + STEPS : k >= STEPS ? k - STEPS : k;
      const rho = (edges.x[i] as number) * (cosines[step] as number) + (edges.y[i] as number) * (sines[step] as number);
      const position = rho + reach;
      const cell = position | 0;
      const part = position - cell;
      const at = step * columns + cell;
      votes[at] = (votes[at] as number) + weight * (1 - part);
      votes[at + 1] = (votes[at + 1] as number) + weight * part;
    }
  };
  for (let i = 0; i < edges.count; i++) vote(i, 1);
  const rowBest = new Float64Array(STEPS);
  const rowAt = new Int32Array(STEPS);
  const dirty = new Uint8Array(STEPS).fill(1);
  const used = new Uint8Array(edges.count);
  const lines: EdgeLine[] = [];
  for (let round = 0; round < most * 8 && lines.length < most; round++) {
    let best = -1;
    for (let k = 0; k < STEPS; k++) {
      if (dirty[k] === 1) {
        let max = 0;
        let at = 0;
        for (let c = k * columns; c < (k + 1) * columns - 1; c++) {
          const v = (votes[c] as number) + 0.5 * (votes[c + 1] as number);
          if (v > max) {
            max = v;
            at = c - k * columns;
          }
        }
        rowBest[k] = max;
        rowAt[k] = at;
        dirty[k] = 0;
      }
      if (best < 0 || (rowBest[k] as number) > (rowBest[best] as number)) best = k;
    }
    if (best < 0 || (rowBest[best] as number) < minimumSupport * 0.8) break;
    const seed = { normal: (best * Math.PI) / STEPS, rho: (rowAt[best] as number) - reach + 0.33 };
    const found = refineLine(edges, used, seed);
    for (const i of found.members) {
      used[i] = 1;
      vote(i, -1);
    }
    const centre = best;
    for (let k = centre - 14; k <= centre + 14; k++) dirty[(k + STEPS) % STEPS] = 1;
    if (found.members.length === 0) {
      // Nothing left to withdraw there: blank the cell so that the search goes on.
      votes[best * columns + (rowAt[best] as number)] = 0;
      votes[best * columns + (rowAt[best] as number) + 1] = 0;
    } else if (found.line !== null && found.line.support >= minimumSupport) lines.push(found.line);
  }
  return lines;
}

function refineLine(
  edges: EdgeSet,
  used: Uint8Array,
  seed: { normal: number; rho: number },
): { line: EdgeLine | null; members: number[] } {
  let { normal, rho } = seed;
  let members: number[] = [];
  for (let round = 0; round < 3; round++) {
    const c = Math.cos(normal);
    const s = Math.sin(normal);
    const width = round === 0 ? 2.5 : 1.6;
    members = [];
    let sw = 0;
    let st = 0;
    let sd = 0;
    let stt = 0;
    let std = 0;
    for (let i = 0; i < edges.count; i++) {
      if (used[i] === 1) continue;
      const x = edges.x[i] as number;
      const y = edges.y[i] as number;
      const d = x * c + y * s - rho;
      if (d > width || d < -width) continue;
      let turn = Math.abs((edges.direction[i] as number) - normal);
      if (turn > Math.PI / 2) turn = Math.PI - turn;
      if (turn > 0.14) continue;
      members.push(i);
      const weight = edges.weight[i] as number;
      const t = -x * s + y * c;
      sw += weight;
      st += weight * t;
      sd += weight * d;
      stt += weight * t * t;
      std += weight * t * d;
    }
    if (members.length < 8 || sw <= 0) return { line: null, members };
    const variance = stt - (st * st) / sw;
    const slope = variance > 1e-6 ? (std - (st * sd) / sw) / variance : 0;
    const bounded = Math.max(-0.02, Math.min(0.02, slope));
    const meanT = st / sw;
    const meanD = sd / sw;
    // Rotating the normal by −slope keeps the foot of the mean point on the line.
    const px = (rho + meanD) * c - meanT * s;
    const py = (rho + meanD) * s + meanT * c;
    normal -= bounded;
    rho = px * Math.cos(normal) + py * Math.sin(normal);
    if (normal < 0) {
      normal += Math.PI;
      rho = -rho;
    } else if (normal >= Math.PI) {
      normal -= Math.PI;
      rho = -rho;
    }
  }
  const c = Math.cos(normal);
  const s = Math.sin(normal);
  const along = members
    .map((i) => ({ t: -(edges.x[i] as number) * s + (edges.y[i] as number) * c, weight: edges.weight[i] as number }))
    .sort((a, b) => a.t - b.t);
  const total = along.reduce((sum, m) => sum + m.weight, 0);
  const quantile = (share: number) => {
    let sum = 0;
    for (const m of along) {
      sum += m.weight;
      if (sum >= share * total) return m.t;
    }
    return 0;
  };
  return { line: { normal, rho, from: quantile(0.01), to: quantile(0.99), support: total }, members };
}
