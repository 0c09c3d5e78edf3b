import { degToRad, radToDeg } from '../angle.ts';
import type { SectionGeometry } from '../records/geometry.ts';
import { requireFinite, requirePositive } from './requirePositive.ts';
import { sectionProperties } from './sections/registry.ts';

const NMM_PER_NM = 1000;

/**
 * Nominal (elastic) surface shear stress τ = T/W, MPa, signed like the torque: the "elastic torsional
 * strength T·r/J" when T is the largest torque. It overstates the real stress once the bar has yielded.
 */
export function elasticShearStressMPa(geometry: SectionGeometry, torqueNm: number): number {
  requireFinite('torqueNm', torqueNm, 'N·m');
  return (torqueNm * NMM_PER_NM) / sectionProperties(geometry).torsionSectionModulusMm3;
}

/**
 * Shear stress τ = T/W_p, MPa, when the whole section has yielded without hardening: three quarters of
 * the elastic value for a solid round bar. A lower bound of the true stress at the largest torque of a
 * ductile bar (Nadai's construction with dT/dθ = 0).
 */
export function fullyPlasticShearStressMPa(geometry: SectionGeometry, torqueNm: number): number {
  requireFinite('torqueNm', torqueNm, 'N·m');
  return (torqueNm * NMM_PER_NM) / sectionProperties(geometry).plasticTorsionModulusMm3;
}

/**
 * Surface shear strain γ = r φ/L (no unit) of a bar twisted by φ over the gauge length L.
 * Engineering strain of the gauge section: after localisation the strain at the break is larger.
 */
export function surfaceShearStrain(geometry: SectionGeometry, twistDeg: number, gaugeLengthMm: number): number {
  requireFinite('twistDeg', twistDeg, 'degrees');
  requirePositive('gaugeLengthMm', gaugeLengthMm, 'mm');
  return (sectionProperties(geometry).shearStrainLeverMm * degToRad(twistDeg)) / gaugeLengthMm;
}

/**
 * Elastic angle of twist φ = T L/(G K), degrees, signed like the torque.
 * @param shearModulusMPa G, MPa, > 0
 */
export function elasticTwistDeg(
  geometry: SectionGeometry,
  torqueNm: number,
  gaugeLengthMm: number,
  shearModulusMPa: number,
): number {
  requireFinite('torqueNm', torqueNm, 'N·m');
  requirePositive('gaugeLengthMm', gaugeLengthMm, 'mm');
  requirePositive('shearModulusMPa', shearModulusMPa, 'MPa');
  const stiffnessNmm2 = shearModulusMPa * sectionProperties(geometry).torsionConstantMm4;
  return radToDeg((torqueNm * NMM_PER_NM * gaugeLengthMm) / stiffnessNmm2);
}
