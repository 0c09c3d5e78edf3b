import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { LabError } from '../../src/errors.ts';
import {
  fromInside,
  INSIDE_UNIT,
  parseQuantity,
  parseUnit,
  type Quantity,
  toInside,
  UNITS_OF,
} from '../../src/units.ts';

const refusal = (run: () => unknown): LabError => {
  try {
    run();
  } catch (error) {
    if (error instanceof LabError) return error;
    throw error;
  }
  throw new Error('nothing was refused');
};

describe('parseQuantity', () => {
  test.each([
    ['85N.m', 'torque', 85],
    ['85 N·m', 'torque', 85],
    ['85 Nm', 'torque', 85],
    ['85 nm', 'torque', 85],
    ['0.085 kN·m', 'torque', 85],
    ['85000 N·mm', 'torque', 85],
    ['12 mN·m', 'torque', 0.012],
    ['10 lbf·in', 'torque', 1.129848290276167],
    ['10 in-lb', 'torque', 1.129848290276167],
    ['10 in·lbs', 'torque', 1.129848290276167],
    ['10 ft-lb', 'torque', 13.558179483314],
    ['10 lbf ft', 'torque', 13.558179483314],
    ['10 kgf·m', 'torque', 98.0665],
    ['12mm', 'length', 12],
    ['12,7 mm', 'length', 12.7],
    ['0.5 in', 'length', 12.7],
    ['0.5"', 'length', 12.7],
    ['12700 μm', 'length', 12.7],
    ['1 250,5 mm', 'length', 1250.5],
    ['1.5e2 mm', 'length', 150],
    ['-2 kN', 'force', -2000],
    ['−2 kN', 'force', -2000],
    ['1 lbf', 'force', 4.4482216152605],
    ['1 ksi', 'stress', 6.894757293168361],
    ['1 psi', 'stress', 0.006894757293168361],
    ['210 GPa', 'stress', 210000],
    ['210 N/mm2', 'stress', 210],
    ['10 bar', 'stress', 1],
    ['44°', 'angle', 44],
    ["44°30'", 'angle', 44.5],
    ["-44° 30'", 'angle', -44.5],
    ['2.5 turns', 'angle', 900],
    ['3.141592653589793 rad', 'angle', 180],
  ] as const)('%s is %s %d', (text, quantity, expected) => {
    expect(parseQuantity(text, quantity)).toBeCloseTo(expected, 12);
  });

  test('a bare number takes the default unit, and is refused without one', () => {
    expect(parseQuantity('0.5', 'length', { defaultUnit: 'in' })).toBe(12.7);
    expect(refusal(() => parseQuantity('0.5', 'length')).code).toBe('unknown-unit');
  });

  test.each(['', 'abc', '1,234 mm', '1.2.3 mm', '--4 mm', 'NaN mm', 'Infinity mm', '1e999 mm', '1 2 mm', ','])(
    '"%s" is not a number',
    (text) => {
      const error = refusal(() => parseQuantity(text, 'length', { input: 'diameter' }));
      expect(error.code).toBe('not-a-number');
      expect(error.input).toBe('diameter');
      expect(error.message).toContain(`got "${text}"`);
    },
  );

  test.each([
    ['12 kg', 'length'],
    ['12 mm', 'torque'],
    ['12 mPa', 'stress'],
    ['12 Mm', 'length'],
    ['12 MNM', 'torque'],
    ['12 mN', 'force'],
    ['12 furlong', 'length'],
  ] as const)('%s is no unit of %s', (text, quantity) => {
    expect(refusal(() => parseQuantity(text, quantity)).code).toBe('unknown-unit');
  });
});

test('parseUnit gives the canonical symbol of header spellings', () => {
  expect(parseUnit('Nm', 'torque')).toBe('N·m');
  expect(parseUnit('in_lb', 'torque')).toBe('lbf·in');
  expect(parseUnit('inch', 'length')).toBe('in');
  expect(parseUnit('mpa', 'stress')).toBe('MPa');
});

test('every unit converts to inside and back', () => {
  const quantities = Object.keys(UNITS_OF) as Quantity[];
  fc.assert(
    fc.property(
      fc.constantFrom(...quantities).chain((q) => fc.tuple(fc.constant(q), fc.constantFrom(...UNITS_OF[q]))),
      fc.double({ min: -1e6, max: 1e6, noNaN: true }),
      ([quantity, symbol], value) => {
        const back = fromInside(toInside(value, quantity, symbol), quantity, symbol);
        expect(Math.abs(back - value)).toBeLessThanOrEqual(4e-16 * Math.abs(value) + 1e-300);
      },
    ),
  );
});

test('the inside unit of every quantity converts by exactly one', () => {
  for (const quantity of Object.keys(UNITS_OF) as Quantity[]) {
    expect(UNITS_OF[quantity][0]).toBe(INSIDE_UNIT[quantity]);
    expect(toInside(12.345, quantity, INSIDE_UNIT[quantity])).toBe(12.345);
  }
});
