import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { logFile } from '../../src/log/node/logSource.ts';
import { openPhotoSource } from '../../src/log/node/openPhotoSource.ts';
import type { Service } from '../service.ts';
import { type ImportAnswer, runImport } from './runImport.ts';

export interface DemoFiles {
  readonly log: string;
  readonly photos: string | null;
}

/** The demo laboratory of a checkout; null where there is none. */
export function demoFiles(programDir: string): DemoFiles | null {
  const log = join(programDir, 'samples', 'logs', 'demo.csv');
  const photos = join(programDir, 'samples', 'photos');
  return existsSync(log) ? { log, photos: existsSync(photos) ? photos : null } : null;
}

/** Loads the demo laboratory like any other log. */
export async function importDemo(service: Service, files: DemoFiles): Promise<ImportAnswer> {
  const photos = files.photos === null ? null : await openPhotoSource(files.photos);
  try {
    return await runImport(service, { source: await logFile(files.log), photos, dryRun: false });
  } finally {
    photos?.close();
  }
}
