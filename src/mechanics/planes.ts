import { degToRad, planeAngleDistanceDeg, radToDeg, wrapPlaneAngleDeg } from '../angle.ts';
import type { PredictedPlane, PredictedPlaneName, SurfaceStress } from './stressState.ts';

/** Below this share of the largest stress the in-plane differences are rounding, not a direction. */
const ISOTROPY_TOLERANCE = 1e-12;

/** Normal stress on the plane at θ, MPa, tension positive: σn = σx cos²θ + σy sin²θ + τ sin 2θ. */
export function normalStressMPa(stress: SurfaceStress, planeAngleDeg: number): number {
  const theta = degToRad(planeAngleDeg);
  const { sigmaXMPa, sigmaYMPa, tauMPa } = stress;
  return sigmaXMPa * Math.cos(theta) ** 2 + sigmaYMPa * Math.sin(theta) ** 2 + tauMPa * Math.sin(2 * theta);
}

/** Shear stress on the plane at θ, MPa: τnt = τ cos 2θ − ½ (σx − σy) sin 2θ. */
export function shearStressMPa(stress: SurfaceStress, planeAngleDeg: number): number {
  const theta = degToRad(planeAngleDeg);
  const { sigmaXMPa, sigmaYMPa, tauMPa } = stress;
  return tauMPa * Math.cos(2 * theta) - ((sigmaXMPa - sigmaYMPa) / 2) * Math.sin(2 * theta);
}

export interface PrincipalStresses {
  /** Larger and smaller principal stress in the surface, MPa; the third, square to it, is 0. */
  readonly sigma1MPa: number;
  readonly sigma2MPa: number;
  /** Largest shear stress on planes square to the surface, MPa: the radius of Mohr's circle. */
  readonly maxShearMPa: number;
  /** Plane that carries σ1, degrees, (−90, 90]; null when every plane carries the same normal stress. */
  readonly tensionPlaneAngleDeg: number | null;
}

/**
 * Principal stresses in the surface: σ1,2 = ½(σx + σy) ± R, R = hypot(½(σx − σy), τ), θ = ½ atan2(2τ, σx − σy).
 * @see any mechanics of materials text, plane stress; checked in test/reference/planes.csv
 */
export function principalStresses({ sigmaXMPa, sigmaYMPa, tauMPa }: SurfaceStress): PrincipalStresses {
  const mean = (sigmaXMPa + sigmaYMPa) / 2;
  const radius = Math.hypot((sigmaXMPa - sigmaYMPa) / 2, tauMPa);
  const largest = Math.max(Math.abs(sigmaXMPa), Math.abs(sigmaYMPa), Math.abs(tauMPa));
  return {
    sigma1MPa: mean + radius,
    sigma2MPa: mean - radius,
    maxShearMPa: radius,
    tensionPlaneAngleDeg:
      radius <= ISOTROPY_TOLERANCE * largest
        ? null
        : wrapPlaneAngleDeg(radToDeg(Math.atan2(2 * tauMPa, sigmaXMPa - sigmaYMPa)) / 2),
  };
}

/** True when every plane square to the surface carries the same normal stress and no shear: no preferred plane. */
export const isIsotropicInPlane = (stress: SurfaceStress): boolean =>
  principalStresses(stress).tensionPlaneAngleDeg === null;

/**
 * The four planes on which normal or shear stress peaks: tension (σ1), compression (σ2) and the two shear
 * planes halfway between. Of these the one nearer 0° is called transverse (in pure torsion it lies at 0°,
 * the longitudinal one at 90°); at equal distance, as under axial force alone, the one at θ1 − 45°.
 * Tension first, then compression, then the shear planes; empty when the state is isotropic in the surface.
 */
export function predictedPlanes(stress: SurfaceStress): PredictedPlane[] {
  const { sigma1MPa, sigma2MPa, maxShearMPa, tensionPlaneAngleDeg } = principalStresses(stress);
  if (tensionPlaneAngleDeg === null) return [];
  const mean = (stress.sigmaXMPa + stress.sigmaYMPa) / 2;
  const before = wrapPlaneAngleDeg(tensionPlaneAngleDeg - 45);
  const after = wrapPlaneAngleDeg(tensionPlaneAngleDeg + 45);
  const beforeIsTransverse = planeAngleDistanceDeg(before, 0) <= planeAngleDistanceDeg(after, 0);
  const at = (plane: PredictedPlaneName, angleDeg: number, normal: number, shear: number): PredictedPlane => ({
    plane,
    planeAngleDeg: wrapPlaneAngleDeg(angleDeg),
    normalStressMPa: normal,
    shearStressMPa: shear,
  });
  return [
    at('tension', tensionPlaneAngleDeg, sigma1MPa, 0),
    at('compression', tensionPlaneAngleDeg + 90, sigma2MPa, 0),
    at(beforeIsTransverse ? 'shear-transverse' : 'shear-longitudinal', before, mean, maxShearMPa),
    at(beforeIsTransverse ? 'shear-longitudinal' : 'shear-transverse', after, mean, -maxShearMPa),
  ];
}
