import type { SectionGeometry } from '../records/geometry.ts';
import type { TorqueDirection } from '../records/test.ts';
import { requireFinite } from './requirePositive.ts';
import { sectionProperties } from './sections/registry.ts';
import type { SurfaceStress } from './stressState.ts';
import { elasticShearStressMPa } from './torsion.ts';

/** The loads of a test; every one may be unknown. A stored test fits as it is. */
export interface TestLoads {
  readonly geometry?: SectionGeometry | null;
  /** Largest torque, N·m, magnitude > 0. */
  readonly torqueMaxNm?: number | null;
  /** As seen facing the driven end. */
  readonly torqueDirection?: TorqueDirection | null;
  /** N, tension positive. */
  readonly axialForceN?: number | null;
  /** N·m. */
  readonly bendingMomentNm?: number | null;
}

/** +1 for counter-clockwise torque, −1 for clockwise; an unknown direction is taken as counter-clockwise. */
export const torqueSign = (direction: TorqueDirection | null | undefined): 1 | -1 => (direction === 'cw' ? -1 : 1);

/**
 * Stress at the surface from torque and axial force: τ = T/W (elastic, signed like the torque), σx = N/A.
 * @returns null when the torque or the geometry is not known
 * @throws LabError when a dimension or a load cannot be
 */
export function surfaceStressOf(loads: TestLoads): SurfaceStress | null {
  const { geometry, torqueMaxNm, axialForceN } = loads;
  if (!geometry || torqueMaxNm === null || torqueMaxNm === undefined) return null;
  const force = axialForceN ?? 0;
  requireFinite('axialForceN', force, 'N');
  return {
    sigmaXMPa: force / sectionProperties(geometry).areaMm2,
    sigmaYMPa: 0,
    tauMPa: torqueSign(loads.torqueDirection) * elasticShearStressMPa(geometry, torqueMaxNm),
  };
}
