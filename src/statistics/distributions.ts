import betainc from '@stdlib/math-base-special-betainc';
import gammainc from '@stdlib/math-base-special-gammainc';
import gammaincinv from '@stdlib/math-base-special-gammaincinv';
import normal from '@stdlib/stats-base-dists-normal';
import studentT from '@stdlib/stats-base-dists-t';

/** Distribution functions the statistics need, by their everyday names. All are pure; probabilities are 0 to 1. */

/** Φ(z). */
export const normalCdf = (z: number): number => normal.cdf(z, 0, 1);

/** z with Φ(z) = p, 0 < p < 1. */
export const normalQuantile = (p: number): number => normal.quantile(p, 0, 1);

/** t with P(T ≤ t) = p for Student's t. @param degrees > 0 */
export const studentTQuantile = (p: number, degrees: number): number => studentT.quantile(p, degrees);

/** P(|T| ≥ |t|) for Student's t. @param degrees > 0 */
export const studentTTwoSided = (t: number, degrees: number): number => 2 * studentT.cdf(-Math.abs(t), degrees);

/** P(F ≥ f) for Fisher's F with d1 and d2 degrees of freedom. */
export function fisherFTail(f: number, d1: number, d2: number): number {
  if (!(f > 0)) return 1;
  return betainc(d2 / (d2 + d1 * f), d2 / 2, d1 / 2);
}

/** f with P(F ≥ f) = p for one numerator degree of freedom: the square of Student's t. */
export const fisherF1Quantile = (upperTail: number, d2: number): number => studentTQuantile(1 - upperTail / 2, d2) ** 2;

/** P(χ² ≥ x). @param degrees > 0 */
export const chiSquareTail = (x: number, degrees: number): number =>
  x > 0 ? gammainc(x / 2, degrees / 2, true, true) : 1;

/** x with P(χ² ≤ x) = p, 0 ≤ p < 1. */
export const chiSquareQuantile = (p: number, degrees: number): number => 2 * gammaincinv(p, degrees / 2);
