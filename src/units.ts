import { LabError } from './errors.ts';

/**
 * Units at the edge. Inside the program there is one unit per quantity (N·m, mm, N, MPa, degree);
 * every other unit is turned into it here and nowhere else.
 *
 * Factors are exact ratios `numerator / denominator`, so that 0.5 in is 12.7 mm and not
 * 12.700000000000001. Sources: the SI Brochure, 9th edition (2019); NIST SP 811 (2008), appendix B.8:
 * 1 in = 25.4 mm, 1 lb = 0.45359237 kg, g_n = 9.80665 m/s², all exact, hence 1 lbf = 4.4482216152605 N.
 */
export type Quantity = 'torque' | 'length' | 'force' | 'stress' | 'angle';

interface Unit {
  readonly symbol: string;
  readonly numerator: number;
  readonly denominator: number;
  /** Other spellings, already normalised by `normalSpelling`. */
  readonly spellings: readonly string[];
}

const unit = (symbol: string, numerator: number, denominator: number, ...spellings: string[]): Unit => ({
  symbol,
  numerator,
  denominator,
  spellings: [normalSpelling(symbol), ...spellings],
});

const POUND_INCH = ['lbf·in', 'in·lbf', 'lb·in', 'in·lb', 'in·lbs', 'lbs·in', 'inlb', 'lbin', 'inlbf', 'lbfin'];
const INCH_POUND = [...POUND_INCH, 'inlbs', 'inch·pounds', 'inch·pound', 'pound·inch', 'pound·inches'];
const FOOT_POUND = [
  'ft·lbf',
  'lb·ft',
  'ft·lb',
  'ft·lbs',
  'lbs·ft',
  'ftlb',
  'lbft',
  'ftlbf',
  'lbfft',
  'ftlbs',
  'foot·pounds',
  'foot·pound',
];

/** The first unit of each list is the one used inside. */
const TABLE: Readonly<Record<Quantity, readonly Unit[]>> = {
  torque: [
    unit('N·m', 1, 1, 'Nm', 'newton·metre', 'newton·metres', 'newton·meter', 'newton·meters'),
    unit('kN·m', 1000, 1, 'kNm'),
    unit('MN·m', 1_000_000, 1, 'MNm'),
    unit('mN·m', 1, 1000, 'mNm'),
    unit('N·mm', 1, 1000, 'Nmm'),
    unit('N·cm', 1, 100, 'Ncm'),
    unit('lbf·in', 1129848290276167, 1e16, ...INCH_POUND),
    unit('lbf·ft', 13558179483314004, 1e16, ...FOOT_POUND),
    unit('kip·in', 1129848290276167, 1e13, 'in·kip', 'kipin'),
    unit('kgf·m', 980665, 100_000, 'kgfm', 'kg·m', 'kgm', 'm·kg', 'm·kgf', 'kp·m', 'kpm'),
    unit('kgf·cm', 980665, 10_000_000, 'kgfcm', 'kg·cm', 'kgcm'),
  ],
  length: [
    unit('mm', 1, 1, 'millimetre', 'millimetres', 'millimeter', 'millimeters'),
    unit('cm', 10, 1, 'centimetre', 'centimeter'),
    unit('m', 1000, 1, 'metre', 'metres', 'meter', 'meters'),
    unit('µm', 1, 1000, 'um', 'micron', 'microns'),
    unit('in', 254, 10, 'inch', 'inches', '"', '″', '”'),
    unit('ft', 3048, 10, 'foot', 'feet'),
  ],
  force: [
    unit('N', 1, 1, 'newton', 'newtons'),
    unit('kN', 1000, 1),
    unit('MN', 1_000_000, 1),
    unit('lbf', 44482216152605, 1e13, 'lb', 'lbs', 'pound', 'pounds'),
    unit('kip', 44482216152605, 1e10, 'kips', 'klbf'),
    unit('kgf', 980665, 100_000, 'kg', 'kp'),
  ],
  stress: [
    unit('MPa', 1, 1),
    unit('GPa', 1000, 1),
    unit('kPa', 1, 1000),
    unit('Pa', 1, 1_000_000),
    unit('N/mm²', 1, 1, 'N/mm2', 'N/mm^2', 'N·mm·2', 'N·mm⁻²'),
    unit('psi', 44482216152605, 6451600000000000, 'lbf/in²', 'lbf/in2', 'lb/in²', 'lb/in2'),
    unit('ksi', 44482216152605, 6451600000000, 'kip/in²', 'kip/in2'),
    unit('kgf/mm²', 980665, 100_000, 'kgf/mm2', 'kg/mm²', 'kg/mm2'),
    unit('bar', 1, 10),
  ],
  angle: [
    unit('deg', 1, 1, '°', 'º', 'degree', 'degrees', 'degs'),
    unit('rad', 180, Math.PI, 'radian', 'radians', 'rads'),
    unit('turns', 360, 1, 'turn', 'rev', 'revs', 'revolution', 'revolutions'),
  ],
};

/** Symbols that can be chosen for each quantity; the first is the one used inside. */
export const UNITS_OF: Readonly<Record<Quantity, readonly string[]>> = {
  torque: TABLE.torque.map((u) => u.symbol),
  length: TABLE.length.map((u) => u.symbol),
  force: TABLE.force.map((u) => u.symbol),
  stress: TABLE.stress.map((u) => u.symbol),
  angle: TABLE.angle.map((u) => u.symbol),
};

/** The unit of each quantity inside the program. */
export const INSIDE_UNIT: Readonly<Record<Quantity, string>> = {
  torque: 'N·m',
  length: 'mm',
  force: 'N',
  stress: 'MPa',
  angle: 'deg',
};

