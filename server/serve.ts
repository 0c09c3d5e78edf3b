import { availableParallelism, totalmem } from 'node:os';
import pino from 'pino';
import type { RunningService, ServeOptions } from '../src/cli/ports.ts';
import { LabError } from '../src/errors.ts';
import { renderReport } from '../src/report/node/render.ts';
import { buildApp } from './app.ts';
import { requireLoopback } from './http/loopback.ts';
import { createMeasurePool, poolSize } from './measure/measurePool.ts';
import { startMeasuring } from './measure/measuringRunner.ts';
import { createUprightPhotos } from './photos/uprightPhotos.ts';
import { DEFAULT_LIMITS, type Service } from './service.ts';
import { openStore } from './store/openStore.ts';

interface Serve extends ServeOptions {
  readonly programDir: string;
  readonly version: string;
}

/** Running requests get this long to end when the service stops, ms. */
const STOP_WITHIN_MS = 10_000;

function portProblem(error: unknown, { host, port }: ServeOptions): unknown {
  const code = error instanceof Error && 'code' in error ? error.code : '';
  const why =
    code === 'EADDRINUSE'
      ? 'another program listens there'
      : code === 'EACCES'
        ? 'listening there is not permitted'
        : code === 'EADDRNOTAVAIL'
          ? 'this machine has no such address'
          : null;
  if (why === null) return error;
  return new LabError('usage', `--port must be free on ${host}, got ${port}: ${why}; choose another --port`, {
    input: '--port',
    value: port,
  });
}

/** Starts the service; resolves when it listens. @throws LabError `not-loopback`, `busy`, `usage` */
export async function serve(options: Serve): Promise<RunningService> {
  requireLoopback(options.host);
  const logger = pino({ level: process.env.BREAKPLANE_LOG ?? 'warn' }, pino.destination(2));
  const store = await openStore(options.dataDir);
  const lanes = poolSize(availableParallelism(), totalmem());
  const pool = createMeasurePool({ size: lanes });
  const upright = createUprightPhotos();
  const measuring = startMeasuring({
    store,
    pool,
    lanes,
    onFault: (error) => logger.error({ err: error }, 'measuring failed'),
  });
  const closeParts = async (): Promise<void> => {
    await measuring.stop();
    await Promise.all([pool.close(), upright.close()]);
    await store.close();
  };
  const service: Service = {
    store,
    pool,
    measuring,
    upright,
    report: (sheet, photoPath) =>
      renderReport({ tests: [sheet], format: 'pdf', version: options.version, madeAt: new Date(), photoPath }),
    limits: DEFAULT_LIMITS,
    programDir: options.programDir,
    version: options.version,
  };
  try {
    const app = await buildApp(service, logger);
    const address = await app.listen({ port: options.port, host: options.host });
    const empty = (await store.countTests()) === 0;
    measuring.wake();
    return { address: `${address}/`, empty, stopped: stopOnSignal(() => app.close(), closeParts) };
  } catch (error) {
    await closeParts();
    throw portProblem(error, options);
  }
}

/** Resolves once the service has stopped in good order after SIGINT or SIGTERM; a second signal ends it at once. */
function stopOnSignal(stopListening: () => Promise<unknown>, closeParts: () => Promise<void>): Promise<void> {
  return new Promise((resolve, reject) => {
    let stopping = false;
    const stop = (): void => {
      if (stopping) process.exit(130);
      stopping = true;
      const tooLong = setTimeout(() => process.exit(1), STOP_WITHIN_MS + 5000);
      tooLong.unref();
      Promise.race([stopListening(), new Promise((done) => setTimeout(done, STOP_WITHIN_MS).unref())])
        .then(closeParts)
        .then(() => {
          process.off('SIGINT', stop);
          process.off('SIGTERM', stop);
          clearTimeout(tooLong);
          resolve();
        }, reject);
    };
    process.on('SIGINT', stop);
    process.on('SIGTERM', stop);
  });
}
