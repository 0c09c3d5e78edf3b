import { LabError } from '../../errors.ts';
import { requirePositive } from '../requirePositive.ts';
import type { SectionProperties } from './section.ts';

/**
 * Tube, round with a concentric round bore: J = π (D⁴ − d⁴)/32, W = J/(D/2), W_p = π (D³ − d³)/12.
 * The differences of powers are taken as products with D − d, so that a thin wall loses no digits.
 * @param geometry outside diameter D and bore d, mm, 0 < d < D
 * @throws LabError `out-of-range`, or `contradiction` when the bore is not smaller than the diameter
 * @see direct integration over the ring; checked in test/reference/sections.csv
 */
export function hollowRoundProperties(geometry: {
  readonly diameterMm: number;
  readonly boreMm: number;
}): SectionProperties {
  const { diameterMm: outer, boreMm: bore } = geometry;
  requirePositive('diameterMm', outer, 'mm');
  requirePositive('boreMm', bore, 'mm');
  if (!(bore < outer)) {
    throw new LabError('contradiction', `boreMm must be smaller than diameterMm (${outer} mm), got ${bore} mm`, {
      input: 'boreMm',
      value: bore,
    });
  }
  const squares = (outer - bore) * (outer + bore);
  const cubes = (outer - bore) * (outer * outer + outer * bore + bore * bore);
  const torsionConstantMm4 = (Math.PI / 32) * squares * (outer * outer + bore * bore);
  return {
    areaMm2: (Math.PI / 4) * squares,
    torsionConstantMm4,
    torsionSectionModulusMm3: torsionConstantMm4 / (outer / 2),
    plasticTorsionModulusMm3: (Math.PI / 12) * cubes,
    shearStrainLeverMm: outer / 2,
    bendingSectionModulusMm3: torsionConstantMm4 / outer,
    largestShearAt: 'all round the outer surface',
  };
}
