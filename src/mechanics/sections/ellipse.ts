import { requirePositive } from '../requirePositive.ts';
import type { SectionProperties } from './section.ts';

/**
 * Elliptical bar with semi-axes a ≥ b: W = π a b²/2 at the ends of the minor axis, K = π a³ b³/(a² + b²), exact.
 * Fully plastic by the sand-heap analogy, in closed form with complete elliptic integrals.
 * @param geometry the two full axes, mm, > 0, in any order
 * @throws LabError `out-of-range`
 * @see Timoshenko & Goodier, 3rd ed. 1970, art. 105; the heap's volume is derived in `plasticModulusMm3` and checked by
 *   numerical integration in test/mechanics/sections.test.ts
 */
export function ellipseProperties(geometry: {
  readonly majorAxisMm: number;
  readonly minorAxisMm: number;
}): SectionProperties {
  const { majorAxisMm, minorAxisMm } = geometry;
  requirePositive('majorAxisMm', majorAxisMm, 'mm');
  requirePositive('minorAxisMm', minorAxisMm, 'mm');
  const a = Math.max(majorAxisMm, minorAxisMm) / 2;
  const b = Math.min(majorAxisMm, minorAxisMm) / 2;
  const torsionConstantMm4 = (Math.PI * a ** 3 * b ** 3) / (a * a + b * b);
  const torsionSectionModulusMm3 = (Math.PI * a * b * b) / 2;
  return {
    areaMm2: Math.PI * a * b,
    torsionConstantMm4,
    torsionSectionModulusMm3,
    plasticTorsionModulusMm3: plasticModulusMm3(a, b),
    shearStrainLeverMm: torsionConstantMm4 / torsionSectionModulusMm3,
    bendingSectionModulusMm3: (Math.PI * a * b * b) / 4,
    largestShearAt: a === b ? 'all round the surface' : 'at the ends of the minor axis',
  };
}

/**
 * Twice the volume of the heap of slope 1 over the ellipse. From the boundary point (a cos t, b sin t) the inner normal
 * reaches the ridge, which lies on the major axis, after L = b g/a with g = √(a² sin²t + b² cos²t); the curvature is
 * a b/g³, so the strip at t adds (b² g³/(2a²) − b⁴ g/(3a²)) dt. The integrals of g and g³ over t are complete elliptic.
 */
function plasticModulusMm3(a: number, b: number): number {
  const complement = (b / a) ** 2;
  const { first, second } = completeEllipticIntegrals(complement);
  const integralOfG = 4 * a * second;
  const integralOfGCubed = (4 / 3) * a ** 3 * ((2 + 2 * complement) * second - complement * first);
  return 2 * ((complement / 2) * integralOfGCubed - ((b * b * complement) / 3) * integralOfG);
}

/**
 * K(m) and E(m) by the arithmetic-geometric mean, for m₁ = 1 − m in (0, 1]; rounding error only.
 * @see Abramowitz & Stegun, Handbook of Mathematical Functions (1964), 17.6
 */
function completeEllipticIntegrals(complement: number): { first: number; second: number } {
  let a = 1;
  let b = Math.sqrt(complement);
  let sum = (1 - complement) / 2;
  let power = 1;
  for (let step = 0; step < 40 && Math.abs(a - b) > 1e-16 * a; step++) {
    const c = (a - b) / 2;
    [a, b] = [(a + b) / 2, Math.sqrt(a * b)];
    sum += power * c * c;
    power *= 2;
  }
  const first = Math.PI / (2 * a);
  return { first, second: first * (1 - sum) };
}
