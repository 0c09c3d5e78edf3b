/**
 * Accuracy of the measurement on a folder of photos with known truth.
 *
 *   npm run bench:photos -- FOLDER [--reference] [--verbose] [--only TEXT] [--json FILE]
 */
import { readFile, writeFile } from 'node:fs/promises';
import { performance } from 'node:perf_hooks';
import { parseArgs } from 'node:util';
import type { PhotoMeasurement } from '../../src/records/reading.ts';
import { acceptanceLines } from './photos/acceptance.ts';
import { loadMeasurePhoto } from './photos/measurement.ts';
import { measureByPlainScript } from './photos/plainScript.ts';
import { type PhotoScore, scorePhoto } from './photos/score.ts';
import { summarize } from './photos/summary.ts';
import { badness, figuresTable, photoLines } from './photos/table.ts';
import { type PhotoWithTruth, readPhotoSet } from './photos/truth.ts';

type Measure = (bytes: Uint8Array, path: string) => Promise<PhotoMeasurement>;

const { values, positionals } = parseArgs({
  allowPositionals: true,
  options: {
    reference: { type: 'boolean', default: false },
    verbose: { type: 'boolean', default: false },
    only: { type: 'string' },
    worst: { type: 'string', default: '10' },
    json: { type: 'string' },
  },
});

async function scoreSet(set: readonly PhotoWithTruth[], measure: Measure): Promise<PhotoScore[]> {
  const scores: PhotoScore[] = [];
  for (const [i, photo] of set.entries()) {
    if (process.stderr.isTTY) process.stderr.write(`\r${i + 1} / ${set.length} ${photo.file}   `);
    scores.push(scorePhoto(photo, await measureOrFault(photo, measure)));
  }
  if (process.stderr.isTTY) process.stderr.write('\n');
  return scores;
}

/** A thrown error is counted as a photo that was not measured and told at once: it is a fault of the program. */
async function measureOrFault(photo: PhotoWithTruth, measure: Measure): Promise<PhotoMeasurement> {
  const bytes = await readFile(photo.path);
  const started = performance.now();
  try {
    return await measure(bytes, photo.path);
  } catch (error) {
    process.stderr.write(`${photo.file}: FAULT ${error instanceof Error ? error.stack : String(error)}\n`);
    const message = error instanceof Error ? error.message : String(error);
    const elapsedMs = performance.now() - started;
    return { outcome: 'not-measured', reason: { code: 'fault', message }, sha256: '', elapsedMs, warnings: [] };
  }
}

async function main(): Promise<number> {
  const folder = positionals[0];
  if (folder === undefined) {
    process.stderr.write(
      'usage: npm run bench:photos -- FOLDER [--reference] [--verbose] [--only TEXT] [--json FILE]\n',
    );
    return 2;
  }
  const only = values.only;
  const set = (await readPhotoSet(folder)).filter(({ file }) => only === undefined || file.includes(only));
  if (set.length === 0) {
    process.stderr.write(`${folder} holds no photo beside a NAME.json\n`);
    return 2;
  }
  const measurePhoto = await loadMeasurePhoto();
  const scores = await scoreSet(set, (bytes) => measurePhoto(bytes));
  console.log(figuresTable(scores));
  console.log(`\n${acceptanceLines(scores)}`);
  const worst = scores.toSorted((a, b) => badness(b) - badness(a)).slice(0, Number(values.worst));
  console.log(`\nworst ${worst.length}\n${photoLines(worst.filter((score) => badness(score) > 0))}`);
  if (values.verbose) console.log(`\nevery photo\n${photoLines(scores)}`);
  if (values.reference) await printReference(set, scores);
  if (values.json !== undefined) await writeFile(values.json, `${JSON.stringify(scores, null, 1)}\n`);
  return 0;
}

async function printReference(set: readonly PhotoWithTruth[], ours: readonly PhotoScore[]): Promise<void> {
  const scores = await scoreSet(set, measureByPlainScript);
  const plain = summarize(scores);
  const own = summarize(ours);
  const ratio = (of: number, to: number) => (to === 0 ? 'infinite' : (of / to).toFixed(1));
  console.log(`\nreference: plain Canny + probabilistic Hough script on the same photos\n${figuresTable(scores)}`);
  console.log(
    `\nplain script / measurement: median error × ${ratio(plain.medianErrorDeg, own.medianErrorDeg)}, ` +
      `RMS × ${ratio(plain.rmsErrorDeg, own.rmsErrorDeg)}, time × ${ratio(plain.medianMs, own.medianMs)}`,
  );
}

process.exitCode = await main();
