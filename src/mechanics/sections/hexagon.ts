import { requirePositive } from '../requirePositive.ts';
import type { SectionProperties } from './section.ts';

/**
 * K/D⁴ and W/D³ of a regular hexagon, D across flats: Saint-Venant's problem solved through the conformal map of the
 * disc onto the hexagon, 262 144 terms, extrapolated; the last digit given is uncertain by one.
 * Timoshenko, Strength of Materials, part II, prints 0.133 A D² and 0.217 A D, which is 0.1152 and 0.1879.
 */
const TORSION_CONSTANT = 0.115050994;
const TORSION_MODULUS = 0.187673368;

/**
 * Regular hexagonal bar, D across flats: K = 0.115051 D⁴, W = 0.187673 D³ at the middle of each flat. Fully plastic by
 * the sand-heap analogy: W_p = D³/(2√3). The corners carry no shear stress.
 * @throws LabError `out-of-range`
 */
export function hexagonProperties({ acrossFlatsMm: d }: { readonly acrossFlatsMm: number }): SectionProperties {
  requirePositive('acrossFlatsMm', d, 'mm');
  return {
    areaMm2: (Math.sqrt(3) / 2) * d ** 2,
    torsionConstantMm4: TORSION_CONSTANT * d ** 4,
    torsionSectionModulusMm3: TORSION_MODULUS * d ** 3,
    plasticTorsionModulusMm3: d ** 3 / (2 * Math.sqrt(3)),
    shearStrainLeverMm: (TORSION_CONSTANT / TORSION_MODULUS) * d,
    bendingSectionModulusMm3: ((5 * Math.sqrt(3)) / 72) * d ** 3,
    largestShearAt: 'at the middle of each flat',
  };
}
