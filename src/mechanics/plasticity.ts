import { radToDeg } from '../angle.ts';
import type { SectionGeometry } from '../records/geometry.ts';
import { requireFinite, requirePositive } from './requirePositive.ts';
import { sectionProperties } from './sections/registry.ts';

const NMM_PER_NM = 1000;

export interface ElasticPlasticState {
  readonly regime: 'elastic' | 'elastic-plastic' | 'fully-plastic';
  /** Torque at first yield, T_y = τ_y W, N·m. */
  readonly yieldTorqueNm: number;
  /** Torque with the whole section yielded, T_p = τ_y W_p, N·m. */
  readonly fullyPlasticTorqueNm: number;
  /** T / T_y. */
  readonly torqueToYield: number;
  /** Radius inside which the bar is still elastic, mm; null for sections that are not round. */
  readonly elasticCoreRadiusMm: number | null;
  /** Stress at the surface under load for a material that does not harden, MPa: τ_y once it has yielded. */
  readonly surfaceShearStressMPa: number;
  /** Stress left at the surface after unloading, MPa, opposite to the load where negative; null when not round. */
  readonly residualSurfaceShearStressMPa: number | null;
}

/**
 * Elastic–perfectly plastic bar under a torque. Round bars: elastic core ρ from
 * T = ⅔π τ_y (c³ − ρ³) + ½π τ_y (ρ⁴ − b⁴)/ρ, outer radius c, bore radius b (b = 0: T = ⁴⁄₃ T_y (1 − ¼ ρ³/c³)).
 * A torque above T_p means hardening: the state is then fully plastic and τ_y a lower bound of the stress.
 * @param torqueNm magnitude, N·m, ≥ 0   @param shearYieldStrengthMPa τ_y, MPa, > 0
 * @see Beer & Johnston, Mechanics of Materials, plastic torsion; checked in test/reference/plasticity.csv
 */
export function elasticPlasticState(
  geometry: SectionGeometry,
  torqueNm: number,
  shearYieldStrengthMPa: number,
): ElasticPlasticState {
  requireFinite('torqueNm', torqueNm, 'N·m');
  requirePositive('shearYieldStrengthMPa', shearYieldStrengthMPa, 'MPa');
  const section = sectionProperties(geometry);
  const torqueNmm = Math.abs(torqueNm) * NMM_PER_NM;
  const nominalMPa = torqueNmm / section.torsionSectionModulusMm3;
  const yieldTorqueNm = (shearYieldStrengthMPa * section.torsionSectionModulusMm3) / NMM_PER_NM;
  const fullyPlasticTorqueNm = (shearYieldStrengthMPa * section.plasticTorsionModulusMm3) / NMM_PER_NM;
  const regime =
    nominalMPa <= shearYieldStrengthMPa
      ? 'elastic'
      : Math.abs(torqueNm) < fullyPlasticTorqueNm
        ? 'elastic-plastic'
        : 'fully-plastic';
  const surfaceShearStressMPa = Math.min(nominalMPa, shearYieldStrengthMPa);
  const radii = roundRadii(geometry);
  return {
    regime,
    yieldTorqueNm,
    fullyPlasticTorqueNm,
    torqueToYield: Math.abs(torqueNm) / yieldTorqueNm,
    elasticCoreRadiusMm: radii ? elasticCoreRadius(radii, torqueNmm, shearYieldStrengthMPa, regime) : null,
    surfaceShearStressMPa,
    residualSurfaceShearStressMPa: radii ? surfaceShearStressMPa - nominalMPa : null,
  };
}

/**
 * Twist of an elastic–perfectly plastic round bar, degrees: φ = τ_y L/(G ρ) with the elastic core ρ, or T L/(G J)
 * below yield. @returns null when the section is not round, or fully plastic (the twist is then undetermined)
 */
export function elasticPlasticTwistDeg(
  geometry: SectionGeometry,
  torqueNm: number,
  shearYieldStrengthMPa: number,
  gaugeLengthMm: number,
  shearModulusMPa: number,
): number | null {
  requirePositive('gaugeLengthMm', gaugeLengthMm, 'mm');
  requirePositive('shearModulusMPa', shearModulusMPa, 'MPa');
  const state = elasticPlasticState(geometry, torqueNm, shearYieldStrengthMPa);
  if (state.elasticCoreRadiusMm === null || state.regime === 'fully-plastic') return null;
  const radians = (state.surfaceShearStressMPa * gaugeLengthMm) / (shearModulusMPa * state.elasticCoreRadiusMm);
  return Math.sign(torqueNm) * radToDeg(radians);
}

/** Twist left after unloading from `torqueNm`, degrees: the elastic part T L/(G J) springs back. */
export function permanentTwistDeg(
  geometry: SectionGeometry,
  torqueNm: number,
  shearYieldStrengthMPa: number,
  gaugeLengthMm: number,
  shearModulusMPa: number,
): number | null {
  const loaded = elasticPlasticTwistDeg(geometry, torqueNm, shearYieldStrengthMPa, gaugeLengthMm, shearModulusMPa);
  if (loaded === null) return null;
  const stiffness = shearModulusMPa * sectionProperties(geometry).torsionConstantMm4;
  return loaded - radToDeg((torqueNm * NMM_PER_NM * gaugeLengthMm) / stiffness);
}

interface RoundRadii {
  readonly outerMm: number;
  readonly boreMm: number;
}

function roundRadii(geometry: SectionGeometry): RoundRadii | null {
  if (!('diameterMm' in geometry)) return null;
  return { outerMm: geometry.diameterMm / 2, boreMm: 'boreMm' in geometry ? geometry.boreMm / 2 : 0 };
}

function elasticCoreRadius(
  { outerMm, boreMm }: RoundRadii,
  torqueNmm: number,
  shearYieldStrengthMPa: number,
  regime: ElasticPlasticState['regime'],
): number {
  if (regime === 'elastic') return outerMm;
  if (regime === 'fully-plastic') return boreMm;
  const torqueAt = (core: number) =>
    shearYieldStrengthMPa *
    (((2 * Math.PI) / 3) * (outerMm ** 3 - core ** 3) + (Math.PI / 2) * (core ** 3 - boreMm ** 4 / core));
  // The torque falls steadily from T_p at the bore to T_y at the surface: bisection cannot miss.
  let low = boreMm;
  let high = outerMm;
  for (let step = 0; step < 200 && high - low > Number.EPSILON * outerMm; step++) {
    const middle = (low + high) / 2;
    if (torqueAt(middle) > torqueNmm) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
