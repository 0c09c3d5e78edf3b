import type { Picture } from './picture.ts';
import { type SpecimenFrame, toPhoto } from './unroll.ts';

/**
 * The visible face unrolled: rows are azimuths in equal steps (so equal steps of s), columns equal steps
 * along the axis, both `stepRadii` long: the map is square to scale on the surface.
 */
export interface UnrolledMap {
  readonly frame: SpecimenFrame;
  readonly rows: number;
  readonly columns: number;
  readonly stepRadii: number;
  /** Azimuth of row 0, radians (negative: the lower side). */
  readonly firstPhi: number;
  /** Position of column 0 along the axis, radii from the frame's origin. */
  readonly firstX: number;
  readonly planes: readonly [Float32Array, Float32Array, Float32Array];
  /** 1 where the photo shows the point. */
  readonly seen: Uint8Array;
}

/**
 * Samples the unrolled face from a picture. `frame` must be in pixels of that picture.
 * @param halfWidthRad azimuth of the first and last row, radians
 */
export function unrollFace(
  picture: Picture,
  frame: SpecimenFrame,
  fromX: number,
  toX: number,
  stepRadii: number,
  halfWidthRad: number,
): UnrolledMap {
  const rows = Math.max(3, Math.round((2 * halfWidthRad) / stepRadii) + 1);
  const columns = Math.max(3, Math.round((toX - fromX) / stepRadii) + 1);
  const firstPhi = (-(rows - 1) / 2) * stepRadii;
  const { widthPx: w, heightPx: h } = picture;
  const n = rows * columns;
  const planes: [Float32Array, Float32Array, Float32Array] = [
    new Float32Array(n),
    new Float32Array(n),
    new Float32Array(n),
  ];
  const seen = new Uint8Array(n);
  const [p0, p1, p2] = picture.planes;
  for (let r = 0; r < rows; r++) {
    const phi = firstPhi + r * stepRadii;
    // Along a row the photo point moves on a straight line: two points give it.
    const a = toPhoto(frame, { x: fromX, phi });
    const b = toPhoto(frame, { x: fromX + (columns - 1) * stepRadii, phi });
    const dx = (b.xPx - a.xPx) / (columns - 1);
    const dy = (b.yPx - a.yPx) / (columns - 1);
    let i = r * columns;
    for (let c = 0; c < columns; c++, i++) {
      const x = a.xPx + c * dx;
      const y = a.yPx + c * dy;
      if (x < 0 || y < 0 || x >= w - 1 || y >= h - 1) continue;
      seen[i] = 1;
      const x0 = x | 0;
      const y0 = y | 0;
      const fx = x - x0;
      const fy = y - y0;
      const k = y0 * w + x0;
      const w00 = (1 - fx) * (1 - fy);
      const w10 = fx * (1 - fy);
      const w01 = (1 - fx) * fy;
      const w11 = fx * fy;
      planes[0][i] =
        (p0[k] as number) * w00 +
        (p0[k + 1] as number) * w10 +
        (p0[k + w] as number) * w01 +
        (p0[k + w + 1] as number) * w11;
      planes[1][i] =
        (p1[k] as number) * w00 +
        (p1[k + 1] as number) * w10 +
        (p1[k + w] as number) * w01 +
        (p1[k + w + 1] as number) * w11;
      planes[2][i] =
        (p2[k] as number) * w00 +
        (p2[k + 1] as number) * w10 +
        (p2[k + w] as number) * w01 +
        (p2[k + w + 1] as number) * w11;
    }
  }
  return { frame, rows, columns, stepRadii, firstPhi, firstX: fromX, planes, seen };
}
