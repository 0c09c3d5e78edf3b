/**
 * A(κ) = I₁(κ)/I₀(κ), the mean resultant length of a von Mises distribution of concentration κ ≥ 0; by the continued
 * fraction of the ratio of Bessel functions, κ/(2 + κ²/(4 + κ²/(6 + …))), run backwards.
 * @returns 0 to 1, relative error below 1e-12
 * @see Abramowitz & Stegun 9.1.73, with imaginary argument
 */
export function besselRatio(kappa: number): number {
  if (!(kappa > 0)) return 0;
  const terms = Math.ceil(30 + 1.5 * kappa);
  if (kappa > 5000) return 1 - 1 / (2 * kappa) - 1 / (8 * kappa ** 2) - 1 / (8 * kappa ** 3);
  let fraction = 2 * terms;
  for (let k = terms - 1; k >= 1; k--) fraction = 2 * k + kappa ** 2 / fraction;
  return kappa / fraction;
}

/**
 * κ with A(κ) = R̄: maximum-likelihood concentration of doubled axial angles.
 * @param resultantLength R̄, 0 ≤ R̄ < 1
 * @returns κ ≥ 0; Infinity for R̄ = 1
 * @see Mardia & Jupp, Directional Statistics (2000), 5.3.1; Newton's method from Best & Fisher's start
 */
export function vonMisesKappa(resultantLength: number): number {
  const r = resultantLength;
  if (!(r > 0)) return 0;
  if (r >= 1) return Number.POSITIVE_INFINITY;
  let kappa = startOfKappa(r);
  for (let i = 0; i < 50; i++) {
    const a = besselRatio(kappa);
    const slope = 1 - a * a - a / kappa;
    if (!(slope > 1e-15)) break;
    const next = Math.max(kappa / 10, kappa - (a - r) / slope);
    if (Math.abs(next - kappa) < 1e-12 * kappa) return next;
    kappa = next;
  }
  return kappa;
}

function startOfKappa(r: number): number {
  if (r < 0.53) return 2 * r + r ** 3 + (5 * r ** 5) / 6;
  if (r < 0.85) return -0.4 + 1.39 * r + 0.43 / (1 - r);
  return 1 / (2 * (1 - r));
}
