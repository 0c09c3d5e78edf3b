/**
 * Renders a set of photos of broken specimens with known truth, for judging the measurement.
 *
 *   npx tsx test/pictures/main.ts OUTDIR [--count 100] [--seed 1] [--negatives 20] [--prefix p] [--megapixels 2]
 *     [--only TEXT] [--truth-only]
 *
 * Photos and specimens are invented. The same seed gives the same set.
 */
import { mkdir, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { parseArgs } from 'node:util';
import { planSet } from './photoSet.ts';
import { storePhoto } from './storePhoto.ts';

const { values, positionals } = parseArgs({
  allowPositionals: true,
  options: {
    count: { type: 'string', default: '100' },
    seed: { type: 'string', default: '1' },
    negatives: { type: 'string' },
    prefix: { type: 'string', default: 'p' },
    megapixels: { type: 'string' },
    only: { type: 'string' },
    'truth-only': { type: 'boolean', default: false },
  },
});

const wholeNumber = (name: string, text: string): number => {
  const value = Number(text);
  if (!Number.isInteger(value) || value < 0)
    throw new Error(`--${name} ${text}: expected a whole number of at least 0`);
  return value;
};

async function main(): Promise<number> {
  const folder = positionals[0];
  if (folder === undefined) {
    process.stderr.write('usage: npx tsx test/pictures/main.ts OUTDIR [--count 100] [--seed 1] [--negatives 20]\n');
    return 2;
  }
  await mkdir(folder, { recursive: true });
  const count = wholeNumber('count', values.count);
  const negatives = values.negatives === undefined ? Math.round(count / 5) : wholeNumber('negatives', values.negatives);
  const megapixels = values.megapixels === undefined ? undefined : Number(values.megapixels);
  const set = planSet({ count, negatives, seed: wholeNumber('seed', values.seed), prefix: values.prefix, megapixels });
  for (const { name, make } of set) {
    if (values.only !== undefined && !name.includes(values.only)) continue;
    const started = performance.now();
    const { plan, random } = make();
    if (!values['truth-only']) await writeFile(join(folder, `${name}.jpg`), await storePhoto(plan, random));
    await writeFile(join(folder, `${name}.json`), `${JSON.stringify({ file: `${name}.jpg`, ...plan.truth })}\n`);
    const { widthPx, heightPx } = plan.scene.camera;
    const seconds = ((performance.now() - started) / 1000).toFixed(1);
    process.stderr.write(`${name} ${widthPx}×${heightPx} ${seconds} s\n`);
  }
  return 0;
}

process.exitCode = await main();
