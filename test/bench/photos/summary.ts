import type { PhotoScore } from './score.ts';

/** Figures of one group of photos; NaN where nothing counts. */
export interface GroupFigures {
  readonly photos: number;
  readonly measuredShare: number;
  readonly medianErrorDeg: number;
  readonly p90ErrorDeg: number;
  readonly rmsErrorDeg: number;
  readonly errorsOver10Deg: number;
  readonly wrongHands: number;
  readonly rightModeShare: number;
  readonly coverage: number;
  readonly medianExpandedUncertaintyDeg: number;
  readonly medianTiltErrorDeg: number;
  readonly segmentsFoundShare: number;
  readonly medianMs: number;
  readonly falseAlarms: number;
  readonly photosWithoutBreak: number;
}

/** Quantile by linear interpolation between order statistics (type 7 of Hyndman & Fan 1996); NaN for none. */
export function quantile(values: readonly number[], probability: number): number {
  const sorted = [...values].sort((a, b) => a - b);
  const place = (sorted.length - 1) * probability;
  const below = sorted[Math.floor(place)];
  const above = sorted[Math.ceil(place)];
  return below === undefined || above === undefined
    ? Number.NaN
    : below + (above - below) * (place - Math.floor(place));
}

const share = (flags: readonly boolean[]): number => flags.filter(Boolean).length / flags.length;
const present = <T>(values: readonly (T | null)[]): T[] => values.filter((value): value is T => value !== null);

/** Figures of the photos that hold a break; those without one count only as false alarms and in the time. */
export function summarize(scores: readonly PhotoScore[]): GroupFigures {
  const breaks = scores.filter((score) => score.kind !== 'none');
  const errors = present(breaks.map((score) => score.errorDeg)).map(Math.abs);
  return {
    photos: breaks.length,
    measuredShare: share(breaks.map((score) => score.outcome === 'measured')),
    medianErrorDeg: quantile(errors, 0.5),
    p90ErrorDeg: quantile(errors, 0.9),
    rmsErrorDeg: Math.sqrt(errors.reduce((sum, e) => sum + e * e, 0) / errors.length),
    errorsOver10Deg: errors.filter((e) => e > 10).length,
    wrongHands: breaks.filter((score) => score.wrongHand).length,
    rightModeShare: share(present(breaks.map((score) => score.rightMode))),
    coverage: share(present(breaks.map((score) => score.covered))),
    medianExpandedUncertaintyDeg: quantile(present(breaks.map((score) => score.expandedUncertaintyDeg)), 0.5),
    medianTiltErrorDeg: quantile(present(breaks.map((score) => score.tiltErrorDeg)).map(Math.abs), 0.5),
    segmentsFoundShare: share(present(breaks.map((score) => score.segmentsFound))),
    medianMs: quantile(
      scores.map((score) => score.elapsedMs),
      0.5,
    ),
    falseAlarms: scores.filter((score) => score.falseAlarm).length,
    photosWithoutBreak: scores.length - breaks.length,
  };
}
