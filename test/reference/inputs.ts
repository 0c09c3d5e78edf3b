import { parseQuantity, type Quantity } from '../../src/units.ts';

/** The inputs of one reference row, written `T=400 lbf·in; d=0.625 in` and turned into inside units when asked for. */
export interface ReferenceInputs {
  readonly has: (name: string) => boolean;
  readonly text: (name: string) => string;
  /** A number without a unit. */
  readonly number: (name: string) => number;
  readonly numbers: (name: string) => number[];
  readonly torque: (name: string) => number;
  readonly length: (name: string) => number;
  readonly force: (name: string) => number;
  readonly stress: (name: string) => number;
  readonly angle: (name: string) => number;
}

export function readInputs(cell: string): ReferenceInputs {
  const values = new Map<string, string>();
  for (const part of cell.split(';').filter((p) => p.trim() !== '')) {
    const [name = '', ...rest] = part.split('=');
    values.set(name.trim(), rest.join('=').trim());
  }
  const text = (name: string): string => {
    const value = values.get(name);
    if (value === undefined) throw new Error(`reference row lacks the input "${name}": ${cell}`);
    return value;
  };
  const number = (name: string): number => plainNumber(text(name), name);
  const quantity = (kind: Quantity) => (name: string) => parseQuantity(text(name), kind, { input: name });
  return {
    has: (name) => values.has(name),
    text,
    number,
    numbers: (name) =>
      text(name)
        .split(/\s+/)
        .map((v) => plainNumber(v, name)),
    torque: quantity('torque'),
    length: quantity('length'),
    force: quantity('force'),
    stress: quantity('stress'),
    angle: quantity('angle'),
  };
}

export function plainNumber(text: string, name: string): number {
  const value = Number(text);
  if (text.trim() === '' || !Number.isFinite(value)) throw new Error(`${name} is not a number: "${text}"`);
  return value;
}
