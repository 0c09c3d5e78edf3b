import type { PhotoScore } from './score.ts';
import { summarize } from './summary.ts';
import { alignedText } from './table.ts';

/** Goals of the measurement, each with the figure reached on this set; "-" where the set holds no such photo. */
export function acceptanceLines(scores: readonly PhotoScore[]): string {
  const pair = summarize(scores.filter((score) => score.view === 'pair'));
  const half = summarize(scores.filter((score) => score.view === 'half'));
  const all = summarize(scores);
  const pairErrors = scores.filter((s) => s.view === 'pair' && s.errorDeg !== null).length;
  const goals: readonly (readonly [string, number, (value: number) => boolean, string])[] = [
    ['pair: share measured', pair.measuredShare, (v) => v >= 0.95, '>= 0.95'],
    ['pair: median error, deg', pair.medianErrorDeg, (v) => v <= 0.5, '<= 0.5'],
    ['pair: 90th percentile, deg', pair.p90ErrorDeg, (v) => v <= 2, '<= 2'],
    ['pair: share of errors over 10 deg', pair.errorsOver10Deg / pairErrors, (v) => v <= 0.02, '<= 0.02'],
    ['half: share measured', half.measuredShare, (v) => v >= 0.85, '>= 0.85'],
    ['half: median error, deg', half.medianErrorDeg, (v) => v <= 1.2, '<= 1.2'],
    ['half: 90th percentile, deg', half.p90ErrorDeg, (v) => v <= 4, '<= 4'],
    ['wrong hands', all.wrongHands, (v) => v === 0, '0'],
    ['share of right modes', all.rightModeShare, (v) => v >= 0.97, '>= 0.97'],
    ['coverage of U', all.coverage, (v) => v >= 0.9 && v <= 0.99, '0.90 to 0.99'],
    ['flat breaks: median tilt error, deg', all.medianTiltErrorDeg, (v) => v <= 3, '<= 3'],
    ['mixed: both segments within 6 deg', all.segmentsFoundShare, (v) => v === 1, '1'],
    ['false alarms', all.photosWithoutBreak === 0 ? Number.NaN : all.falseAlarms, (v) => v === 0, '0'],
  ];
  return alignedText([
    ['goal', 'reached', 'wanted', ''],
    ...goals.map(([title, value, met, wanted]) =>
      Number.isNaN(value) ? [title, '-', wanted, ''] : [title, value.toFixed(3), wanted, met(value) ? 'met' : 'MISSED'],
    ),
  ]);
}
