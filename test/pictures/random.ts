import { uniformFloat64 } from 'pure-rand/distribution/uniformFloat64';
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';

/** Seeded random numbers: the same seed gives the same picture on every machine. */
export class Random {
  private readonly generator: ReturnType<typeof xoroshiro128plus>;

  constructor(seed: number) {
    this.generator = xoroshiro128plus(seed | 0);
    this.generator.jump();
  }

  uniform(from = 0, to = 1): number {
    return from + (to - from) * uniformFloat64(this.generator);
  }

  /** Uniform in the logarithm; both limits > 0. */
  logUniform(from: number, to: number): number {
    return Math.exp(this.uniform(Math.log(from), Math.log(to)));
  }

  /** Whole number from `from` to `to`, both included. */
  integer(from: number, to: number): number {
    return Math.floor(this.uniform(from, to + 1));
  }

  chance(probability: number): boolean {
    return this.uniform() < probability;
  }

  sign(): 1 | -1 {
    return this.chance(0.5) ? 1 : -1;
  }

  pick<T>(choices: readonly T[]): T {
    const choice = choices[this.integer(0, choices.length - 1)];
    if (choice === undefined) throw new Error('pick needs at least one choice');
    return choice;
  }

  /** Normal by the polar method of Marsaglia. */
  normal(mean = 0, standardDeviation = 1): number {
    for (;;) {
      const a = this.uniform(-1, 1);
      const b = this.uniform(-1, 1);
      const square = a * a + b * b;
      if (square > 0 && square < 1) return mean + standardDeviation * a * Math.sqrt((-2 * Math.log(square)) / square);
    }
  }
}
