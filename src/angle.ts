/**
 * Axial angles: the plane at θ and the plane at θ ± 180° are the same plane. They are wrapped,
 * compared and averaged only here. Range of every result: (−90, 90] degrees unless said otherwise.
 */

export const degToRad = (deg: number): number => (deg * Math.PI) / 180;
export const radToDeg = (rad: number): number => (rad * 180) / Math.PI;

/** The same plane, written in (−90, 90] degrees. NaN stays NaN. */
export function wrapPlaneAngleDeg(angleDeg: number): number {
  const turned = angleDeg - 180 * Math.floor((angleDeg + 90) / 180);
  return turned === -90 ? 90 : turned === 0 ? 0 : turned;
}

/** Signed axial difference a − b in (−90, 90] degrees: how far plane a is turned from plane b. */
export function planeAngleDifferenceDeg(aDeg: number, bDeg: number): number {
  return wrapPlaneAngleDeg(aDeg - bDeg);
}

/** Distance between two planes, 0 to 90 degrees. */
export function planeAngleDistanceDeg(aDeg: number, bDeg: number): number {
  return Math.abs(planeAngleDifferenceDeg(aDeg, bDeg));
}

export type Hand = 'left' | 'right' | 'none';

/** Hand of the helix a trace at θ lies on: θ > 0 leans like "/" and is left-handed; 0 and 90 have none. */
export function handOfPlaneAngle(planeAngleDeg: number): Hand {
  const wrapped = wrapPlaneAngleDeg(planeAngleDeg);
  if (wrapped === 0 || wrapped === 90) return 'none';
  return wrapped > 0 ? 'left' : 'right';
}
