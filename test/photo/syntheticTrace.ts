import type { SurfacePoint } from '../../src/photo/unroll.ts';
import type { Random } from '../pictures/random.ts';

export interface Scatter {
  /** Standard deviation along the axis, radii. */
  readonly sigma: number;
  /** Correlation from one point to the next, 0 to 1. */
  readonly correlation: number;
}

/** Points x(φ) from φ = −`reach` to +`reach`, with correlated scatter (first-order autoregressive). */
export function traceOf(
  x: (phi: number) => number,
  random: Random | null = null,
  { sigma, correlation }: Scatter = { sigma: 0.02, correlation: 0.8 },
  reach = 1.35,
  count = 181,
): SurfacePoint[] {
  let error = random ? random.normal() : 0;
  return Array.from({ length: count }, (_, i) => {
    const phi = -reach + (2 * reach * i) / (count - 1);
    if (random) error = correlation * error + Math.sqrt(1 - correlation ** 2) * random.normal();
    return { x: x(phi) + sigma * error, phi };
  });
}

/** Straight pieces between corners, points at equal steps. */
export function tracedThrough(corners: readonly SurfacePoint[], step = 0.02): SurfacePoint[] {
  return corners.slice(1).flatMap((to, i) => {
    const from = corners[i] as SurfacePoint;
    const length = Math.hypot(to.x - from.x, to.phi - from.phi);
    const count = Math.max(1, Math.round(length / step));
    return Array.from({ length: count }, (_, k) => ({
      x: from.x + ((to.x - from.x) * k) / count,
      phi: from.phi + ((to.phi - from.phi) * k) / count,
    }));
  });
}

export const mirrored = (trace: readonly SurfacePoint[]): SurfacePoint[] => trace.map(({ x, phi }) => ({ x: -x, phi }));

/** The same trace after the photo was turned upside down. */
export const upsideDown = (trace: readonly SurfacePoint[]): SurfacePoint[] =>
  trace.map(({ x, phi }) => ({ x: -x, phi: -phi })).reverse();
