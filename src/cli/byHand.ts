import { LabError } from '../errors.ts';
import type { MeasureOptions } from '../photo/measurement.ts';
import type { PointPx } from '../records/reading.ts';

/** The texts typed after the options of a measurement by hand. */
export interface ByHandTexts {
  readonly axis?: string;
  readonly diameterPx?: string;
  readonly trace?: string;
}

function numbersIn(text: string, option: string): number[] {
  return text
    .trim()
    .split(/[\s,;]+/)
    .map((piece) => {
      const value = Number(piece);
      if (piece === '' || !Number.isFinite(value)) {
        throw new LabError('not-a-number', `${option} must be pixel numbers such as 812,545, got "${piece}"`, {
          input: option,
          value: text,
        });
      }
      return value;
    });
}

function pointsIn(text: string, option: string): PointPx[] {
  const numbers = numbersIn(text, option);
  if (numbers.length % 2 !== 0) {
    throw new LabError('usage', `${option} must be pairs x,y, got ${numbers.length} numbers`, {
      input: option,
      value: text,
    });
  }
  const points: PointPx[] = [];
  for (let i = 0; i + 1 < numbers.length; i += 2) points.push([numbers[i] ?? 0, numbers[i + 1] ?? 0]);
  return points;
}

/**
 * `--axis x,y,x,y --diameter-px N --trace "x,y x,y …"` → the by-hand part of the measurement, or null when none is given.
 * @throws LabError `usage`, `not-a-number`, `out-of-range`
 */
export function byHandOptions(texts: ByHandTexts): MeasureOptions['byHand'] | null {
  const given = [texts.axis, texts.diameterPx, texts.trace].filter((text) => text !== undefined).length;
  if (given === 0) return null;
  if (texts.axis === undefined || texts.diameterPx === undefined || texts.trace === undefined) {
    throw new LabError('usage', `--axis, --diameter-px and --trace must be given together, got ${given} of the 3`, {
      input: 'axis',
    });
  }
  const [from, to, ...tooMany] = pointsIn(texts.axis, '--axis');
  if (!from || !to || tooMany.length > 0 || Math.hypot(to[0] - from[0], to[1] - from[1]) === 0) {
    throw new LabError('usage', `--axis must be two different points x,y,x,y, got "${texts.axis}"`, {
      input: '--axis',
      value: texts.axis,
    });
  }
  const tracePx = pointsIn(texts.trace, '--trace');
  if (tracePx.length < 2) {
    throw new LabError('usage', `--trace must have at least 2 points, got ${tracePx.length}`, {
      input: '--trace',
      value: texts.trace,
    });
  }
  const [diameterPx = Number.NaN, ...more] = numbersIn(texts.diameterPx, '--diameter-px');
  if (!(diameterPx > 0) || more.length > 0) {
    throw new LabError('out-of-range', `--diameter-px must be one number > 0 px, got "${texts.diameterPx}"`, {
      input: '--diameter-px',
      value: texts.diameterPx,
    });
  }
  return { axisPx: [from, to], diameterPx, tracePx };
}
