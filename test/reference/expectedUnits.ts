/** Size of each unit an expected value may be written in, in the inside unit of its kind. */
const INCH = 25.4;
const LBF = 4.4482216152605;

export const EXPECTED_UNITS: Readonly<Record<string, number>> = {
  '1': 1,
  mm: 1,
  in: INCH,
  'mm²': 1,
  'in²': INCH ** 2,
  'mm³': 1,
  'in³': INCH ** 3,
  'mm⁴': 1,
  'in⁴': INCH ** 4,
  'm⁴': 1e12,
  MPa: 1,
  GPa: 1000,
  kPa: 1e-3,
  psi: LBF / INCH ** 2,
  ksi: (1000 * LBF) / INCH ** 2,
  N·m: 1,
  kN·m: 1000,
  kip·in: LBF * INCH,
  deg: 1,
  rad: 180 / Math.PI,
  '%': 0.01,
  J: 1,
};
