import { degToRad, radToDeg, wrapPlaneAngleDeg } from '../angle.ts';
import { LabError } from '../errors.ts';
import { chiSquareQuantile, fisherF1Quantile } from './distributions.ts';
import { requireNumbers } from './sample.ts';
import { vonMisesKappa } from './vonMises.ts';

/** What a sample of plane angles says. Angles are axes (period 180°): they are doubled, averaged, and halved again. */
export interface AxialSummary {
  readonly n: number;
  /** Mean axis, degrees, (−90, 90]; null when the angles cancel each other and there is none. */
  readonly meanAxisDeg: number | null;
  /** R̄ of the doubled angles, 0 (no common axis) to 1 (all the same). */
  readonly resultantLength: number;
  /** Circular standard deviation ½ √(−2 ln R̄), degrees; Infinity for R̄ = 0. */
  readonly circularStandardDeviationDeg: number;
  /** Angular deviation ½ √(2(1 − R̄)), degrees, 0 to 40.5. */
  readonly angularDeviationDeg: number;
  /** κ of the doubled angles. */
  readonly concentration: number;
  /** Half-width of the confidence interval of the mean axis, degrees; null when the sample cannot tell (see `confidenceHalfWidthDeg`). */
  readonly confidenceHalfWidthDeg: number | null;
  /** Confidence level of the interval, e.g. 0.95. */
  readonly confidenceLevel: number;
  /** P of the Rayleigh test: how easily angles without any preferred axis would be as alike as these. */
  readonly uniformityP: number;
}

interface Resultant {
  readonly n: number;
  /** Direction of the doubled angles, radians. */
  readonly direction: number;
  /** R̄, 0 to 1. */
  readonly length: number;
}

/** Below this R̄ the direction is rounding noise. */
const NO_DIRECTION = 1e-12;

/** Resultant of the doubled angles. @throws LabError `missing-value` for none, `not-a-number` */
export function axialResultant(planeAnglesDeg: readonly number[]): Resultant {
  const n = planeAnglesDeg.length;
  if (n === 0) {
    throw new LabError('missing-value', 'plane angles must hold at least one value, got none', {
      input: 'planeAnglesDeg',
    });
  }
  requireNumbers('planeAnglesDeg', planeAnglesDeg);
  let c = 0;
  let s = 0;
  for (const angle of planeAnglesDeg) {
    c += Math.cos(degToRad(2 * angle));
    s += Math.sin(degToRad(2 * angle));
  }
  return { n, direction: Math.atan2(s, c), length: Math.min(1, Math.hypot(c, s) / n) };
}

/**
 * P of the Rayleigh test of uniformity, exp(√(1 + 4n + 4(n² − Rₙ²)) − (1 + 2n)).
 * @see Zar, Biostatistical Analysis (5th ed.) 27.1; good to three decimals for n ≥ 10 (common practice down to 5)
 */
export function rayleighP(n: number, resultantLength: number): number {
  const total = n * resultantLength;
  return Math.min(1, Math.exp(Math.sqrt(1 + 4 * n + 4 * (n ** 2 - total ** 2)) - (1 + 2 * n)));
}

/**
 * Half-width of the confidence interval of the mean axis, degrees.
 * R̄ > 0.9: cos δ = 1 − F (n − Rₙ)/((n − 1) Rₙ), F the upper point of F(1, n − 1); close to Student's t for angles that
 * hardly differ. R̄ ≤ 0.9: cos δ = √(2n(2Rₙ² − nχ²)/(4n − χ²))/Rₙ. Halved, since the angles were doubled.
 * @returns null for n = 1, and where the sample is too scattered for an interval
 * @see Mardia & Jupp, Directional Statistics (2000), 7.2; Upton, Biometrika 73 (1986); Zar (5th ed.) 26.7
 */
export function axialConfidenceHalfWidthDeg(n: number, resultantLength: number, level: number): number | null {
  if (n < 2) return null;
  const total = n * resultantLength;
  if (resultantLength > 0.9) {
    const cosine = 1 - (fisherF1Quantile(1 - level, n - 1) * (n - total)) / ((n - 1) * total);
    return cosine < -1 ? null : radToDeg(Math.acos(cosine)) / 2;
  }
  const chiSquare = chiSquareQuantile(level, 1);
  const square = (2 * n * (2 * total ** 2 - n * chiSquare)) / (4 * n - chiSquare);
  if (!(square >= 0)) return null;
  return radToDeg(Math.acos(Math.min(1, Math.sqrt(square) / total))) / 2;
}

/**
 * Mean axis, dispersion and confidence of a sample of plane angles.
 * @param planeAnglesDeg degrees, any range
 * @throws LabError `missing-value` for no angles, `not-a-number`
 * @see Fisher, Statistical Analysis of Circular Data (1993), 2.3 and 4.4; period halved for axes
 */
export function axialSummary(planeAnglesDeg: readonly number[], confidenceLevel = 0.95): AxialSummary {
  const { n, direction, length } = axialResultant(planeAnglesDeg);
  const known = length > NO_DIRECTION;
  return {
    n,
    meanAxisDeg: known ? wrapPlaneAngleDeg(radToDeg(direction) / 2) : null,
    resultantLength: known ? length : 0,
    circularStandardDeviationDeg: known
      ? radToDeg(Math.sqrt(Math.max(0, -2 * Math.log(length)))) / 2
      : Number.POSITIVE_INFINITY,
    angularDeviationDeg: radToDeg(Math.sqrt(Math.max(0, 2 * (1 - length)))) / 2,
    concentration: vonMisesKappa(length),
    confidenceHalfWidthDeg: known ? axialConfidenceHalfWidthDeg(n, length, confidenceLevel) : null,
    confidenceLevel,
    uniformityP: rayleighP(n, length),
  };
}
