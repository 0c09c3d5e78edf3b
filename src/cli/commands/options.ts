import { Option } from 'commander';
import { LabError } from '../../errors.ts';
import { type Direction, directionOfWord } from '../../log/torqueDirection.ts';
import { LARGEST_DIMENSION_MM, SectionGeometry } from '../../records/geometry.ts';
import { parseQuantity, type Quantity } from '../../units.ts';
import type { CliPorts } from '../ports.ts';

/** `--data DIR`: the laboratory's data folder; `BREAKPLANE_DATA` or `.data` when it is not given. */
export function dataDirOption(ports: CliPorts): Option {
  return new Option('--data <dir>', 'data folder of the laboratory (also BREAKPLANE_DATA)').default(
    ports.env.BREAKPLANE_DATA || '.data',
  );
}

/** Reads a plain number typed after an option. @throws LabError `not-a-number` naming the option */
export function numberOf(option: string, text: string): number {
  const value = Number(text.trim().replace(',', '.'));
  if (text.trim() === '' || !Number.isFinite(value)) {
    throw new LabError('not-a-number', `${option} must be a number, got "${text}"`, { input: option, value: text });
  }
  return value;
}

/** Reads a whole number typed after an option. @throws LabError `out-of-range` */
export function wholeNumber(option: string, text: string, from: number, to: number): number {
  const value = numberOf(option, text);
  if (!Number.isInteger(value) || value < from || value > to) {
    throw new LabError('out-of-range', `${option} must be a whole number from ${from} to ${to}, got "${text}"`, {
      input: option,
      value: text,
    });
  }
  return value;
}

/**
 * Reads a quantity with its unit (`12.7mm`, `85N.m`); a bare number is an angle in degrees, and refused for everything else.
 * @throws LabError `not-a-number`, `unknown-unit`
 */
export function quantityOf(option: string, text: string | undefined, quantity: Quantity): number | null {
  if (text === undefined) return null;
  return parseQuantity(text, quantity, { input: option, ...(quantity === 'angle' && { defaultUnit: 'deg' }) });
}

/** `ccw` or `cw`, in the words people use for them. @throws LabError `usage` */
export function torqueDirectionOf(text: string | undefined): Direction | null {
  if (text === undefined) return null;
  const direction = directionOfWord(text);
  if (direction) return direction;
  throw new LabError('usage', `--torque-direction must be ccw or cw (facing the driven end), got "${text}"`, {
    input: '--torque-direction',
    value: text,
  });
}

/** Outside diameter and bore → section geometry; null without a diameter. @throws LabError `out-of-range`, `missing-value` */
export function roundGeometryOf(diameterMm: number | null, boreMm: number | null): SectionGeometry | null {
  if (diameterMm === null) {
    if (boreMm === null) return null;
    throw new LabError('missing-value', 'a bore needs its outside diameter: --diameter is missing', {
      input: '--diameter',
    });
  }
  const parsed = SectionGeometry.safeParse(
    boreMm === null || boreMm === 0
      ? { section: 'solid-round', diameterMm }
      : { section: 'hollow-round', diameterMm, boreMm },
  );
  if (parsed.success) return parsed.data;
  if (!(diameterMm > 0) || diameterMm > LARGEST_DIMENSION_MM) {
    throw new LabError('out-of-range', `diameter must be > 0 and ≤ ${LARGEST_DIMENSION_MM} mm, got ${diameterMm} mm`, {
      input: '--diameter',
      value: diameterMm,
    });
  }
  throw new LabError(
    'out-of-range',
    `bore must be ≥ 0 and smaller than the diameter of ${diameterMm} mm, got ${boreMm} mm`,
    {
      input: '--bore',
      value: boreMm,
    },
  );
}
