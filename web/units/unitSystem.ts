import { fromInside, type Quantity } from '../../src/units.ts';

/** The units a person wants to see. What is stored never depends on it. */
export type UnitSystem = 'si' | 'us';

export const UNIT_SYSTEMS: readonly UnitSystem[] = ['si', 'us'];

const SHOWN: Readonly<Record<UnitSystem, Readonly<Record<Quantity, string>>>> = {
  si: { torque: 'N·m', length: 'mm', force: 'N', stress: 'MPa', angle: 'deg' },
  us: { torque: 'lbf·in', length: 'in', force: 'lbf', stress: 'ksi', angle: 'deg' },
};

/** Symbol of the unit a quantity is shown in. */
export const unitShown = (quantity: Quantity, system: UnitSystem): string => SHOWN[system][quantity];

/** The unit as it is printed beside a number: a degree sign rather than "deg". */
export const unitLabel = (quantity: Quantity, system: UnitSystem): string =>
  quantity === 'angle' ? '°' : unitShown(quantity, system);

/** An inside value as the text of a field: up to 7 significant digits, no trailing zeros, a decimal point. */
export function fieldText(insideValue: number, quantity: Quantity, system: UnitSystem): string {
  return String(Number(fromInside(insideValue, quantity, unitShown(quantity, system)).toPrecision(7)));
}

/** An inside value for reading: `significant` digits (default 4), with its unit. */
export function shownQuantity(insideValue: number, quantity: Quantity, system: UnitSystem, significant = 4): string {
  const value = fromInside(insideValue, quantity, unitShown(quantity, system));
  return `${digits(value, significant)} ${unitLabel(quantity, system)}`;
}

/** A number with so many significant digits, never in powers of ten below a million, minus as a true minus sign. */
export function digits(value: number, significant: number): string {
  if (value === 0) return '0';
  const decimals = Math.max(0, significant - 1 - Math.floor(Math.log10(Math.abs(value))));
  const text =
    Math.abs(value) < 1e-4 || Math.abs(value) >= 1e7
      ? value.toPrecision(significant)
      : value.toFixed(Math.min(decimals, 8));
  return text.replace('-', '−');
}
