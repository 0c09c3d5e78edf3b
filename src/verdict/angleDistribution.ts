import normal from '@stdlib/stats-base-dists-normal';

/** Above this standard uncertainty an axial angle is uniform for every practical purpose (error < 1e-8). */
const UNIFORM_FROM_DEG = 180;
/** Wraps further out than this many standard uncertainties carry no mass worth adding (< 1e-16). */
const TAIL = 8.5;

function cumulative(distanceDeg: number, standardUncertaintyDeg: number): number {
  if (standardUncertaintyDeg > 0) return normal.cdf(distanceDeg, 0, standardUncertaintyDeg);
  return distanceDeg > 0 ? 1 : distanceDeg === 0 ? 0.5 : 0;
}

/**
 * Probability that a plane angle lies between two limits when it is known as a normal distribution
 * wrapped axially (period 180°): Σₖ Φ((to + 180k − mean)/u) − Φ((from + 180k − mean)/u).
 * With u = 0 all mass sits at the mean, half of it on each side when the mean is exactly a limit.
 * @param fromDeg lower limit, degrees   @param toDeg upper limit, fromDeg ≤ toDeg ≤ fromDeg + 180
 * @param standardUncertaintyDeg u, degrees, ≥ 0
 * @returns 0 to 1
 * @see Mardia & Jupp, Directional Statistics (2000), wrapped normal; period halved for axes
 */
export function wrappedNormalMass(
  fromDeg: number,
  toDeg: number,
  meanDeg: number,
  standardUncertaintyDeg: number,
): number {
  if (standardUncertaintyDeg >= UNIFORM_FROM_DEG) return (toDeg - fromDeg) / 180;
  const reach = TAIL * standardUncertaintyDeg;
  const first = Math.ceil((meanDeg - reach - toDeg) / 180);
  const last = Math.floor((meanDeg + reach - fromDeg) / 180);
  let mass = 0;
  for (let turn = first; turn <= last; turn++) {
    const shift = 180 * turn - meanDeg;
    mass += cumulative(toDeg + shift, standardUncertaintyDeg) - cumulative(fromDeg + shift, standardUncertaintyDeg);
  }
  return Math.min(1, Math.max(0, mass));
}
