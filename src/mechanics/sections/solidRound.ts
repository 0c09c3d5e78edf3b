import { requirePositive } from '../requirePositive.ts';
import type { SectionProperties } from './section.ts';

/**
 * Solid round bar, wire or dowel of diameter d (mm, > 0): J = π d⁴/32, W = π d³/16, fully plastic
 * W_p = π d³/12 = ⁴⁄₃ W.
 * @throws LabError `out-of-range`
 * @see direct integration of r² and r over the disc; Nadai, Theory of Flow and Fracture of Solids (1950)
 *   for W_p. Checked in test/reference/sections.csv.
 */
export function solidRoundProperties({ diameterMm }: { readonly diameterMm: number }): SectionProperties {
  requirePositive('diameterMm', diameterMm, 'mm');
  const d = diameterMm;
  return {
    areaMm2: (Math.PI * d ** 2) / 4,
    torsionConstantMm4: (Math.PI * d ** 4) / 32,
    torsionSectionModulusMm3: (Math.PI * d ** 3) / 16,
    plasticTorsionModulusMm3: (Math.PI * d ** 3) / 12,
    shearStrainLeverMm: d / 2,
    bendingSectionModulusMm3: (Math.PI * d ** 3) / 32,
    largestShearAt: 'all round the surface',
  };
}
