import { requirePositive } from '../requirePositive.ts';
import type { SectionProperties } from './section.ts';

/** ζ(5) (1 − 2⁻⁵) = Σ 1/n⁵ over odd n, to double precision. */
const SUM_ODD_FIFTH_POWERS = 1.0045237627951382;

/** Coefficients of a rectangle in torsion; τ at the middle of the long side is T/(α a b²), φ = T L/(G β a b³). */
export interface RectangleCoefficients {
  readonly alpha: number;
  readonly beta: number;
  /** Shear stress at the middle of the short side, as a share of the largest one. */
  readonly shortSideShare: number;
}

/**
 * Saint-Venant's series for a rectangle whose long side is `sideRatio` = a/b times the short one, a/b ≥ 1:
 * β = ⅓ [1 − (192/(π⁵ q)) Σ tanh(nπq/2)/n⁵], k = 1 − (8/π²) Σ 1/(n² cosh(nπq/2)), α = β/k, n odd.
 * tanh is taken as 1 − 2/(e^(nπq) + 1), so that both series end after a few terms at every ratio; rounding error only.
 * @see Timoshenko & Goodier, Theory of Elasticity, 3rd ed. 1970, art. 109; checked in test/reference/sections.csv
 */
export function rectangleCoefficients(sideRatio: number): RectangleCoefficients {
  const q = sideRatio;
  let tail = 0;
  let coshSum = 0;
  let shortSum = 0;
  for (let n = 1; n < 60; n += 2) {
    const decay = Math.exp((-n * Math.PI * q) / 2);
    const squared = decay * decay;
    tail += (2 * squared) / ((1 + squared) * n ** 5);
    coshSum += (2 * decay) / ((1 + squared) * n ** 2);
    // Σ (−1)^((n−1)/2)/n² = Catalan's constant; only what tanh takes off is summed here.
    shortSum += ((n % 4 === 1 ? 1 : -1) * 2 * squared) / ((1 + squared) * n ** 2);
    if (decay < 1e-18) break;
  }
  const beta = (1 - (192 / (Math.PI ** 5 * q)) * (SUM_ODD_FIFTH_POWERS - tail)) / 3;
  const largest = 1 - (8 / Math.PI ** 2) * coshSum;
  const shortSide = (8 / Math.PI ** 2) * (CATALAN - shortSum);
  return { alpha: beta / largest, beta, shortSideShare: shortSide / largest };
}
const CATALAN = 0.915965594177219;

/**
 * Rectangular bar, Saint-Venant torsion (warping free): W = α a b², K = β a b³ with a the longer and b the shorter side.
 * Fully plastic by the sand-heap analogy: W_p = b² (3a − b)/6. The corners carry no shear stress.
 * @param geometry the two sides, mm, > 0, in any order
 * @throws LabError `out-of-range`
 * @see Timoshenko & Goodier, 3rd ed. 1970, art. 109; Nadai, Theory of Flow and Fracture of Solids (1950), sand heap
 */
export function rectangleProperties(geometry: {
  readonly widthMm: number;
  readonly heightMm: number;
}): SectionProperties {
  const { widthMm, heightMm } = geometry;
  requirePositive('widthMm', widthMm, 'mm');
  requirePositive('heightMm', heightMm, 'mm');
  const a = Math.max(widthMm, heightMm);
  const b = Math.min(widthMm, heightMm);
  const { alpha, beta } = rectangleCoefficients(a / b);
  return {
    areaMm2: a * b,
    torsionConstantMm4: beta * a * b ** 3,
    torsionSectionModulusMm3: alpha * a * b ** 2,
    plasticTorsionModulusMm3: (b ** 2 * (3 * a - b)) / 6,
    shearStrainLeverMm: (beta / alpha) * b,
    bendingSectionModulusMm3: (a * b ** 2) / 6,
    largestShearAt: a === b ? 'at the middle of each side' : 'at the middle of the two longer sides',
  };
}

/** Square bar of side s: the rectangle with equal sides. @throws LabError `out-of-range` */
export function squareProperties({ sideMm }: { readonly sideMm: number }): SectionProperties {
  requirePositive('sideMm', sideMm, 'mm');
  return rectangleProperties({ widthMm: sideMm, heightMm: sideMm });
}
