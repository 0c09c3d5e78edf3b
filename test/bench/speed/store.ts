import { createReadStream } from 'node:fs';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { parse } from 'csv-parse';
import { openStore } from '../../../server/store/openStore.ts';
import { importLog } from '../../../src/log/node/importLog.ts';
import { logFile } from '../../../src/log/node/logSource.ts';
import type { LogEntry } from '../../../src/records/laboratoryRecords.ts';
import { TestInput } from '../../../src/records/test.ts';
import type { Benchmark } from './benchmark.ts';

const MATERIALS = ['C45E', 'EN-GJL-250', 'AlMgSi1'];
const day = (i: number): string =>
  new Date(Date.UTC(2010, 0, 1) + Math.floor(i / 20) * 86_400_000).toISOString().slice(0, 10);

/** An invented test; every second one has an angle. */
function entryOf(i: number): LogEntry {
  const test = TestInput.parse({
    specimenId: `S-${i}`,
    testDate: day(i),
    material: MATERIALS[i % MATERIALS.length],
    heat: `H${i % 97}`,
    geometry: { section: 'solid-round', diameterMm: 12 },
    torqueMaxNm: 85 + (i % 20),
    torqueDirection: 'ccw',
    operator: `Operator ${i % 5}`,
  });
  if (i % 2 === 0) return { test, reading: null };
  const planeAngleDeg = i % 4 === 1 ? 44 : -2;
  return {
    test,
    reading: {
      method: 'instrument',
      engineVersion: null,
      photoSha256: null,
      instrument: 'protractor',
      operator: null,
      remarks: null,
      setAside: false,
      result: {
        outcome: 'by-instrument',
        planeAngleDeg,
        expandedUncertaintyDeg: 2,
        coverageFactor: 2,
        hand: planeAngleDeg > 0 ? 'left' : 'right',
        shape: 'helix',
        planeTiltDeg: null,
        segments: [{ planeAngleDeg, share: 1 }],
      },
    },
  };
}

async function temporaryLaboratory() {
  const folder = await mkdtemp(join(tmpdir(), 'breakplane-bench-'));
  const store = await openStore(join(folder, 'data'));
  return {
    folder,
    store,
    close: async () => {
      await store.close();
      await rm(folder, { recursive: true, force: true });
    },
  };
}

const listBenchmark = (tests: number): Benchmark => ({
  name: `list of ${tests} tests`,
  about:
    'One page of 50 tests as the page asks for it, with the total; the ratios say what narrowing costs against the plain list.',
  async prepare() {
    const { store, close } = await temporaryLaboratory();
    for (let i = 0; i < tests; i += 2000) {
      await store.upsertLogEntries(Array.from({ length: Math.min(2000, tests - i) }, (_, k) => entryOf(i + k)));
    }
    const deep = async () => {
      const { nextCursor } = await store.listRows({ limit: 500 });
      return nextCursor ?? '';
    };
    const cursor = await deep();
    return {
      works: {
        'newest 50': () => store.listRows({ limit: 50 }),
        'page behind 500': () => store.listRows({ limit: 50, cursor }),
        'one specimen': () => store.listRows({ limit: 50, text: `s-${tests - 1}` }),
        'a text nobody wrote': () => store.listRows({ limit: 50, text: 'zzzz' }),
        'text and material': () => store.listRows({ limit: 50, text: 'h13', material: 'C45E' }),
        heat: () => store.listRows({ limit: 50, heat: 'H5' }),
        mode: () => store.listRows({ limit: 50, mode: 'normal-stress' }),
        flagged: () => store.listRows({ limit: 50, flagged: true }),
        'range of angles': () => store.listRows({ limit: 50, angleFromDeg: 40, angleToDeg: 50 }),
        'a year': () => store.listRows({ limit: 50, from: '2011-01-01', to: '2011-12-31' }),
      },
      rounds: 30,
      close,
    };
  },
});

export const list10k = listBenchmark(10_000);
export const list200k = listBenchmark(200_000);

const IMPORT_ROWS = 20_000;

/** A log against reading its cells and no more. */
export const importRows: Benchmark = {
  name: `import of ${IMPORT_ROWS} rows`,
  about:
    'A log into an empty laboratory, and again into the one that has it, against a bare csv-parse pass over the file.',
  async prepare() {
    const { folder, store, close } = await temporaryLaboratory();
    const header =
      'specimen_id,test_date,material,heat,section,diameter_mm,torque_max_Nm,torque_direction,angle_deg,angle_u_deg,operator';
    const rows = Array.from({ length: IMPORT_ROWS }, (_, i) =>
      [
        `S-${i}`,
        day(i),
        MATERIALS[i % 3],
        `H${i % 97}`,
        'solid-round',
        12,
        85 + (i % 20),
        'ccw',
        i % 2 ? 44 : '',
        i % 2 ? 1 : '',
        `Op ${i % 5}`,
      ].join(','),
    );
    const path = join(folder, 'log.csv');
    await writeFile(path, [header, ...rows].join('\n'));
    const options = { photos: null, pool: null, dryRun: false } as const;
    const source = await logFile(path);
    await importLog({ ...options, source, records: store });
    let fresh = 0;
    return {
      works: {
        'csv-parse alone': async () => {
          let count = 0;
          for await (const _ of createReadStream(path).pipe(parse())) count++;
          return count;
        },
        'into an empty laboratory': async () => {
          const empty = await openStore(join(folder, `empty-${fresh++}`));
          try {
            return await importLog({ ...options, source, records: empty });
          } finally {
            await empty.close();
          }
        },
        'the same log again': () => importLog({ ...options, source, records: store }),
      },
      rounds: 5,
      close,
    };
  },
};
