import { performance } from 'node:perf_hooks';
import { quantile } from '../photos/summary.ts';

/** One piece of work to be timed; what it returns is thrown away. */
export type Work = () => unknown | Promise<unknown>;

/** Works of one benchmark, timed side by side in the same run, so that the machine's mood cancels in their ratio. */
export interface PreparedBenchmark {
  /** Named works; the first one is the measure the others are divided by. */
  readonly works: Readonly<Record<string, Work>>;
  /** How often each work is run; at least 3. Default 15. */
  readonly rounds?: number;
  /** Closes what was opened. */
  readonly close?: () => void | Promise<void>;
}

export interface Benchmark {
  readonly name: string;
  /** What is timed and what the ratio tells, in a sentence. */
  readonly about: string;
  prepare(): PreparedBenchmark | Promise<PreparedBenchmark>;
}

export interface WorkFigures {
  readonly work: string;
  readonly medianMs: number;
  /** Median and quartiles of the ratio to the first work, round by round. */
  readonly medianRatio: number;
  readonly lowerQuartileRatio: number;
  readonly upperQuartileRatio: number;
}

/** Runs every work once to warm up, then in rounds whose order alternates, and pairs the times of each round. */
export async function runBenchmark(benchmark: Benchmark): Promise<WorkFigures[]> {
  const { works, rounds = 15, close } = await benchmark.prepare();
  const entries = Object.entries(works);
  const times = new Map<string, number[]>(entries.map(([name]) => [name, []]));
  try {
    for (const [, work] of entries) {
      await work();
      await work();
    }
    for (let round = 0; round < rounds; round++) {
      for (const [name, work] of round % 2 === 0 ? entries : entries.toReversed()) {
        const started = performance.now();
        await work();
        times.get(name)?.push(performance.now() - started);
      }
    }
  } finally {
    await close?.();
  }
  const base = times.get(entries[0]?.[0] ?? '') ?? [];
  return entries.map(([work]) => {
    const own = times.get(work) ?? [];
    const ratios = own.map((ms, i) => ms / (base[i] as number));
    return {
      work,
      medianMs: quantile(own, 0.5),
      medianRatio: quantile(ratios, 0.5),
      lowerQuartileRatio: quantile(ratios, 0.25),
      upperQuartileRatio: quantile(ratios, 0.75),
    };
  });
}
