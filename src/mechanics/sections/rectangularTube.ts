import { LabError } from '../../errors.ts';
import { requirePositive } from '../requirePositive.ts';
import type { SectionProperties } from './section.ts';

/** Wall thinner than a tenth of the shorter side: the limit of Bredt's formula. Common practice. */
export const LARGEST_WALL_TO_SIDE = 0.1;

/** A closed thin-walled section of uniform wall, by its median line. */
export interface ThinWalledTube {
  /** Area enclosed by the median line of the wall, mm². */
  readonly enclosedAreaMm2: number;
  /** Length of the median line, mm. */
  readonly medianLengthMm: number;
  readonly wallMm: number;
}

/**
 * Bredt: W = 2 A_m t and K = 4 A_m² t/s for a closed thin wall of thickness t and median line s; the shear stress is
 * the same through the wall, so the plastic modulus equals W. Low by t/(2r) or so: 5 % at r/t = 10.
 * @see Timoshenko & Goodier, Theory of Elasticity, 3rd ed. 1970, thin tubes
 */
export function bredt({ enclosedAreaMm2, medianLengthMm, wallMm }: ThinWalledTube) {
  requirePositive('enclosedAreaMm2', enclosedAreaMm2, 'mm²');
  requirePositive('medianLengthMm', medianLengthMm, 'mm');
  requirePositive('wallMm', wallMm, 'mm');
  return {
    torsionSectionModulusMm3: 2 * enclosedAreaMm2 * wallMm,
    torsionConstantMm4: (4 * enclosedAreaMm2 ** 2 * wallMm) / medianLengthMm,
  };
}

/**
 * Rectangular tube of uniform wall, corners taken as sharp: Bredt on the median rectangle.
 * @param geometry outside width and height, mm, in any order; wall, mm, at most a tenth of the shorter side
 * @throws LabError `out-of-range`; `contradiction` when the wall is too thick for the formula
 */
export function rectangularTubeProperties(geometry: {
  readonly widthMm: number;
  readonly heightMm: number;
  readonly wallMm: number;
}): SectionProperties {
  const { widthMm, heightMm, wallMm: t } = geometry;
  requirePositive('widthMm', widthMm, 'mm');
  requirePositive('heightMm', heightMm, 'mm');
  requirePositive('wallMm', t, 'mm');
  const a = Math.max(widthMm, heightMm);
  const b = Math.min(widthMm, heightMm);
  if (!(t <= LARGEST_WALL_TO_SIDE * b * (1 + 1e-12))) {
    const message =
      `wallMm must be at most a tenth of the shorter side (${LARGEST_WALL_TO_SIDE * b} mm), got ${t} mm: ` +
      'the thin-wall formula does not hold for a thicker wall';
    throw new LabError('contradiction', message, { input: 'wallMm', value: t });
  }
  const { torsionSectionModulusMm3, torsionConstantMm4 } = bredt({
    enclosedAreaMm2: (a - t) * (b - t),
    medianLengthMm: 2 * (a + b - 2 * t),
    wallMm: t,
  });
  return {
    areaMm2: a * b - (a - 2 * t) * (b - 2 * t),
    torsionConstantMm4,
    torsionSectionModulusMm3,
    plasticTorsionModulusMm3: torsionSectionModulusMm3,
    shearStrainLeverMm: torsionConstantMm4 / torsionSectionModulusMm3,
    bendingSectionModulusMm3: (a * b ** 3 - (a - 2 * t) * (b - 2 * t) ** 3) / (6 * b),
    largestShearAt: 'all round the wall, away from the corners',
  };
}
