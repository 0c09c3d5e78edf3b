import { mkdtemp, readdir, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { buildApp } from '../../server/app.ts';
import { startMeasuring } from '../../server/measure/measuringRunner.ts';
import { createUprightPhotos } from '../../server/photos/uprightPhotos.ts';
import type { TypedApp } from '../../server/routes/route.ts';
import { DEFAULT_LIMITS, type ReportRenderer, type Service, type ServiceLimits } from '../../server/service.ts';
import { openStore } from '../../server/store/openStore.ts';
import type { MeasureJob, MeasurePool } from '../../src/photo/measurement.ts';
import { measurePhoto } from '../../src/photo/node/measurePhoto.ts';
import type { PhotoMeasurement } from '../../src/records/reading.ts';
import { TestInput } from '../../src/records/test.ts';

export const PROGRAM_DIR = dirname(dirname(dirname(fileURLToPath(import.meta.url))));

/** A solid bar with the usual fields; `fields` over it. */
export const testInput = (fields: Partial<Record<keyof TestInput, unknown>> = {}): TestInput =>
  TestInput.parse({
    specimenId: 'T-001',
    testDate: '2026-03-02',
    material: 'C45E',
    heat: 'H7',
    geometry: { section: 'solid-round', diameterMm: 12 },
    torqueMaxNm: 85,
    torqueDirection: 'ccw',
    ...fields,
  });

/** The real measurement, but in this thread: no worker has to start for every test. */
export const poolInThisThread = (): MeasurePool => ({
  measure: async (job: MeasureJob): Promise<PhotoMeasurement> => measurePhoto(await readFile(job.path), job.options),
  close: async () => {},
});

export interface Answer {
  readonly status: number;
  readonly headers: Headers;
  // biome-ignore lint/suspicious/noExplicitAny: what came is looked at field by field
  readonly body: any;
  readonly text: string;
}

export interface RunningLaboratory {
  readonly service: Service;
  readonly app: TypedApp;
  readonly address: string;
  readonly dataDir: string;
  ask(method: string, path: string, json?: unknown, headers?: Record<string, string>): Promise<Answer>;
  sendForm(path: string, form: FormData): Promise<Answer>;
  stop(): Promise<void>;
}

async function answerOf(response: Response): Promise<Answer> {
  const text = await response.text();
  const isJson = /[/+]json(?:;|$)/.test(response.headers.get('content-type') ?? '');
  return {
    status: response.status,
    headers: response.headers,
    text,
    body: isJson ? JSON.parse(text) : null,
  };
}

/** Runs the service on a free port with a data folder of its own. */
export async function runLaboratory(
  options: {
    readonly pool?: MeasurePool;
    readonly limits?: Partial<ServiceLimits>;
    readonly lanes?: number;
    readonly report?: ReportRenderer;
    readonly programDir?: string;
  } = {},
): Promise<RunningLaboratory> {
  const dataDir = await mkdtemp(join(tmpdir(), 'breakplane-test-'));
  const store = await openStore(dataDir);
  const pool = options.pool ?? poolInThisThread();
  const faults: unknown[] = [];
  const measuring = startMeasuring({ store, pool, lanes: options.lanes ?? 2, onFault: (error) => faults.push(error) });
  const upright = createUprightPhotos();
  const service: Service = {
    store,
    pool,
    measuring,
    upright,
    report: options.report ?? null,
    limits: { ...DEFAULT_LIMITS, ...options.limits },
    programDir: options.programDir ?? PROGRAM_DIR,
    version: '0.0.0-test',
  };
  const app = await buildApp(service);
  const address = await app.listen({ port: 0, host: '127.0.0.1' });
  return {
    service,
    app,
    address,
    dataDir,
    async ask(method, path, json, headers = {}) {
      return answerOf(
        await fetch(address + path, {
          method,
          headers: { ...(json === undefined ? {} : { 'content-type': 'application/json' }), ...headers },
          ...(json === undefined ? {} : { body: typeof json === 'string' ? json : JSON.stringify(json) }),
        }),
      );
    },
    async sendForm(path, form) {
      return answerOf(await fetch(address + path, { method: 'POST', body: form }));
    },
    async stop() {
      await app.close();
      await measuring.stop();
      await Promise.all([pool.close(), upright.close()]);
      await store.close();
      await rm(dataDir, { recursive: true, force: true });
      if (faults.length > 0) throw faults[0];
    },
  };
}

/** Names of all files below a folder, in order. */
export async function filesBelow(folder: string): Promise<string[]> {
  const entries = await readdir(folder, { withFileTypes: true, recursive: true });
  return entries
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath, entry.name).slice(folder.length + 1))
    .sort();
}

/** A form with photos in field "photo". */
export function photoForm(...photos: readonly { readonly name: string; readonly bytes: Uint8Array }[]): FormData {
  const form = new FormData();
  for (const { name, bytes } of photos) form.append('photo', new Blob([new Uint8Array(bytes)]), name);
  return form;
}
