import { type Picture, sampleAt } from './picture.ts';

/**
 * A photo averaged along one direction: cells of `cellPx` along it, every `stepPx` across it. Turning marks,
 * grain and noise average out along the specimen; its edges stay sharp across.
 */
export interface AlignedCells {
  /** Unit vector along, photo-picture px; across = (alongY, −alongX) is "up". */
  readonly alongX: number;
  readonly alongY: number;
  /** Centre of the picture: along = 0, across = 0. */
  readonly centreX: number;
  readonly centreY: number;
  readonly cells: number;
  readonly cellPx: number;
  readonly rows: number;
  readonly stepPx: number;
  /** Position of cell 0's middle and of row 0, px from the centre. */
  readonly firstAlong: number;
  readonly firstAcross: number;
  /** Mean colour, [cell × (rows + 1) + row] summed over rows before it (cumulative), per plane. */
  readonly cumulative: readonly [Float64Array, Float64Array, Float64Array];
  /** Number of samples inside the picture, cumulative likewise. */
  readonly inside: Float64Array;
}

/** Averages the picture along `alongRad` (direction in the picture, x right, y down). */
export function alignCells(picture: Picture, alongRad: number, cellPx: number, stepPx: number): AlignedCells {
  const alongX = Math.cos(alongRad);
  const alongY = Math.sin(alongRad);
  const { widthPx: w, heightPx: h } = picture;
  const centreX = (w - 1) / 2;
  const centreY = (h - 1) / 2;
  const halfAlong = (Math.abs(alongX) * w + Math.abs(alongY) * h) / 2;
  const halfAcross = (Math.abs(alongY) * w + Math.abs(alongX) * h) / 2;
  const cells = Math.max(1, Math.floor((2 * halfAlong) / cellPx));
  const rows = Math.max(1, Math.floor((2 * halfAcross) / stepPx));
  const firstAlong = -((cells - 1) / 2) * cellPx;
  const firstAcross = -((rows - 1) / 2) * stepPx;
  const perCell = Math.max(2, Math.round(cellPx / 1.5));
  const size = cells * (rows + 1);
  const cumulative: [Float64Array, Float64Array, Float64Array] = [
    new Float64Array(size),
    new Float64Array(size),
    new Float64Array(size),
  ];
  const inside = new Float64Array(size);
  for (let c = 0; c < cells; c++) {
    for (let r = 0; r < rows; r++) {
      const across = firstAcross + r * stepPx;
      let n = 0;
      let s0 = 0;
      let s1 = 0;
      let s2 = 0;
      for (let k = 0; k < perCell; k++) {
        const along = firstAlong + (c + (k + 0.5) / perCell - 0.5) * cellPx;
        const x = centreX + along * alongX + across * alongY;
        const y = centreY + along * alongY - across * alongX;
        if (x < 0 || y < 0 || x > w - 1 || y > h - 1) continue;
        n += 1;
        s0 += sampleAt(picture.planes[0], w, h, x, y);
        s1 += sampleAt(picture.planes[1], w, h, x, y);
        s2 += sampleAt(picture.planes[2], w, h, x, y);
      }
      const i = c * (rows + 1) + r;
      const whole = n > perCell / 2;
      inside[i + 1] = (inside[i] as number) + (whole ? 1 : 0);
      cumulative[0][i + 1] = (cumulative[0][i] as number) + (whole ? s0 / n : 0);
      cumulative[1][i + 1] = (cumulative[1][i] as number) + (whole ? s1 / n : 0);
      cumulative[2][i + 1] = (cumulative[2][i] as number) + (whole ? s2 / n : 0);
    }
  }
  return { alongX, alongY, centreX, centreY, cells, cellPx, rows, stepPx, firstAlong, firstAcross, cumulative, inside };
}

/** Mean colour of one cell between two positions across (px from the centre); null when outside the photo. */
export function bandColour(grid: AlignedCells, cell: number, fromPx: number, toPx: number, out: Float64Array): boolean {
  let a = Math.round((fromPx - grid.firstAcross) / grid.stepPx);
  let b = Math.round((toPx - grid.firstAcross) / grid.stepPx);
  if (b <= a) b = a + 1;
  if (a < 0) a = 0;
  if (b > grid.rows) b = grid.rows;
  if (b <= a) return false;
  const base = cell * (grid.rows + 1);
  const n = (grid.inside[base + b] as number) - (grid.inside[base + a] as number);
  if (n < 1) return false;
  for (let k = 0; k < 3; k++) {
    const sums = grid.cumulative[k as 0 | 1 | 2];
    out[k] = ((sums[base + b] as number) - (sums[base + a] as number)) / n;
  }
  return true;
}
