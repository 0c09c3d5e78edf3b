import { createHash } from 'node:crypto';
import { mkdir, mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import type { LaboratoryStore } from '../../server/store/laboratoryStore.ts';
import { openStore } from '../../server/store/openStore.ts';
import { orderedId } from '../../server/store/orderedId.ts';
import type { LogEntry, NewReading } from '../../src/records/laboratoryRecords.ts';
import { Reading } from '../../src/records/reading.ts';
import { Test } from '../../src/records/test.ts';
import { filesBelow, testInput } from './runningLaboratory.ts';

let dataDir: string;
let store: LaboratoryStore;

beforeEach(async () => {
  dataDir = await mkdtemp(join(tmpdir(), 'breakplane-store-'));
  store = await openStore(dataDir);
});
afterEach(async () => {
  await store.close();
  await rm(dataDir, { recursive: true, force: true });
});

const reading = (testId: string, planeAngleDeg: number, fields: Partial<NewReading> = {}): NewReading => ({
  testId,
  method: 'instrument',
  engineVersion: null,
  photoSha256: null,
  instrument: 'vernier bevel protractor',
  operator: 'Ada',
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
  ...fields,
});

const sha256Of = (bytes: string): string => createHash('sha256').update(bytes).digest('hex');

async function addPhoto(testId: string | null, bytes: string, fileName = 'a.jpg') {
  const path = join(dataDir, `to-add-${orderedId()}`);
  await writeFile(path, bytes);
  return store.addPhoto(
    {
      sha256: sha256Of(bytes),
      testId,
      fileName,
      mediaType: 'image/jpeg',
      bytes: bytes.length,
      widthPx: null,
      heightPx: null,
    },
    path,
  );
}

describe('tests', () => {
  test('what is entered is what is read, as version 1', async () => {
    const input = testInput({
      geometry: { section: 'hollow-round', diameterMm: 20, boreMm: 12.5 },
      remarks: 'τ “quoted” \n2nd line',
    });
    const created = await store.createTest(input);
    expect(Test.parse(created)).toEqual(created);
    expect(created).toMatchObject({ ...input, version: 1 });
    expect(await store.readTest(created.id)).toEqual(created);
  });

  test('a second test of the same specimen and day is refused; without the day it is another one', async () => {
    await store.createTest(testInput());
    await expect(store.createTest(testInput())).rejects.toMatchObject({ code: 'already-exists' });
    await expect(store.createTest(testInput({ testDate: null }))).resolves.toMatchObject({ version: 1 });
    await expect(store.createTest(testInput({ testDate: null }))).rejects.toMatchObject({ code: 'already-exists' });
  });

  test('an unknown id is not found', async () => {
    await expect(store.readTest('nowhere')).rejects.toMatchObject({ code: 'not-found' });
    await expect(store.changeTest('nowhere', 1, testInput())).rejects.toMatchObject({ code: 'not-found' });
    await expect(store.addReading(reading('nowhere', 44))).rejects.toMatchObject({ code: 'not-found' });
  });

  test('a change makes the next version and keeps the earlier one with who, when, why, before and after', async () => {
    const created = await store.createTest(testInput(), { by: 'Ada', why: 'entered' });
    const changed = await store.changeTest(created.id, 1, testInput({ torqueMaxNm: 86.5 }), { by: 'Ben', why: 'typo' });
    expect(changed).toMatchObject({ version: 2, torqueMaxNm: 86.5, createdAt: created.createdAt });
    const history = await store.historyOf(created.id);
    expect(history).toMatchObject([
      { what: 'created', by: 'Ada', why: 'entered', version: 1, at: created.createdAt },
      {
        what: 'changed',
        by: 'Ben',
        why: 'typo',
        version: 2,
        at: changed.updatedAt,
        changes: [{ field: 'torqueMaxNm', before: 85, after: 86.5 }],
      },
    ]);
  });

  test('a change of a version that is no longer the newest is refused and changes nothing', async () => {
    const { id } = await store.createTest(testInput());
    const second = await store.changeTest(id, 1, testInput({ heat: 'H8' }));
    await expect(store.changeTest(id, 1, testInput({ heat: 'H9' }))).rejects.toMatchObject({
      code: 'changed-meanwhile',
    });
    expect(await store.readTest(id)).toEqual(second);
  });

  test('of ten changes of one version at the same time, one wins', async () => {
    const { id } = await store.createTest(testInput());
    const outcomes = await Promise.allSettled(
      Array.from({ length: 10 }, (_, i) => store.changeTest(id, 1, testInput({ remarks: `change ${i}` }))),
    );
    expect(outcomes.filter((outcome) => outcome.status === 'fulfilled')).toHaveLength(1);
    expect((await store.readTest(id)).version).toBe(2);
  });

  test('a change must not take the identity of another test', async () => {
    const { id } = await store.createTest(testInput());
    await store.createTest(testInput({ specimenId: 'T-002' }));
    await expect(store.changeTest(id, 1, testInput({ specimenId: 'T-002' }))).rejects.toMatchObject({
      code: 'already-exists',
    });
  });
});

describe('readings', () => {
  test('are added, never changed; setting one aside is a mark beside it, kept in history', async () => {
    const { id } = await store.createTest(testInput());
    const first = await store.addReading(reading(id, 44));
    expect(Reading.parse(first)).toEqual(first);
    const aside = await store.setReadingAside(first.id, true, { by: 'Ben', why: 'protractor was bent' });
    expect(aside).toEqual({ ...first, setAside: true });
    expect((await store.setReadingAside(first.id, false, { why: 'it was not' })).setAside).toBe(false);
    const history = await store.historyOf(id);
    expect(history.map((entry) => entry.what)).toEqual([
      'created',
      'reading-added',
      'reading-set-aside',
      'reading-taken-back',
    ]);
    expect(history[2]).toMatchObject({ by: 'Ben', why: 'protractor was bent', readingId: first.id });
  });

  test('the list shows mode, angle and counts of the readings in use', async () => {
    const { id } = await store.createTest(testInput());
    expect(await store.readRow(id)).toMatchObject({ mode: null, planeAngleDeg: null, readingCount: 0, flags: [] });
    const kept = await store.addReading(reading(id, 44));
    expect(await store.readRow(id)).toMatchObject({ mode: 'normal-stress', planeAngleDeg: 44, readingCount: 1 });
    await store.setReadingAside(kept.id, true, { why: 'wrong piece' });
    expect(await store.readRow(id)).toMatchObject({ mode: null, planeAngleDeg: null, readingCount: 1 });
  });

  test('a break on the compression plane contradicts the recorded direction: the test is flagged', async () => {
    const { id } = await store.createTest(testInput({ torqueDirection: 'ccw' }));
    await store.addReading(reading(id, -45));
    const row = await store.readRow(id);
    expect(row.flags.length).toBeGreaterThan(0);
    expect((await store.listRows({ limit: 10, flagged: true })).tests.map((test) => test.id)).toEqual([id]);
    expect((await store.listRows({ limit: 10, flagged: false })).total).toBe(0);
  });
});

describe('photos', () => {
  test('lie under the SHA-256 of their bytes, once, however many tests they belong to', async () => {
    const a = await store.createTest(testInput());
    const b = await store.createTest(testInput({ specimenId: 'T-002' }));
    const photo = await addPhoto(a.id, 'bytes of a photo');
    await addPhoto(a.id, 'bytes of a photo', 'again.jpg');
    await addPhoto(b.id, 'bytes of a photo');
    const { sha256 } = photo;
    expect(await filesBelow(join(dataDir, 'photos'))).toEqual([join(sha256.slice(0, 2), sha256.slice(2, 4), sha256)]);
    expect(await readFile(await store.photoPath(sha256), 'utf8')).toBe('bytes of a photo');
    expect(await store.photosOf(a.id)).toEqual([photo]);
    expect((await store.photosOf(b.id)).map((one) => one.sha256)).toEqual([sha256]);
    expect(await store.readRow(a.id)).toMatchObject({ photoCount: 1 });
    expect(await filesBelow(join(dataDir, 'incoming'))).toEqual([]);
  });

  test('bytes that are not those of the SHA-256 are refused, and nothing stays', async () => {
    const { id } = await store.createTest(testInput());
    const path = join(dataDir, 'incoming', 'wrong');
    await writeFile(path, 'other bytes');
    const photo = {
      sha256: sha256Of('a'),
      testId: id,
      fileName: 'a',
      mediaType: 'image/png',
      bytes: 1,
      widthPx: null,
      heightPx: null,
    };
    await expect(store.addPhoto(photo, path)).rejects.toMatchObject({ code: 'contradiction' });
    await expect(store.addPhoto({ ...photo, sha256: '../../x' }, path)).rejects.toMatchObject({
      code: 'invalid-request',
    });
    expect(await store.photosOf(id)).toEqual([]);
    expect(await filesBelow(join(dataDir, 'photos'))).toEqual([]);
  });

  test('a photo for a test that is not there leaves no file', async () => {
    await expect(addPhoto('nowhere', 'x')).rejects.toMatchObject({ code: 'not-found' });
    expect(await filesBelow(join(dataDir, 'photos'))).toEqual([]);
    expect(await filesBelow(join(dataDir, 'incoming'))).toEqual([]);
    await expect(store.photoPath(sha256Of('x'))).rejects.toMatchObject({ code: 'not-found' });
  });

  test('a photo measured again: the new reading stands, the earlier one is set aside and stays', async () => {
    const { id } = await store.createTest(testInput());
    const { sha256 } = await addPhoto(id, 'photo');
    const automatic = (angle: number): NewReading =>
      reading(id, angle, { method: 'photo-automatic', engineVersion: 'e', photoSha256: sha256, instrument: null });
    const first = await store.addReading(automatic(40));
    const second = await store.addReading(automatic(44));
    expect((await store.readingsOf(id)).map(({ id: one, setAside }) => [one, setAside])).toEqual([
      [first.id, true],
      [second.id, false],
    ]);
    const blind: NewReading = {
      ...automatic(0),
      result: {
        outcome: 'not-measured',
        reason: { code: 'no-specimen', message: 'none' },
        sha256,
        elapsedMs: 1,
        warnings: [],
      },
    };
    await store.addReading(blind);
    expect(await store.readRow(id)).toMatchObject({ planeAngleDeg: 44 });
  });
});

describe('rows of a log', () => {
  const entry = (fields: Parameters<typeof testInput>[0], angle: number | null = null): LogEntry => {
    const { testId: _, ...rest } = reading('', angle ?? 0);
    return { test: testInput(fields), reading: angle === null ? null : rest };
  };

  test('are stored, found unchanged the second time, and updated where the log says something new', async () => {
    const rows = [entry({ specimenId: 'A' }, 44), entry({ specimenId: 'B' }), entry({ specimenId: 'C' }, -3)];
    const first = await store.upsertLogEntries(rows);
    expect(first.map(({ outcome, readingAdded }) => [outcome, readingAdded])).toEqual([
      ['stored', true],
      ['stored', false],
      ['stored', true],
    ]);
    const again = await store.upsertLogEntries(rows);
    expect(again).toEqual(first.map(({ testId }) => ({ outcome: 'unchanged', testId, readingAdded: false })));
    const third = await store.upsertLogEntries([
      entry({ specimenId: 'B', torqueMaxNm: 90 }),
      entry({ specimenId: 'A' }, 46),
    ]);
    expect(third.map(({ outcome, readingAdded }) => [outcome, readingAdded])).toEqual([
      ['updated', false],
      ['unchanged', true],
    ]);
    expect(await store.readTest(first[1]?.testId ?? '')).toMatchObject({ torqueMaxNm: 90, version: 2 });
    expect(await store.readRow(first[0]?.testId ?? '')).toMatchObject({ readingCount: 2, planeAngleDeg: 46 });
  });

  test('an empty field keeps what is stored', async () => {
    const [kept] = await store.upsertLogEntries([entry({ remarks: 'seen', heat: 'H1' })]);
    const [again] = await store.upsertLogEntries([entry({ remarks: null, heat: 'H2', torqueMaxNm: null })]);
    expect(again?.outcome).toBe('updated');
    expect(await store.readTest(kept?.testId ?? '')).toMatchObject({ remarks: 'seen', heat: 'H2', torqueMaxNm: 85 });
  });

  test('two rows of one log about one test: the second changes the first, both versions stay', async () => {
    const kept = await store.upsertLogEntries([entry({ torqueMaxNm: 80 }, 44), entry({ torqueMaxNm: 81 }, 44)]);
    expect(kept.map(({ outcome, readingAdded }) => [outcome, readingAdded])).toEqual([
      ['stored', true],
      ['updated', false],
    ]);
    const { testId = '' } = kept[0] ?? {};
    expect(await store.readTest(testId)).toMatchObject({ torqueMaxNm: 81, version: 2 });
    const versions = (await store.historyOf(testId))
      .map(({ version }) => version)
      .filter((version) => version !== null);
    expect(versions).toEqual([1, 2]);
    expect(await store.countTests()).toBe(1);
  });

  test('a dry run answers the same and keeps nothing', async () => {
    await store.upsertLogEntries([entry({ specimenId: 'A' })]);
    const rows = [entry({ specimenId: 'A' }), entry({ specimenId: 'B' }, 44), entry({ specimenId: 'A', heat: 'new' })];
    const tried = await store.upsertLogEntries(rows, { dryRun: true });
    expect(tried.map(({ outcome }) => outcome)).toEqual(['unchanged', 'stored', 'updated']);
    expect(await store.countTests()).toBe(1);
    const kept = await store.upsertLogEntries(rows);
    expect(kept.map(({ outcome }) => outcome)).toEqual(['unchanged', 'stored', 'updated']);
  });

  test('a batch that fails keeps none of its rows', async () => {
    const broken = { ...entry({ specimenId: 'B' }), test: { ...testInput({ specimenId: 'B' }), specimenId: null } };
    // @ts-expect-error a row that cannot be stored
    await expect(store.upsertLogEntries([entry({ specimenId: 'A' }), broken])).rejects.toThrow();
    expect(await store.countTests()).toBe(0);
  });

  test('a thousand rows in one batch', async () => {
    const rows = Array.from({ length: 1000 }, (_, i) => entry({ specimenId: `S-${i}` }, i % 2 ? 44 : null));
    const kept = await store.upsertLogEntries(rows);
    expect(new Set(kept.map(({ testId }) => testId)).size).toBe(1000);
    expect(await store.countTests()).toBe(1000);
  });
});

describe('the list', () => {
  const many = Array.from({ length: 60 }, (_, i) => ({
    test: testInput({
      specimenId: `S-${String(i).padStart(3, '0')}`,
      testDate: i % 7 === 0 ? null : `2026-01-${String(1 + (i % 28)).padStart(2, '0')}`,
      material: i % 2 ? 'Cast iron' : 'C45E',
      heat: `H${i % 5}`,
      operator: i % 3 ? 'Ada' : 'Ben',
      remarks: i === 17 ? '100 % of the_seam \\ torn' : null,
    }),
    reading: null,
  }));

  async function idsOfAllPages(query: Parameters<LaboratoryStore['listRows']>[0]): Promise<string[]> {
    const ids: string[] = [];
    let cursor: string | null = null;
    do {
      const page: Awaited<ReturnType<LaboratoryStore['listRows']>> = await store.listRows(
        cursor === null ? query : { ...query, cursor },
      );
      ids.push(...page.tests.map((test) => test.specimenId));
      cursor = page.nextCursor;
    } while (cursor !== null);
    return ids;
  }

  test.each(['newest', 'oldest', 'changed'] as const)('pages of 7 in order "%s" hold every test once', async (sort) => {
    await store.upsertLogEntries(many);
    const ids = await idsOfAllPages({ limit: 7, sort });
    expect(new Set(ids).size).toBe(60);
    expect(ids).toHaveLength(60);
  });

  test('the newest day comes first, tests without a day come last', async () => {
    await store.upsertLogEntries(many);
    const { tests, total } = await store.listRows({ limit: 100 });
    expect(total).toBe(60);
    const days = tests.map((test) => test.testDate ?? '');
    expect(days).toEqual([...days].sort().reverse());
  });

  test('a test entered while somebody pages does not repeat or hide another one', async () => {
    await store.upsertLogEntries(many);
    const first = await store.listRows({ limit: 20 });
    await store.createTest(testInput({ specimenId: 'NEW', testDate: '2026-12-31' }));
    const { nextCursor } = first;
    if (nextCursor === null) throw new Error('there must be a second page');
    const rest = await store.listRows({ limit: 100, cursor: nextCursor });
    const seen = [...first.tests, ...rest.tests].map((test) => test.specimenId);
    expect(new Set(seen).size).toBe(60);
    expect(seen).not.toContain('NEW');
  });

  test.each([
    [{ material: 'cast IRON' }, 30],
    [{ heat: 'h3' }, 12],
    [{ operator: 'ben' }, 20],
    [{ text: 's-01' }, 10],
    [{ text: 'iron h1' }, 6],
    [{ text: 'the_seam' }, 1],
    [{ text: '100 %' }, 1],
    [{ text: '\\' }, 1],
    [{ text: '%' }, 1],
    [{ text: 'nowhere' }, 0],
    [{ section: 'solid-round' }, 60],
    [{ from: '2026-01-28' }, 2],
    [{ to: '2026-01-02' }, 3],
    [{ measured: false }, 60],
    [{ mode: 'normal-stress' }, 0],
    [{ mode: 'none' }, 60],
  ])('narrowed by %j there are %i', async (filter, count) => {
    await store.upsertLogEntries(many);
    const { total, tests } = await store.listRows({ limit: 100, ...filter });
    expect(total).toBe(count);
    expect(tests).toHaveLength(count);
  });

  test('a text that changes is found as it is now', async () => {
    const { id } = await store.createTest(testInput({ remarks: 'seam' }));
    const found = async (text: string) => (await store.listRows({ limit: 5, text })).total;
    await store.changeTest(id, 1, testInput({ remarks: 'keyway' }));
    expect([await found('seam'), await found('keyway')]).toEqual([0, 1]);
    await store.changeTest(id, 2, testInput({ remarks: 'spline' }));
    expect([await found('keyway'), await found('spline')]).toEqual([0, 1]);
  });

  test('a cursor that is none is refused', async () => {
    await expect(store.listRows({ limit: 5, cursor: 'abc' })).rejects.toMatchObject({
      code: 'invalid-request',
      input: 'cursor',
    });
  });
});

describe('the data folder', () => {
  test('is used by one process at a time, and by the next after that', async () => {
    await expect(openStore(dataDir)).rejects.toMatchObject({ code: 'busy', message: expect.stringContaining(dataDir) });
    await store.createTest(testInput());
    await store.close();
    store = await openStore(dataDir);
    expect(await store.countTests()).toBe(1);
  });

  test('a file in the place of the folder is refused', async () => {
    const path = join(dataDir, 'a-file');
    await writeFile(path, '');
    await expect(openStore(path)).rejects.toMatchObject({ code: 'invalid-request' });
  });

  test('what a crash left in "incoming" is finished where its record was written, and thrown away otherwise', async () => {
    const { id } = await store.createTest(testInput());
    const { sha256 } = await addPhoto(id, 'kept photo');
    const place = await store.photoPath(sha256);
    await store.close();
    // A file that is not in its place though its record is written.
    const bytes = await readFile(place);
    await rm(place);
    await writeFile(join(dataDir, 'incoming', `${sha256}.0a.keep`), bytes);
    // As after a crash before the record: the file is in its place, and belongs to nothing.
    const unknown = sha256Of('unknown');
    await mkdir(join(dataDir, 'photos', unknown.slice(0, 2), unknown.slice(2, 4)), { recursive: true });
    await writeFile(join(dataDir, 'photos', unknown.slice(0, 2), unknown.slice(2, 4), unknown), 'unknown');
    await writeFile(join(dataDir, 'incoming', `${unknown}.0b.keep`), 'unknown');
    await mkdir(join(dataDir, 'incoming', 'upload-1'));
    await writeFile(join(dataDir, 'incoming', 'upload-1', '0'), 'half of a pho');
    store = await openStore(dataDir);
    expect(await readFile(place, 'utf8')).toBe('kept photo');
    expect(await filesBelow(join(dataDir, 'incoming'))).toEqual([]);
    expect(await filesBelow(join(dataDir, 'photos'))).toHaveLength(1);
  });

  test('derived columns of an earlier revision of the rule are made anew', async () => {
    const { id } = await store.createTest(testInput());
    await store.addReading(reading(id, 44));
    expect(await store.renewStandings()).toBe(0);
    await store.close();
    const { default: Database } = await import('better-sqlite3');
    const raw = new Database(join(dataDir, 'laboratory.sqlite'));
    raw.exec("update tests set mode = 'mixed', assessed_with = 'old'");
    raw.close();
    store = await openStore(dataDir);
    expect(await store.readRow(id)).toMatchObject({ mode: 'normal-stress' });
  });
});

test('ids made later sort later, also within one millisecond and when the clock goes back', () => {
  const ids = [...Array.from({ length: 5000 }, () => orderedId(1_700_000_000_000)), orderedId(1_600_000_000_000)];
  expect([...ids].sort()).toEqual(ids);
  expect(new Set(ids).size).toBe(5001);
  for (const id of ids) expect(id).toMatch(/^[0-9a-f]{8}-[0-9a-f]{4}-7[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/);
});
