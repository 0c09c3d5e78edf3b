import { mkdir, mkdtemp, readdir, readFile, rm, symlink, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import sharp from 'sharp';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { openStore } from '../../server/store/openStore.ts';
import { photoFinder } from '../../src/log/matchPhoto.ts';
import { importLog } from '../../src/log/node/importLog.ts';
import { logFromBytes } from '../../src/log/node/logSource.ts';
import { openPhotoSource } from '../../src/log/node/openPhotoSource.ts';
import { specimenFinder } from '../../src/log/photosBySpecimen.ts';
import { type ZipEntry, zipArchive } from './zipArchive.ts';

let folder: string;
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'breakplane-photos-'));
});
afterEach(() => rm(folder, { recursive: true, force: true }));

/** A small picture; each grey is another photo. */
const picture = (grey: number): Promise<Buffer> =>
  sharp({ create: { width: 40, height: 30, channels: 3, background: { r: grey, g: grey, b: grey } } })
    .png()
    .toBuffer();

async function archive(entries: readonly ZipEntry[]): Promise<string> {
  const path = join(folder, 'photos.zip');
  await writeFile(path, zipArchive(entries));
  return path;
}

/** Imports rows with photos from a path; nothing is measured. */
async function importWith(rows: readonly string[], photos: string, dryRun = false) {
  const records = await openStore(join(folder, 'data'));
  const source = await openPhotoSource(photos);
  try {
    const log = ['specimen_id,test_date,diameter_mm,photo', ...rows].join('\n');
    const summary = await importLog({
      source: logFromBytes(new TextEncoder().encode(log), 'log.csv'),
      photos: source,
      records,
      pool: null,
      dryRun,
      temporaryDir: folder,
    });
    const { tests } = await records.listTests({ limit: 100 });
    const photosOf = Object.fromEntries(
      await Promise.all(
        tests.map(async (t) => [t.specimenId, (await records.photosOf(t.id)).map((p) => p.fileName).sort()] as const),
      ),
    );
    return { summary, photosOf };
  } finally {
    source.close();
    await records.close();
  }
}

describe('photos named in the log', () => {
  test('are found by path, name, or name without extension, in any case, in sub-folders too', async () => {
    const photos = join(folder, 'photos');
    await mkdir(join(photos, 'march'), { recursive: true });
    await writeFile(join(photos, 'march', 'One.PNG'), await picture(10));
    await writeFile(join(photos, 'two.png'), await picture(20));
    await writeFile(join(photos, 'three.png'), await picture(30));
    const { summary, photosOf } = await importWith(
      [
        'A,2026-01-01,10,march\\one.png',
        'B,2026-01-01,10,./TWO.png',
        'C,2026-01-01,10,three;two.png',
        'D,2026-01-01,10,four.png',
      ],
      photos,
    );
    expect(summary).toMatchObject({ stored: 4, photosQueued: 4, photosMeasured: 0 });
    expect(photosOf).toEqual({ A: ['One.PNG'], B: ['two.png'], C: ['three.png', 'two.png'], D: [] });
    expect(summary.photoProblems).toMatchObject([{ line: 5, specimenId: 'D', photo: 'four.png', code: 'not-found' }]);
  });

  test('the same import again adds no photo', async () => {
    const path = await archive([{ name: 'a.png', bytes: await picture(10) }]);
    expect((await importWith(['A,2026-01-01,10,a.png'], path)).summary.photosQueued).toBe(1);
    expect((await importWith(['A,2026-01-01,10,a.png'], path)).summary).toMatchObject({
      unchanged: 1,
      photosQueued: 0,
    });
  });

  test('two photos of one name are never chosen between; a path tells them apart', async () => {
    const path = await archive([
      { name: 'left/a.png', bytes: await picture(10) },
      { name: 'right/a.png', bytes: await picture(20) },
    ]);
    const { summary, photosOf } = await importWith(['A,2026-01-01,10,a.png', 'B,2026-01-01,10,right/a.png'], path);
    expect(summary.photoProblems).toMatchObject([{ line: 2, message: expect.stringContaining('several') }]);
    expect(photosOf).toEqual({ A: [], B: ['a.png'] });
  });

  test('what is no picture is refused by name; its row and the other photos go in', async () => {
    const path = await archive([
      { name: 'a.jpg', bytes: Buffer.from('not a picture at all') },
      { name: 'b.jpg', bytes: new Uint8Array(0) },
      { name: 'c.png', bytes: await picture(40) },
    ]);
    const { summary, photosOf } = await importWith(
      ['A,2026-01-01,10,a.jpg', 'B,2026-01-01,10,b.jpg', 'C,2026-01-01,10,c.png'],
      path,
    );
    expect(summary).toMatchObject({ stored: 3, photosQueued: 1 });
    expect(summary.photoProblems.map((p) => [p.photo, p.code])).toEqual([
      ['a.jpg', 'not-a-photo'],
      ['b.jpg', 'not-a-photo'],
    ]);
    expect(photosOf.C).toEqual(['c.png']);
  });

  test('links are not followed out of the folder, hidden files are passed over', async () => {
    const photos = join(folder, 'photos');
    await mkdir(photos);
    await writeFile(join(folder, 'secret.png'), await picture(1));
    await symlink(join(folder, 'secret.png'), join(photos, 'link.png'));
    await symlink(folder, join(photos, 'up'));
    await writeFile(join(photos, '.hidden.png'), await picture(2));
    await writeFile(join(photos, 'seen.png'), await picture(3));
    const source = await openPhotoSource(photos);
    expect(source.files.map((f) => f.innerPath)).toEqual(['seen.png']);
  });
});

