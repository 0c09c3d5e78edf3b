/**
 * The visible face of a round bar and its unrolled surface. The only place where points of the photo
 * are turned into points of the surface and back.
 *
 * Photo points are { xPx, yPx } of the upright photo (y grows down, integer = pixel centre). Surface
 * points are { x, phi }: x along the axis and the azimuth phi of the visible face, both in units of
 * the radius (s = r·φ, so phi in radians *is* s/r). phi = 0 faces the camera and grows upwards when
 * the axis is turned horizontal.
 */

export interface PhotoPoint {
  readonly xPx: number;
  readonly yPx: number;
}

/** Point on the unrolled surface in radii: `x` along the axis, `phi` = s/r in radians, up. */
export interface SurfacePoint {
  readonly x: number;
  readonly phi: number;
}

/** Where the specimen lies in the photo. */
export interface SpecimenFrame {
  /** A point of the axis; x = 0 of the unrolled surface. */
  readonly originPx: PhotoPoint;
  /** Unit vector along the axis in the photo. */
  readonly alongX: number;
  readonly alongY: number;
  /** Half the distance between the two specimen edges at the origin, px, > 0. */
  readonly radiusPx: number;
  /** Growth of that half-distance per px along the axis (perspective taper), dimensionless. */
  readonly taper: number;
  /** Distance of the camera from the axis in radii, > 2; Infinity for a parallel view. */
  readonly cameraDistanceRadii: number;
  /** Where along the axis the camera stands (the middle of the photo), radii from the origin. */
  readonly cameraAlongRadii: number;
}

/** Frame from two axis points and the diameter in px. @throws RangeError when the points coincide or the diameter is not > 0. */
export function frameFromAxis(
  from: PhotoPoint,
  to: PhotoPoint,
  diameterPx: number,
  options: { readonly taper?: number; readonly cameraDistanceRadii?: number; readonly photoMiddlePx?: PhotoPoint } = {},
): SpecimenFrame {
  const length = Math.hypot(to.xPx - from.xPx, to.yPx - from.yPx);
  if (!(length > 0)) throw new RangeError('the two axis points must be apart from each other');
  if (!(diameterPx > 0)) throw new RangeError(`diameterPx must be > 0, got ${diameterPx}`);
  const originPx = { xPx: (from.xPx + to.xPx) / 2, yPx: (from.yPx + to.yPx) / 2 };
  const alongX = (to.xPx - from.xPx) / length;
  const alongY = (to.yPx - from.yPx) / length;
  const middle = options.photoMiddlePx ?? originPx;
  return {
    originPx,
    alongX,
    alongY,
    radiusPx: diameterPx / 2,
    taper: options.taper ?? 0,
    cameraDistanceRadii: options.cameraDistanceRadii ?? Number.POSITIVE_INFINITY,
    cameraAlongRadii: ((middle.xPx - originPx.xPx) * alongX + (middle.yPx - originPx.yPx) * alongY) / (diameterPx / 2),
  };
}

/**
 * Height of a surface point in the side view as a fraction of the half-width between the edges.
 * Parallel view: sin φ. Camera at k radii: sin φ·√(k² − 1)/(k − cos φ), the central projection of the
 * circle, whose edge (the tangent ray) lies at cos φ = 1/k.
 */
export function heightOfAzimuth(phi: number, cameraDistanceRadii: number): number {
  if (!Number.isFinite(cameraDistanceRadii)) return Math.sin(phi);
  const k = cameraDistanceRadii;
  return (Math.sin(phi) * Math.sqrt(k * k - 1)) / (k - Math.cos(phi));
}

/** Inverse of {@link heightOfAzimuth}; heights beyond the edge give the edge's azimuth. */
export function azimuthOfHeight(height: number, cameraDistanceRadii: number): number {
  const clamped = Math.max(-1, Math.min(1, height));
  if (!Number.isFinite(cameraDistanceRadii)) return Math.asin(clamped);
  // h (k − cos φ) = q sin φ with q = √(k² − 1): φ = asin(h k / √(h² + q²)) − atan(h / q).
  const k = cameraDistanceRadii;
  const q = Math.sqrt(k * k - 1);
  const argument = (clamped * k) / Math.hypot(clamped, q);
  return Math.asin(Math.max(-1, Math.min(1, argument))) - Math.atan2(clamped, q);
}

/**
 * How much larger than the axis the camera sees the surface at φ: k/(k − cos φ), since it is nearer by r·cos φ.
 * Lengths along the axis are drawn out by it from the point the camera stands above.
 */
function magnification(phi: number, cameraDistanceRadii: number): number {
  if (!Number.isFinite(cameraDistanceRadii)) return 1;
  return cameraDistanceRadii / (cameraDistanceRadii - Math.cos(phi));
}

/** Photo point → unrolled surface. Points outside the edges land on the edge. */
export function toSurface(frame: SpecimenFrame, point: PhotoPoint): SurfacePoint {
  const dx = point.xPx - frame.originPx.xPx;
  const dy = point.yPx - frame.originPx.yPx;
  const alongPx = dx * frame.alongX + dy * frame.alongY;
  const upPx = dx * frame.alongY - dy * frame.alongX;
  const radiusPx = frame.radiusPx + frame.taper * alongPx;
  const phi = azimuthOfHeight(upPx / radiusPx, frame.cameraDistanceRadii);
  const seen = alongPx / frame.radiusPx - frame.cameraAlongRadii;
  return { x: frame.cameraAlongRadii + seen / magnification(phi, frame.cameraDistanceRadii), phi };
}

/** Unrolled surface → photo point. */
export function toPhoto(frame: SpecimenFrame, point: SurfacePoint): PhotoPoint {
  const seen = (point.x - frame.cameraAlongRadii) * magnification(point.phi, frame.cameraDistanceRadii);
  const alongPx = (frame.cameraAlongRadii + seen) * frame.radiusPx;
  const upPx = heightOfAzimuth(point.phi, frame.cameraDistanceRadii) * (frame.radiusPx + frame.taper * alongPx);
  return {
    xPx: frame.originPx.xPx + alongPx * frame.alongX + upPx * frame.alongY,
    yPx: frame.originPx.yPx + alongPx * frame.alongY - upPx * frame.alongX,
  };
}
