import { LabError } from '../errors.ts';
import { findRoot } from './integrate.ts';
import { requireNumbers } from './sample.ts';
import type { Interval } from './strength.ts';
import { FEWEST_FOR_PIVOTS, weibullPivots } from './weibullPivots.ts';

/** Two-parameter Weibull distribution fitted to strengths of a brittle material: F(σ) = 1 − exp(−(σ/σ₀)^m). */
export interface WeibullFit {
  /** Specimens that broke. */
  readonly n: number;
  /** Specimens taken off the machine unbroken. */
  readonly suspended: number;
  /** m̂, maximum likelihood; no unit. */
  readonly modulus: number;
  /** σ̂₀, the strength 63.2 % of the specimens do not reach, MPa. */
  readonly characteristicStrengthMPa: number;
  /** m̂ without its bias; null with suspended or fewer than 4 specimens. */
  readonly unbiasedModulus: number | null;
  /** 95 % confidence intervals; null with suspended or fewer than 4 specimens. */
  readonly modulusConfidence: Interval | null;
  readonly characteristicStrengthConfidenceMPa: Interval | null;
  readonly logLikelihood: number;
}

/** A fit that would need a larger modulus than this has strengths that hardly differ at all. */
const LARGEST_MODULUS = 1e4;

/**
 * Maximum-likelihood fit. The modulus solves Σ x^m ln x/Σ x^m − 1/m − mean(ln x of the broken) = 0, sums over broken and
 * suspended; the scale is (Σ x^m/r)^(1/m), r broken.
 * @param brokenMPa strengths, MPa, > 0, at least two that differ
 * @param suspendedMPa largest stresses of specimens that did not break, MPa, > 0
 * @throws LabError `out-of-range`, `missing-value`, `not-a-number`
 * @see ASTM C1239 (one flaw population); NIST/SEMATECH e-Handbook 8.4.1.2
 */
export function fitWeibull(brokenMPa: readonly number[], suspendedMPa: readonly number[] = []): WeibullFit {
  const all = [...brokenMPa, ...suspendedMPa];
  requireNumbers('strengthsMPa', all);
  const wrong = all.find((x) => !(x > 0));
  if (wrong !== undefined) {
    throw new LabError('out-of-range', `strengths must be > 0 MPa for a Weibull fit, got ${wrong}`, {
      input: 'strengthsMPa',
      value: wrong,
    });
  }
  if (brokenMPa.length < 2 || Math.min(...all) === Math.max(...all)) {
    throw new LabError('missing-value', 'a Weibull fit must have two strengths that differ, got fewer', {
      input: 'strengthsMPa',
      value: brokenMPa.length,
    });
  }
  const n = brokenMPa.length;
  const largest = Math.log(Math.max(...all));
  const logs = all.map((x) => Math.log(x) - largest);
  const meanLog = brokenMPa.reduce((sum, x) => sum + Math.log(x) - largest, 0) / n;
  const powers = (m: number) => {
    let sum = 0;
    let weighted = 0;
    for (const log of logs) {
      const power = Math.exp(m * log);
      sum += power;
      weighted += power * log;
    }
    return { sum, weighted };
  };
  const equation = (m: number): number => {
    const { sum, weighted } = powers(m);
    return weighted / sum - 1 / m - meanLog;
  };
  if (equation(LARGEST_MODULUS) < 0) {
    throw new LabError('out-of-range', `strengths must differ by more than rounding for a Weibull fit`, {
      input: 'strengthsMPa',
    });
  }
  const modulus = findRoot(equation, 1e-6, LARGEST_MODULUS);
  const logScale = largest + Math.log(powers(modulus).sum / n) / modulus;
  const characteristicStrengthMPa = Math.exp(logScale);
  const logLikelihood =
    n * Math.log(modulus) -
    n * modulus * logScale +
    (modulus - 1) * brokenMPa.reduce((sum, x) => sum + Math.log(x), 0) -
    all.reduce((sum, x) => sum + Math.exp(modulus * (Math.log(x) - logScale)), 0);
  const fit = { n, suspended: suspendedMPa.length, modulus, characteristicStrengthMPa, logLikelihood };
  if (suspendedMPa.length > 0 || n < FEWEST_FOR_PIVOTS) {
    return { ...fit, unbiasedModulus: null, modulusConfidence: null, characteristicStrengthConfidenceMPa: null };
  }
  const { unbiasingFactor, modulusRatio, scalePivot } = weibullPivots(n);
  return {
    ...fit,
    unbiasedModulus: modulus * unbiasingFactor,
    modulusConfidence: { from: modulus / modulusRatio.high, to: modulus / modulusRatio.low },
    characteristicStrengthConfidenceMPa: {
      from: characteristicStrengthMPa * Math.exp(-scalePivot.high / modulus),
      to: characteristicStrengthMPa * Math.exp(-scalePivot.low / modulus),
    },
  };
}
