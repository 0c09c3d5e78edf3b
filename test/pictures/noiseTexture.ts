import { Random } from './random.ts';

const SIZE = 512;
const MASK = SIZE - 1;

/** A square of noise that repeats without a seam; zero mean, unit standard deviation. */
export class NoiseTexture {
  private readonly values: Float32Array;

  constructor(values: Float32Array) {
    let sum = 0;
    for (const value of values) sum += value;
    const mean = sum / values.length;
    let squares = 0;
    for (const value of values) squares += (value - mean) ** 2;
    const scale = 1 / Math.sqrt(squares / values.length);
    this.values = values.map((value) => (value - mean) * scale);
  }

  /** Value at (u, v) in texels, bilinear, repeating every 512. */
  at(u: number, v: number): number {
    const u0 = Math.floor(u);
    const v0 = Math.floor(v);
    const fu = u - u0;
    const fv = v - v0;
    const left = u0 & MASK;
    const right = (u0 + 1) & MASK;
    const top = (v0 & MASK) * SIZE;
    const bottom = ((v0 + 1) & MASK) * SIZE;
    const values = this.values;
    const a = values[top + left] as number;
    const b = values[top + right] as number;
    const c = values[bottom + left] as number;
    const d = values[bottom + right] as number;
    return (a + (b - a) * fu) * (1 - fv) + (c + (d - c) * fu) * fv;
  }
}

/** Sum of octaves of value noise with 2^from … 2^to cells a side, amplitude of each = cells^-roughness. */
function octaveNoise(seed: number, from: number, to: number, roughness: number): NoiseTexture {
  const random = new Random(seed);
  const values = new Float32Array(SIZE * SIZE);
  for (let octave = from; octave <= to; octave++) {
    const cells = 2 ** octave;
    const lattice = Float64Array.from({ length: cells * cells }, () => random.normal());
    const step = SIZE / cells;
    const amplitude = cells ** -roughness;
    for (let row = 0; row < SIZE; row++) {
      const y = row / step;
      const y0 = Math.floor(y);
      const sy = smooth(y - y0);
      const top = (y0 % cells) * cells;
      const bottom = ((y0 + 1) % cells) * cells;
      for (let column = 0; column < SIZE; column++) {
        const x = column / step;
        const x0 = Math.floor(x);
        const sx = smooth(x - x0);
        const left = x0 % cells;
        const right = (x0 + 1) % cells;
        const a = (lattice[top + left] as number) * (1 - sx) + (lattice[top + right] as number) * sx;
        const b = (lattice[bottom + left] as number) * (1 - sx) + (lattice[bottom + right] as number) * sx;
        const at = row * SIZE + column;
        values[at] = (values[at] as number) + amplitude * (a * (1 - sy) + b * sy);
      }
    }
  }
  return new NoiseTexture(values);
}

const smooth = (t: number): number => t * t * (3 - 2 * t);

const made = new Map<string, NoiseTexture>();
function once(name: string, make: () => NoiseTexture): NoiseTexture {
  const known = made.get(name);
  if (known) return known;
  const texture = make();
  made.set(name, texture);
  return texture;
}

/** Noise with power at all scales: clouds, rust, broken surfaces. */
export const cloudNoise = (): NoiseTexture => once('cloud', () => octaveNoise(101, 2, 8, 0.9));
/** Noise with more power at small scales: granular breaks, cast skin. */
export const grainyNoise = (): NoiseTexture => once('grainy', () => octaveNoise(202, 3, 9, 0.45));
/** Fine speckle only. */
export const speckleNoise = (): NoiseTexture => once('speckle', () => octaveNoise(303, 7, 9, 0.1));
