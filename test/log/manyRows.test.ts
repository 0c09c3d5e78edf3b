import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import type { LaboratoryStore } from '../../server/store/laboratoryStore.ts';
import { openStore } from '../../server/store/openStore.ts';
import { importLog } from '../../src/log/node/importLog.ts';
import type { LogSource } from '../../src/log/node/logSource.ts';
import type { LaboratoryRecords } from '../../src/records/laboratoryRecords.ts';
import { badRows, FAULTS, faultOf, generatedLog, isBad } from './generatedLog.ts';

let folder: string;
let store: LaboratoryStore;
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'breakplane-many-'));
  store = await openStore(folder);
});
afterEach(async () => {
  await store.close();
  await rm(folder, { recursive: true, force: true });
});

const ROWS = 6000;
const logOf = (rows: number, torqueAdded = 0): LogSource => ({
  name: 'generated.csv',
  bytes: rows * 100,
  open: () => generatedLog(rows, torqueAdded),
});
const run = (source: LogSource, records: LaboratoryRecords = store, signal?: AbortSignal) =>
  importLog({ source, photos: null, records, pool: null, dryRun: false, ...(signal && { signal }) });

describe(`a log of ${ROWS} rows, one in fifty bad, in twelve ways`, () => {
  test('every count is exact, every refusal at its line and column, and again nothing changes', async () => {
    const bad = badRows(ROWS);
    expect(bad).toBe(120);
    const first = await run(logOf(ROWS));
    expect(first).toMatchObject({ rows: ROWS, stored: ROWS - bad, updated: 0, unchanged: 0, refused: bad });
    const expected = Array.from({ length: ROWS }, (_, i) => i)
      .filter(isBad)
      .map((i) => [i + 2, faultOf(i).column]);
    expect(first.refusals.map((r) => [r.line, r.column])).toEqual(expected);
    expect(new Set(first.refusals.map((r) => r.message.replace(/[\d"].*/, ''))).size).toBeGreaterThan(8);
    const again = await run(logOf(ROWS));
    expect(again).toMatchObject({ stored: 0, updated: 0, unchanged: ROWS - bad, refused: bad, readingsAdded: 0 });
    expect((await store.listTests({ limit: 1 })).total).toBe(ROWS - bad);
  });

  test('another state of the same log updates every test; the earlier torque stays in history', async () => {
    await run(logOf(500));
    const changed = await run(logOf(500, 5));
    expect(changed).toMatchObject({ stored: 0, updated: 500 - badRows(500), unchanged: 0 });
    const { tests } = await store.listTests({ limit: 1, text: 'S-7' });
    expect(tests[0]).toMatchObject({ version: 2 });
    expect(JSON.stringify(await store.historyOf(tests[0]?.id ?? ''))).toContain('"torqueMaxNm"');
  });

  test('an import that is stopped says where; the same import again goes on there and doubles nothing', async () => {
    const stop = new AbortController();
    const stopsAfterThree: LaboratoryRecords = Object.create(store, {
      upsertLogEntries: {
        value: async (...args: Parameters<LaboratoryStore['upsertLogEntries']>) => {
          const kept = await store.upsertLogEntries(...args);
          if ((await store.listTests({ limit: 1 })).total > 1400) stop.abort();
          return kept;
        },
      },
    });
    const stopped = await run(logOf(ROWS), stopsAfterThree, stop.signal);
    expect(stopped.stored).toBeGreaterThan(1400);
    expect(stopped.stored).toBeLessThan(ROWS - badRows(ROWS));
    expect(stopped.stoppedAtLine).toBe(stopped.rows + 2);
    const rest = await run(logOf(ROWS));
    expect(rest.stoppedAtLine).toBeNull();
    expect(rest.unchanged).toBe(stopped.stored);
    expect(rest.stored + rest.unchanged).toBe(ROWS - badRows(ROWS));
  });

  test('a store that fails in the middle loses no row that was reported kept', async () => {
    let calls = 0;
    const failing: LaboratoryRecords = Object.create(store, {
      upsertLogEntries: {
        value: (...args: Parameters<LaboratoryStore['upsertLogEntries']>) => {
          calls += 1;
          return calls === 4 ? Promise.reject(new Error('disk full')) : store.upsertLogEntries(...args);
        },
      },
    });
    await expect(run(logOf(ROWS), failing)).rejects.toThrow('disk full');
    const kept = (await store.listTests({ limit: 1 })).total;
    expect(kept).toBeGreaterThan(1000);
    expect(await run(logOf(ROWS))).toMatchObject({ unchanged: kept, stored: ROWS - badRows(ROWS) - kept });
  });
});

test('there are twelve faults', () => {
  expect(FAULTS).toHaveLength(12);
});
