import { LabError } from '../errors.ts';
import { requirePositive } from './requirePositive.ts';

export interface TubeToBuckle {
  readonly diameterMm: number;
  readonly boreMm: number;
  /** Length free between the grips, mm. */
  readonly freeLengthMm: number;
  readonly youngsModulusMPa: number;
  readonly poissonsRatio: number;
}

export interface TubeBuckling {
  readonly meanRadiusMm: number;
  readonly wallMm: number;
  /** r/t. */
  readonly slenderness: number;
  /** Z = l² √(1 − ν²)/(r t). */
  readonly curvatureParameter: number;
  /** Elastic critical shear stress without knock-down, MPa. */
  readonly theoreticalShearStressMPa: number;
  /** The same with the knock-down for imperfect tubes, MPa: above this a tube may buckle before it breaks. */
  readonly criticalShearStressMPa: number;
  readonly knockDown: number;
  readonly formula: 'moderately-long' | 'long';
  /** False outside the range the formula was published for (γZ ≤ 50, or r/t < 10). */
  readonly insideValidity: boolean;
}

/** γ^(3/4), recommended by NASA SP-8007 (1965, revised 1968) for cylinders in torsion. */
export const TORSION_KNOCK_DOWN = 0.67;
/** Coefficient of k = 0.85 (γZ)^(3/4), NASA SP-8007. */
const SP_8007_COEFFICIENT = 0.85;
/** Moderately long cylinders: γZ above this, NASA SP-8007. */
const SMALLEST_GAMMA_Z = 50;
/** Below this r/t the wall is no thin shell. Common practice. */
const SMALLEST_SLENDERNESS = 10;

/**
 * Elastic buckling of a round tube in torsion. Moderately long: τ = k π² E/(12 (1 − ν²)) (t/l)² with
 * k = 0.85 (γZ)^(3/4); long: τ = E (t/r)^(3/2)/(3√2 (1 − ν²)^(3/4)); the larger of the two holds.
 * Elastic only: meaningless above the shear proportional limit.
 * @throws LabError `out-of-range`, or `contradiction` when the bore is not smaller than the diameter
 * @see NASA SP-8007; Timoshenko & Gere, Theory of Elastic Stability; checked in test/reference/buckling.csv
 */
export function tubeBuckling(tube: TubeToBuckle): TubeBuckling {
  const { diameterMm, boreMm, freeLengthMm, youngsModulusMPa: youngs, poissonsRatio: poisson } = tube;
  requirePositive('diameterMm', diameterMm, 'mm');
  requirePositive('boreMm', boreMm, 'mm');
  requirePositive('freeLengthMm', freeLengthMm, 'mm');
  requirePositive('youngsModulusMPa', youngs, 'MPa');
  requirePoissonsRatio(poisson);
  if (!(boreMm < diameterMm)) {
    throw new LabError('contradiction', `boreMm must be smaller than diameterMm (${diameterMm} mm), got ${boreMm} mm`, {
      input: 'boreMm',
      value: boreMm,
    });
  }
  const wallMm = (diameterMm - boreMm) / 2;
  const meanRadiusMm = (diameterMm + boreMm) / 4;
  const z = ((freeLengthMm * freeLengthMm) / (meanRadiusMm * wallMm)) * Math.sqrt(1 - poisson ** 2);
  const plateMPa = ((Math.PI ** 2 * youngs) / (12 * (1 - poisson ** 2))) * (wallMm / freeLengthMm) ** 2;
  const moderatelyLongMPa = SP_8007_COEFFICIENT * z ** 0.75 * plateMPa;
  const longMPa = longTubeShearStressMPa(youngs, poisson, meanRadiusMm / wallMm);
  const theoreticalShearStressMPa = Math.max(moderatelyLongMPa, longMPa);
  const gammaZ = TORSION_KNOCK_DOWN ** (4 / 3) * z;
  return {
    meanRadiusMm,
    wallMm,
    slenderness: meanRadiusMm / wallMm,
    curvatureParameter: z,
    theoreticalShearStressMPa,
    criticalShearStressMPa: TORSION_KNOCK_DOWN * theoreticalShearStressMPa,
    knockDown: TORSION_KNOCK_DOWN,
    formula: moderatelyLongMPa >= longMPa ? 'moderately-long' : 'long',
    insideValidity: gammaZ > SMALLEST_GAMMA_Z && meanRadiusMm / wallMm >= SMALLEST_SLENDERNESS,
  };
}

/** Long thin tube, two circumferential waves: τ = E (t/r)^(3/2)/(3√2 (1 − ν²)^(3/4)), MPa. */
export function longTubeShearStressMPa(youngsModulusMPa: number, poissonsRatio: number, slenderness: number): number {
  return youngsModulusMPa / (3 * Math.SQRT2 * (1 - poissonsRatio ** 2) ** 0.75 * slenderness ** 1.5);
}

/**
 * Donnell's elastic critical shear stress, MPa, a second opinion: E (t/l)²/(1 − ν²) · [2.8 + √(2.6 + 1.40 H^1.5)]
 * with hinged edges, [4.6 + √(7.8 + 1.67 H^1.5)] clamped, H = l² √(1 − ν²)/(2 r t).
 * @see Donnell, NACA Report 479 (1933)
 */
export function donnellShearStressMPa(tube: TubeToBuckle, edges: 'hinged' | 'clamped'): number {
  const { wallMm, curvatureParameter } = tubeBuckling(tube);
  const h = (curvatureParameter / 2) ** 1.5;
  const bracket = edges === 'hinged' ? 2.8 + Math.sqrt(2.6 + 1.4 * h) : 4.6 + Math.sqrt(7.8 + 1.67 * h);
  return (tube.youngsModulusMPa * (wallMm / tube.freeLengthMm) ** 2 * bracket) / (1 - tube.poissonsRatio ** 2);
}

/** Isotropic, stable: −1 < ν < 0.5; torsion specimens have 0 ≤ ν < 0.5. @throws LabError `out-of-range` */
export function requirePoissonsRatio(value: number): void {
  if (value >= 0 && value < 0.5) return;
  throw new LabError('out-of-range', `poissonsRatio must be ≥ 0 and < 0.5, got ${value}`, {
    input: 'poissonsRatio',
    value,
  });
}
