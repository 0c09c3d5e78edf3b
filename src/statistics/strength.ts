import { chiSquareQuantile, studentTQuantile } from './distributions.ts';
import { sampleMoments } from './sample.ts';
import { oneSidedToleranceFactor, twoSidedToleranceFactor } from './tolerance.ts';

export interface Interval {
  readonly from: number;
  readonly to: number;
}

/** What a sample of strengths says, MPa, taken as a sample of a normal distribution. */
export interface StrengthSummary {
  readonly n: number;
  readonly meanMPa: number;
  /** Null for one value, as everything below. */
  readonly standardDeviationMPa: number | null;
  /** Standard deviation over mean; no unit. */
  readonly coefficientOfVariation: number | null;
  /** Confidence intervals of mean and standard deviation. */
  readonly meanConfidenceMPa: Interval | null;
  readonly standardDeviationConfidenceMPa: Interval | null;
  /** At least `content` of all specimens lies above, with the stated confidence. */
  readonly lowerToleranceLimitMPa: number | null;
  /** At least `content` of all specimens lies inside, with the stated confidence. */
  readonly toleranceIntervalMPa: Interval | null;
  readonly confidenceLevel: number;
  readonly content: number;
}

/**
 * Mean, standard deviation, confidence and tolerance intervals of strengths.
 * @param strengthsMPa MPa, at least one
 * @throws LabError `missing-value`, `not-a-number`
 * @see ISO 2602 (mean), ISO 2854 (standard deviation), ISO 16269-6 (tolerance intervals)
 */
export function strengthSummary(
  strengthsMPa: readonly number[],
  { confidenceLevel = 0.95, content = 0.95 }: { readonly confidenceLevel?: number; readonly content?: number } = {},
): StrengthSummary {
  const { n, mean, standardDeviation: s } = sampleMoments(strengthsMPa, 'strengthsMPa');
  const asked = { n, meanMPa: mean, standardDeviationMPa: s, confidenceLevel, content };
  if (s === null) {
    return {
      ...asked,
      coefficientOfVariation: null,
      meanConfidenceMPa: null,
      standardDeviationConfidenceMPa: null,
      lowerToleranceLimitMPa: null,
      toleranceIntervalMPa: null,
    };
  }
  const tail = (1 - confidenceLevel) / 2;
  const halfWidth = (studentTQuantile(1 - tail, n - 1) * s) / Math.sqrt(n);
  const spread = (p: number): number => s * Math.sqrt((n - 1) / chiSquareQuantile(p, n - 1));
  const question = { n, content, confidence: confidenceLevel };
  const two = twoSidedToleranceFactor(question) * s;
  return {
    ...asked,
    coefficientOfVariation: mean === 0 ? null : s / mean,
    meanConfidenceMPa: { from: mean - halfWidth, to: mean + halfWidth },
    standardDeviationConfidenceMPa: { from: spread(1 - tail), to: spread(tail) },
    lowerToleranceLimitMPa: mean - oneSidedToleranceFactor(question) * s,
    toleranceIntervalMPa: { from: mean - two, to: mean + two },
  };
}
