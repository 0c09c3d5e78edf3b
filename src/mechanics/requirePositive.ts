import { LabError } from '../errors.ts';

/** Guards a formula: NaN, 0 and negative values are refused with the input's name. @throws LabError `out-of-range` */
export function requirePositive(input: string, value: number, unit: string): void {
  if (value > 0 && value < Number.POSITIVE_INFINITY) return;
  throw new LabError('out-of-range', `${input} must be > 0 ${unit}, got ${value}`, { input, value });
}

/** Guards a signed quantity against NaN and infinity. @throws LabError `not-a-number` */
export function requireFinite(input: string, value: number, unit: string): void {
  if (Number.isFinite(value)) return;
  throw new LabError('not-a-number', `${input} must be a finite number of ${unit}, got ${value}`, { input, value });
}
