import type { SurfacePoint } from './unroll.ts';

/** Length of a polyline on the unrolled surface, radii. */
export function polylineLength(points: readonly SurfacePoint[]): number {
  let length = 0;
  for (let i = 1; i < points.length; i++) {
    const a = points[i - 1] as SurfacePoint;
    const b = points[i] as SurfacePoint;
    length += Math.hypot(b.x - a.x, b.phi - a.phi);
  }
  return length;
}

/**
 * Points at equal steps of arc length along a polyline, both ends included.
 * @param count number of points, ≥ 2
 */
export function resamplePolyline(points: readonly SurfacePoint[], count: number): SurfacePoint[] {
  const total = polylineLength(points);
  const first = points[0];
  if (first === undefined || !(total > 0)) return [...points];
  const out: SurfacePoint[] = [];
  let segment = 1;
  let before = 0;
  for (let i = 0; i < count; i++) {
    const target = (total * i) / (count - 1);
    let a = points[segment - 1] as SurfacePoint;
    let b = points[segment] as SurfacePoint;
    let step = Math.hypot(b.x - a.x, b.phi - a.phi);
    while (before + step < target && segment < points.length - 1) {
      before += step;
      segment += 1;
      a = points[segment - 1] as SurfacePoint;
      b = points[segment] as SurfacePoint;
      step = Math.hypot(b.x - a.x, b.phi - a.phi);
    }
    const t = step > 0 ? Math.min(1, Math.max(0, (target - before) / step)) : 0;
    out.push({ x: a.x + t * (b.x - a.x), phi: a.phi + t * (b.phi - a.phi) });
  }
  return out;
}