/** One multiplication sign, one micro sign, no spaces: `N.m`, `N m`, `N*m`, `N-m` and `N⋅m` are all `N·m`. */
function normalSpelling(text: string): string {
  return text
    .trim()
    .replaceAll('μ', 'µ')
    .replace(/\s*[.*⋅•∙×_-]\s*/g, '·')
    .replace(/\s+/g, '·')
    .replace(/^·+|·+$/g, '')
    .replaceAll('·/·', '/');
}

function findUnit(text: string, quantity: Quantity): Unit | undefined {
  const spelling = normalSpelling(text);
  const exact = TABLE[quantity].filter((u) => u.spellings.includes(spelling));
  if (exact.length > 0) return exact[0];
  // A milli-pascal, a mega-metre and a milli-newton are real units, only not ours: never read them as MPa, mm, MN.
  if (/^(mPa|Mm|mN)$/.test(spelling)) return undefined;
  const folded = spelling.toLowerCase();
  const matches = TABLE[quantity].filter((u) => u.spellings.some((s) => s.toLowerCase() === folded));
  return matches.length === 1 ? matches[0] : undefined;
}

const wantedUnits = (quantity: Quantity): string => UNITS_OF[quantity].join(', ');

/**
 * The canonical symbol of a unit as people write it ("N.m", "in-lb", "inch"), for headers and options.
 * @throws LabError `unknown-unit`, naming the units that may be used
 */
export function parseUnit(text: string, quantity: Quantity, input: string = quantity): string {
  const found = findUnit(text, quantity);
  if (found) return found.symbol;
  throw new LabError(
    'unknown-unit',
    `${input} must be in a unit of ${quantity} (${wantedUnits(quantity)}), got "${text.trim()}"`,
    { input, value: text },
  );
}

function unitBySymbol(symbol: string, quantity: Quantity): Unit {
  const found = findUnit(symbol, quantity);
  if (found) return found;
  throw new LabError('unknown-unit', `unit of ${quantity} must be one of ${wantedUnits(quantity)}, got "${symbol}"`, {
    input: quantity,
    value: symbol,
  });
}

/** A value given in `unitSymbol`, in the unit used inside. @throws LabError `unknown-unit` */
export function toInside(value: number, quantity: Quantity, unitSymbol: string): number {
  const { numerator, denominator } = unitBySymbol(unitSymbol, quantity);
  return (value * numerator) / denominator;
}

/** An inside value, expressed in `unitSymbol`. @throws LabError `unknown-unit` */
export function fromInside(value: number, quantity: Quantity, unitSymbol: string): number {
  const { numerator, denominator } = unitBySymbol(unitSymbol, quantity);
  return (value * denominator) / numerator;
}

export interface ParseQuantityOptions {
  /** Unit meant when the text carries none; without it a bare number is refused. */
  readonly defaultUnit?: string;
  /** Name of the input, for the message. */
  readonly input?: string;
}

const NUMBER_THEN_UNIT = /^([+-]?(?:\d[\d\s.,]*|[.,]\d+)(?:[eE][+-]?\d+)?)(.*)$/s;
const DEGREES_MINUTES = /^([+-]?)(\d+)\s*°\s*(\d{1,2}(?:\.\d+)?)\s*['′’]$/;

/**
 * A number with its unit, as people type it: `85N.m`, `12,7 mm`, `1 250 lbf·in`, `44°30'`.
 * A comma is a decimal comma; `1,234` is refused because it could also be a thousand.
 * @returns the value in the unit used inside (N·m, mm, N, MPa, deg)
 * @throws LabError `not-a-number` or `unknown-unit`
 */
export function parseQuantity(text: string, quantity: Quantity, options: ParseQuantityOptions = {}): number {
  const input = options.input ?? quantity;
  const cleaned = text.trim().replace(/[−–]/g, '-');
  const sexagesimal = quantity === 'angle' ? DEGREES_MINUTES.exec(cleaned) : null;
  if (sexagesimal) {
    const magnitude = Number(sexagesimal[2]) + Number(sexagesimal[3]) / 60;
    return sexagesimal[1] === '-' ? -magnitude : magnitude;
  }
  const match = NUMBER_THEN_UNIT.exec(cleaned);
  const value = parseDecimal(match?.[1] ?? '');
  if (!Number.isFinite(value)) {
    throw new LabError(
      'not-a-number',
      `${input} must be a number with a unit of ${quantity}, such as 12.5 ${INSIDE_UNIT[quantity]}, got "${text.trim()}"`,
      { input, value: text },
    );
  }
  const unitText = (match?.[2] ?? '').trim() || options.defaultUnit;
  if (unitText === undefined) {
    throw new LabError(
      'unknown-unit',
      `${input} must carry its unit (${wantedUnits(quantity)}), got "${text.trim()}"`,
      { input, value: text },
    );
  }
  return toInside(value, quantity, parseUnit(unitText, quantity, input));
}

/** A plain decimal number; NaN for anything that is not one, or that could be read in two ways. */
function parseDecimal(text: string): number {
  const trimmed = text.trim();
  const compact = /^[+-]?\d{1,3}(?:\s\d{3})+(?:[.,]\d+)?$/.test(trimmed) ? trimmed.replace(/\s/g, '') : trimmed;
  if (/^[+-]?[1-9]\d{0,2},\d{3}$/.test(compact)) return Number.NaN;
  const decimal = compact.replace(',', '.');
  return /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/.test(decimal) ? Number(decimal) : Number.NaN;
}
