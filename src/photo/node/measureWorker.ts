import { readFile } from 'node:fs/promises';
import type { PhotoMeasurement } from '../../records/reading.ts';
import type { MeasureJob } from '../measurement.ts';
import { measurePhoto } from './measurePhoto.ts';

/** Entry of a measuring worker: reads the photo's bytes itself, so that they are not copied between threads. */
export default async function measureJob(job: MeasureJob): Promise<PhotoMeasurement> {
  return measurePhoto(await readFile(job.path), job.options ?? {});
}
