/**
 * Speed of the main computations, as ratios within one run.
 *
 *   npm run bench [-- TEXT]     only benchmarks whose name holds TEXT
 */
import { alignedText } from './photos/table.ts';
import { type Benchmark, runBenchmark } from './speed/benchmark.ts';
import { BENCHMARKS } from './speed/registry.ts';

const wanted = process.argv[2];

async function printed(benchmark: Benchmark): Promise<boolean> {
  console.log(`\n${benchmark.name}\n${benchmark.about}`);
  try {
    const figures = await runBenchmark(benchmark);
    console.log(
      alignedText([
        ['work', 'median ms', 'ratio', 'quartiles of the ratio'],
        ...figures.map((f) => [
          f.work,
          f.medianMs.toPrecision(3),
          f.medianRatio.toPrecision(3),
          `${f.lowerQuartileRatio.toPrecision(3)} to ${f.upperQuartileRatio.toPrecision(3)}`,
        ]),
      ]),
    );
    return true;
  } catch (error) {
    console.log(`FAILED: ${error instanceof Error ? error.message : String(error)}`);
    return false;
  }
}

const chosen = BENCHMARKS.filter(({ name }) => wanted === undefined || name.includes(wanted));
if (chosen.length === 0) {
  process.stderr.write(`no benchmark holds "${wanted}"; there are: ${BENCHMARKS.map(({ name }) => name).join('; ')}\n`);
  process.exitCode = 2;
}
let failed = 0;
for (const benchmark of chosen) if (!(await printed(benchmark))) failed++;
if (failed > 0) process.exitCode = 1;
