import { requirePositive } from '../requirePositive.ts';
import type { SectionProperties } from './section.ts';

/**
 * Bar with the section of an equilateral triangle of side s: K = √3 s⁴/80, W = s³/20 at the middle of each side, exact.
 * Fully plastic by the sand-heap analogy: W_p = s³/12. The corners carry no shear stress.
 * @throws LabError `out-of-range`
 * @see Timoshenko & Goodier, Theory of Elasticity, 3rd ed. 1970, art. 104 to 107
 */
export function equilateralTriangleProperties({ sideMm: s }: { readonly sideMm: number }): SectionProperties {
  requirePositive('sideMm', s, 'mm');
  return {
    areaMm2: (Math.sqrt(3) / 4) * s ** 2,
    torsionConstantMm4: (Math.sqrt(3) / 80) * s ** 4,
    torsionSectionModulusMm3: s ** 3 / 20,
    plasticTorsionModulusMm3: s ** 3 / 12,
    shearStrainLeverMm: (Math.sqrt(3) / 4) * s,
    bendingSectionModulusMm3: s ** 3 / 16,
    largestShearAt: 'at the middle of each side',
  };
}