describe('photos that no row names', () => {
  test('are matched by the specimen id in their file name, as whole words, the longest id first', async () => {
    const path = await archive(
      await Promise.all(
        ['GI-1 front.png', 'x_gi-12_b.png', 'GI 12.png', 'GI-123.png', 'holiday.png'].map(async (name, i) => ({
          name,
          bytes: await picture(10 * i),
        })),
      ),
    );
    const { summary, photosOf } = await importWith(['GI-1,2026-01-01,10,', 'GI-12,2026-01-01,10,'], path);
    expect(photosOf).toEqual({ 'GI-1': ['GI-1 front.png'], 'GI-12': ['GI 12.png', 'x_gi-12_b.png'] });
    expect(summary.notes.join(' ')).toContain('3 photos were matched by the specimen id');
  });

  test('a photo that one row names is not given to another', async () => {
    const path = await archive([{ name: 'A-2.png', bytes: await picture(10) }]);
    const { photosOf } = await importWith(['A-1,2026-01-01,10,A-2.png', 'A-2,2026-01-01,10,'], path);
    expect(photosOf).toEqual({ 'A-1': ['A-2.png'], 'A-2': [] });
  });

  test('a specimen tested on two days, or two ids in one name: nothing is chosen', () => {
    const find = specimenFinder([
      { specimenId: 'A-1', day: 1 },
      { specimenId: 'A-1', day: 2 },
      { specimenId: 'B-7', day: 1 },
      { specimenId: 'C-9', day: 1 },
      { specimenId: '…', day: 1 },
    ]);
    const of = (fileName: string) => find({ fileName, innerPath: fileName });
    expect(of('A-1.jpg')).toEqual({ found: null, why: 'several' });
    expect(of('B-7 and C-9.jpg')).toEqual({ found: null, why: 'several' });
    expect(of('B_7.jpg')).toMatchObject({ found: { specimenId: 'B-7' } });
    expect(of('B-71.jpg')).toEqual({ found: null, why: 'none' });
    expect(of('.jpg')).toEqual({ found: null, why: 'none' });
  });

  test('a dry run says how many would be matched and keeps nothing', async () => {
    const path = await archive([{ name: 'A-1.png', bytes: await picture(10) }]);
    const { summary } = await importWith(['A-1,2026-01-01,10,'], path, true);
    expect(summary.notes.join(' ')).toContain('One photo was matched');
    expect(summary).toMatchObject({ photosQueued: 0, dryRun: true });
  });
});

