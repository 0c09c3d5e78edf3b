import { readFile, writeFile } from 'node:fs/promises';
import { basename, extname, join } from 'node:path';
import type { PhotoMeasurement } from '../../records/reading.ts';
import type { MeasureJob } from '../measurement.ts';
import { measurePhoto } from './measurePhoto.ts';

/** Entry of a measuring worker: reads the photo's bytes itself, so that they are not copied between threads. */
export default async function measureJob(job: MeasureJob): Promise<PhotoMeasurement> {
  const { debugDirectory, ...options } = job.options ?? {};
  const bytes = await readFile(job.path);
  if (debugDirectory === undefined) return measurePhoto(bytes, options);
  const stages: { name: string; png: Uint8Array }[] = [];
  const measurement = await measurePhoto(bytes, { ...options, onStage: (name, png) => stages.push({ name, png }) });
  const stem = basename(job.path, extname(job.path));
  for (const { name, png } of stages) await writeFile(join(debugDirectory, `${stem}-${name}.png`), png);
  await writeFile(join(debugDirectory, `${stem}.json`), `${JSON.stringify(measurement, null, 2)}\n`);
  return measurement;
}
