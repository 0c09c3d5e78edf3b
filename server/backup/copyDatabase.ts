import { Piscina } from 'piscina';
import { programPart } from '../programPart.ts';
import type { CopyJob } from './copyDatabaseWorker.ts';

/** Copies the database at `from` to the new file `to`, as of one moment, away from the calling thread. */
export async function copyDatabase(from: string, to: string): Promise<void> {
  const worker = programPart('copyDatabaseWorker.js', 'backup/copyDatabaseWorker.ts');
  if (!worker) throw new Error('the worker that copies the database is missing; build the program again');
  const piscina = new Piscina<CopyJob, void>({
    filename: worker.url.href,
    minThreads: 1,
    maxThreads: 1,
    execArgv: [...worker.execArgv],
  });
  try {
    await piscina.run({ from, to });
  } finally {
    await piscina.destroy();
  }
}
