import { degToRad } from '../angle.ts';
import { LabError } from '../errors.ts';
import type { SectionGeometry } from '../records/geometry.ts';
import type { BreakLocation, TorqueDirection, TorsionHistory } from '../records/test.ts';
import { requireFinite } from './requirePositive.ts';
import { sectionProperties } from './sections/registry.ts';
import type { SurfaceStress } from './stressState.ts';
import { elasticShearStressMPa } from './torsion.ts';

/** The loads of a test; every one may be unknown. A stored test fits as it is. */
export interface TestLoads {
  readonly geometry?: SectionGeometry | null | undefined;
  /** Largest torque, N·m, magnitude > 0. */
  readonly torqueMaxNm?: number | null | undefined;
  /** As seen facing the driven end. */
  readonly torqueDirection?: TorqueDirection | null | undefined;
  /** N, tension positive. */
  readonly axialForceN?: number | null | undefined;
  /** N·m. */
  readonly bendingMomentNm?: number | null | undefined;
  /**
   * Degrees around the axis from the fibre the bending moment stretches most to the place looked at: 0 that fibre,
   * 90 the neutral fibre, 180 the one compressed most. Without it a bending moment is left out of the planes.
   */
  readonly bendingAzimuthDeg?: number | null | undefined;
  /** Pressure inside a round tube with closed ends, MPa, ≥ 0. */
  readonly internalPressureMPa?: number | null | undefined;
  readonly gaugeLengthMm?: number | null | undefined;
  /** Twist over the gauge length at fracture, degrees, ≥ 0. */
  readonly twistFractureDeg?: number | null | undefined;
  readonly breakLocation?: BreakLocation | null | undefined;
  readonly torsionHistory?: TorsionHistory | null | undefined;
  /** Name or designation of the material, as the laboratory writes it. */
  readonly material?: string | null | undefined;
}

/** +1 for counter-clockwise torque, −1 for clockwise; an unknown direction is taken as counter-clockwise. */
export const torqueSign = (direction: TorqueDirection | null | undefined): 1 | -1 => (direction === 'cw' ? -1 : 1);

/**
 * Elastic stress at the place looked at, by superposition: τ = T/W, σx = N/A + M cos α/W_b + σ_p, σy = 2 σ_p, where a
 * pressure p in a closed tube adds σ_p = p d²/(D² − d²) along the axis at the outer surface (Lamé) and twice that around.
 * @returns null when the torque or the geometry is not known
 * @throws LabError when a dimension or a load cannot be
 * @see Timoshenko & Goodier, Theory of Elasticity, 3rd ed. 1970, art. 28 for the pressure; test/reference/planes.csv
 */
export function surfaceStressOf(loads: TestLoads): SurfaceStress | null {
  const { geometry, torqueMaxNm } = loads;
  if (!geometry || torqueMaxNm === null || torqueMaxNm === undefined) return null;
  const force = loads.axialForceN ?? 0;
  requireFinite('axialForceN', force, 'N');
  const fromPressureMPa = pressureStressMPa(geometry, loads.internalPressureMPa ?? 0);
  return {
    sigmaXMPa: force / sectionProperties(geometry).areaMm2 + bendingStressMPa(loads, geometry) + fromPressureMPa,
    sigmaYMPa: 2 * fromPressureMPa,
    tauMPa: torqueSign(loads.torqueDirection) * elasticShearStressMPa(geometry, torqueMaxNm),
  };
}

/** Bending stress at the place looked at, MPa; 0 when its azimuth is not known. */
function bendingStressMPa({ bendingMomentNm, bendingAzimuthDeg }: TestLoads, geometry: SectionGeometry): number {
  const moment = bendingMomentNm ?? 0;
  requireFinite('bendingMomentNm', moment, 'N·m');
  if (bendingAzimuthDeg === null || bendingAzimuthDeg === undefined) return 0;
  requireFinite('bendingAzimuthDeg', bendingAzimuthDeg, 'degrees');
  return largestBendingStressMPa(geometry, moment) * Math.cos(degToRad(bendingAzimuthDeg));
}

/** M/W_b, MPa: at the fibre the moment stretches most. */
export const largestBendingStressMPa = (geometry: SectionGeometry, bendingMomentNm: number): number =>
  (bendingMomentNm * 1000) / sectionProperties(geometry).bendingSectionModulusMm3;

/** Axial stress of an internal pressure at the outer surface of a closed round tube, MPa. @throws LabError */
function pressureStressMPa(geometry: SectionGeometry, pressureMPa: number): number {
  if (pressureMPa === 0) return 0;
  const where = { input: 'internalPressureMPa', value: pressureMPa };
  if (!(pressureMPa > 0 && Number.isFinite(pressureMPa))) {
    throw new LabError('out-of-range', `internalPressureMPa must be ≥ 0 MPa, got ${pressureMPa}`, where);
  }
  if (geometry.section !== 'hollow-round') {
    const message = `internalPressureMPa needs a round tube (section hollow-round), got ${pressureMPa} MPa for a ${geometry.section} section`;
    throw new LabError('contradiction', message, where);
  }
  const { diameterMm, boreMm } = geometry;
  return (pressureMPa * boreMm ** 2) / ((diameterMm - boreMm) * (diameterMm + boreMm));
}