describe('archives that mean harm', () => {
  const outside = ['../evil.png', 'a/../../evil.png', '/etc/evil.png', 'C:\\evil.png', '..\\evil.png', 'ok/\0evil.png'];

  test.each(outside)('an entry named %j stays out, the others go in, nothing is written beside', async (name) => {
    const before = await readdir(folder);
    const path = await archive([
      { name, bytes: await picture(10) },
      { name: 'A-1.png', bytes: await picture(20) },
    ]);
    const { summary, photosOf } = await importWith(['A-1,2026-01-01,10,', 'evil,2026-01-01,10,evil.png'], path);
    expect(photosOf['A-1']).toEqual(['A-1.png']);
    expect(photosOf.evil).toEqual([]);
    expect(summary.notes.join(' ')).toMatch(/left out: its name leads out of the archive/);
    expect((await readdir(folder)).sort()).toEqual([...before, 'data', 'photos.zip'].sort());
    await expect(readFile(join(folder, '..', 'evil.png'))).rejects.toThrow();
  });

  test('a bomb is refused before it is unpacked', async () => {
    const path = await archive([
      { name: 'A-1.png', bytes: new Uint8Array(64 * 1024 * 1024), deflate: true },
      { name: 'B-1.png', bytes: await picture(20) },
    ]);
    const { summary, photosOf } = await importWith(['A-1,2026-01-01,10,A-1.png', 'B-1,2026-01-01,10,B-1.png'], path);
    expect(summary.notes.join(' ')).toMatch(/"A-1\.png" was left out: it would grow \d+-fold/);
    expect(summary.photoProblems).toMatchObject([{ photo: 'A-1.png', code: 'not-found' }]);
    expect(photosOf['B-1']).toEqual(['B-1.png']);
  });

  test('an entry that claims to be larger than any photo is refused', async () => {
    const path = await archive([
      { name: 'A-1.png', bytes: await picture(10), deflate: true, claimedBytes: 0xfffffff0 },
    ]);
    const { summary } = await importWith(['A-1,2026-01-01,10,A-1.png'], path);
    expect(summary.notes.join(' ')).toMatch(/would unpack to 4294967280 bytes/);
  });

  test.each([
    ['stored with a size that is not its own', { claimedBytes: 1_000_000 }],
    ['with a wrong checksum', { claimedCrc: 12345 }],
    ['packed, shorter than it claims', { deflate: true, claimedBytes: 10_000 }],
  ])('an entry %s costs itself only', async (_what, change) => {
    const path = await archive([
      { name: 'A-1.png', bytes: await picture(10), ...change },
      { name: 'B-1.png', bytes: await picture(20) },
    ]);
    const { summary, photosOf } = await importWith(['A-1,2026-01-01,10,A-1.png', 'B-1,2026-01-01,10,B-1.png'], path);
    expect(summary.photoProblems).toMatchObject([{ photo: 'A-1.png', code: 'not-a-photo' }]);
    expect(photosOf).toEqual({ 'A-1': [], 'B-1': ['B-1.png'] });
  });

  test('an entry that lies about its size is refused while it is unpacked', async () => {
    const path = await archive([
      { name: 'A-1.png', bytes: new Uint8Array(5 * 1024 * 1024).fill(7), deflate: true, claimedBytes: 100_000 },
      { name: 'B-1.png', bytes: await picture(20) },
    ]);
    const { summary, photosOf } = await importWith(['A-1,2026-01-01,10,A-1.png', 'B-1,2026-01-01,10,B-1.png'], path);
    expect(summary.photoProblems).toMatchObject([{ photo: 'A-1.png', code: 'not-a-photo' }]);
    expect(photosOf).toEqual({ 'A-1': [], 'B-1': ['B-1.png'] });
  });

  test.each([
    ['is encrypted', { flags: 0x0801 }, 'encrypted'],
    ['is packed in an unknown way', { method: 99 }, 'packing'],
  ])('an entry that %s is left out by name', async (_what, change, words) => {
    const path = await archive([{ name: 'A-1.png', bytes: await picture(10), deflate: true, ...change }]);
    const { summary } = await importWith(['A-1,2026-01-01,10,A-1.png'], path);
    expect(summary.notes.join(' ')).toContain(words);
    expect(summary).toMatchObject({ stored: 1, photosQueued: 0 });
  });

  test('20,000 entries: the one that is named is found', async () => {
    const png = await picture(10);
    const path = await archive(
      Array.from({ length: 20_000 }, (_, i) => ({
        name: `photos/P-${i}.png`,
        bytes: i === 12_345 ? png : Buffer.from([i & 255]),
      })),
    );
    const { summary, photosOf } = await importWith(['A-1,2026-01-01,10,p-12345.png'], path);
    expect(summary).toMatchObject({ photosQueued: 1, photoProblems: [] });
    expect(photosOf).toEqual({ 'A-1': ['P-12345.png'] });
  });

  test.each([
    ['a text file', Buffer.from('specimen_id\n')],
    ['an empty file', Buffer.alloc(0)],
    ['half an archive', zipArchive([{ name: 'a.png', bytes: new Uint8Array(5000) }]).subarray(0, 2000)],
  ])('%s is no archive, and says so', async (_what, bytes) => {
    const path = join(folder, 'photos.zip');
    await writeFile(path, bytes);
    await expect(openPhotoSource(path)).rejects.toMatchObject({
      code: 'invalid-request',
      message: expect.stringContaining('photos.zip'),
    });
  });

  test('a path that is not there says so', async () => {
    await expect(openPhotoSource(join(folder, 'nowhere'))).rejects.toMatchObject({ code: 'invalid-request' });
  });
});

test('the finder prefers the path, then the name, then the name without extension', () => {
  const find = photoFinder([
    { fileName: 'a.jpg', innerPath: 'x/a.jpg' },
    { fileName: 'a.png', innerPath: 'y/a.png' },
    { fileName: 'É.jpg', innerPath: 'É.jpg' },
  ]);
  expect(find('x/a.jpg').found?.innerPath).toBe('x/a.jpg');
  expect(find('other/a.png').found?.innerPath).toBe('y/a.png');
  expect(find('a')).toEqual({ found: null, why: 'several' });
  // The same letter written as two code points, as some systems store file names.
  expect(find('e\u0301.JPG').found?.innerPath).toBe('É.jpg');
});
