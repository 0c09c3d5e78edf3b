import { LabError } from '../errors.ts';
import { chiSquareTail, normalCdf, normalQuantile } from './distributions.ts';
import { findRoot, integrate } from './integrate.ts';

/**
 * Factors of tolerance intervals of a normal distribution, mean x̄ and standard deviation s from n values: at least the
 * share `content` of all specimens lies inside with the stated confidence.
 */
interface ToleranceQuestion {
  readonly n: number;
  /** Share of the population to be covered, 0 < p < 1. */
  readonly content: number;
  /** 0 < γ < 1. */
  readonly confidence: number;
}

function requireQuestion({ n, content, confidence }: ToleranceQuestion): void {
  const inside = (x: number) => x > 0 && x < 1;
  if (Number.isInteger(n) && n >= 2 && inside(content) && inside(confidence)) return;
  throw new LabError(
    'out-of-range',
    `a tolerance interval must have n ≥ 2 and content and confidence between 0 and 1, got n ${n}, content ${content}, confidence ${confidence}`,
    { input: 'n', value: n },
  );
}

/** φ(z), the standard normal density. */
const density = (z: number): number => Math.exp(-(z * z) / 2) / Math.sqrt(2 * Math.PI);

/** Beyond this many standard deviations there is no mass worth adding (1e-17). */
const TAIL = 8.5;

/**
 * k of the one-sided limit x̄ − k s (or x̄ + k s), by the noncentral t distribution, here as an integral over the mean:
 * P(x̄ − k s ≤ μ − z_p σ) = ∫ φ(z) P(χ²_ν ≥ ν (z/√n + z_p)²/k²) dz over z/√n + z_p > 0, plus Φ(−z_p √n).
 * @see Hahn & Meeker, Statistical Intervals (1991), 4.4; ISO 16269-6
 */
export function oneSidedToleranceFactor(question: ToleranceQuestion): number {
  requireQuestion(question);
  const { n, content, confidence } = question;
  const zp = normalQuantile(content);
  const root = Math.sqrt(n);
  const covered = (k: number): number => {
    const from = Math.max(-TAIL, -zp * root);
    const below = normalCdf(from);
    return (
      below +
      integrate((z) => density(z) * chiSquareTail(((n - 1) * (z / root + zp) ** 2) / k ** 2, n - 1), from, TAIL, 40)
    );
  };
  return findRoot((k) => covered(k) - confidence, 1e-6, upperLimit(covered, confidence));
}

/** r with Φ(c + r) − Φ(c − r) = content. */
function halfWidthHolding(content: number, c: number): number {
  return findRoot((r) => normalCdf(c + r) - normalCdf(c - r) - content, 0, Math.abs(c) + 12);
}

/**
 * k of the two-sided interval x̄ ± k s, exact: γ = 2∫₀ φ(z) P(χ²_ν ≥ ν r²(z)/k²) dz, where Φ(z/√n + r) − Φ(z/√n − r) = p.
 * @see ISO 16269-6:2014, 5.3 and annex; Odeh & Owen (1980)
 */
export function twoSidedToleranceFactor(question: ToleranceQuestion): number {
  requireQuestion(question);
  const { n, content, confidence } = question;
  const root = Math.sqrt(n);
  const widths = new Map<number, number>();
  const widthAt = (z: number): number => {
    const known = widths.get(z);
    if (known !== undefined) return known;
    const width = halfWidthHolding(content, z / root);
    widths.set(z, width);
    return width;
  };
  const covered = (k: number): number =>
    2 * integrate((z) => density(z) * chiSquareTail(((n - 1) * widthAt(z) ** 2) / k ** 2, n - 1), 0, TAIL, 12);
  return findRoot((k) => covered(k) - confidence, 1e-6, upperLimit(covered, confidence));
}

function upperLimit(covered: (k: number) => number, confidence: number): number {
  let high = 10;
  while (covered(high) < confidence && high < 1e7) high *= 4;
  return high;
}
