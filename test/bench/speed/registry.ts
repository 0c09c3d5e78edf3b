import type { Benchmark } from './benchmark.ts';
import { photo2Megapixels, photo12Megapixels } from './photo.ts';
import { importRows, list10k, list200k } from './store.ts';

/** Every benchmark of `npm run bench`. A new one is a file beside this and a line here. */
export const BENCHMARKS: readonly Benchmark[] = [photo2Megapixels, photo12Megapixels, list10k, list200k, importRows];
