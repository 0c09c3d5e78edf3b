import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { openStore } from '../../server/store/openStore.ts';
import type { PhotoMeasurement } from '../../src/records/reading.ts';
import { zipArchive } from '../log/zipArchive.ts';
import { brokenBarPng } from '../server/drawnPhotos.ts';
import { command, shell } from './commandLine.ts';

let folder: string;
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'breakplane-cli-'));
});
afterEach(() => rm(folder, { recursive: true, force: true }));

const HEADER =
  'specimen_id,test_date,material,heat,section,diameter_mm,torque_max_Nm,torque_direction,angle_deg,angle_u_deg,photo';
const at = (name: string): string => join(folder, name);
async function writeLog(name: string, rows: readonly string[], header = HEADER): Promise<string> {
  await writeFile(at(name), [header, ...rows].join('\n'));
  return at(name);
}
const good = (id: string, photo = ''): string => `${id},2026-03-01,C45E,H1,solid-round,12,85,ccw,44,1,${photo}`;

/** 200 rows, six of them bad in six ways. */
const BAD: Readonly<Record<number, string>> = {
  15: 'S-15,2026-03-01,C45E,H1,solid-round,-3,85,ccw,44,1,',
  50: 'S-50,2026-03-01,C45E,H1,solid-round,12,eighty,ccw,44,1,',
  51: 'S-51,31.02.2026,C45E,H1,solid-round,12,85,ccw,44,1,',
  99: ',2026-03-01,C45E,H1,solid-round,12,85,ccw,44,1,',
  120: 'S-120,2026-03-01,C45E,H1,solid-round,12,85,sideways,44,1,',
  199: 'S-7,2026-03-01,C45E,H1,solid-round,12,85,ccw,44,1,',
};
const TWO_HUNDRED = Array.from({ length: 200 }, (_, i) => BAD[i] ?? good(`S-${i}`));

describe('breakplane import, as a shell runs it', () => {
  test('200 rows with six bad ones: 194 stored, six listed with line, column and reason; again: nothing changes', async () => {
    const log = await writeLog('log.csv', TWO_HUNDRED);
    const first = shell(['import', log, '--data', at('data'), '--json']);
    expect(first.status, first.stderr).toBe(3);
    expect(first.stderr).toBe('');
    expect(first.stdout.trim().split('\n')).toHaveLength(1);
    const summary = JSON.parse(first.stdout);
    expect(summary).toMatchObject({
      rows: 200,
      stored: 194,
      updated: 0,
      unchanged: 0,
      refused: 6,
      photosQueued: 0,
      photosMeasured: 0,
    });
    expect(summary.refusals.map((r: Record<string, unknown>) => [r.line, r.column, r.value, r.code])).toEqual([
      [17, 'diameter_mm', '-3', 'out-of-range'],
      [52, 'torque_max_Nm', 'eighty', 'not-a-number'],
      [53, 'test_date', '31.02.2026', 'invalid-request'],
      [101, 'specimen_id', '', 'missing-value'],
      [122, 'torque_direction', 'sideways', 'invalid-request'],
      [201, 'specimen_id', 'S-7', 'already-exists'],
    ]);
    for (const { message } of summary.refusals) expect(message).toMatch(/must|there is no day/);
    const again = JSON.parse(shell(['import', log, '--data', at('data'), '--json']).stdout);
    expect(again).toMatchObject({ rows: 200, stored: 0, updated: 0, unchanged: 194, refused: 6, readingsAdded: 0 });
  });

  test('exit status 0 when every row went in, 2 for what is no log', async () => {
    const log = await writeLog('log.csv', [good('A')]);
    expect(shell(['import', log, '--data', at('data'), '--json']).status).toBe(0);
    await writeFile(at('photo.csv'), Buffer.from([0xff, 0xd8, 0xff, 0xe0]));
    const refused = shell(['import', at('photo.csv'), '--data', at('data'), '--json']);
    expect(refused).toMatchObject({ status: 2, stdout: '' });
    expect(refused.stderr).toContain('photo.csv');
    expect(refused.stderr).toContain('a JPEG photo');
    expect(refused.stderr).not.toMatch(/\n\s+at /);
  });
});

describe('breakplane import', () => {
  test('a dry run says the same and keeps nothing, before the data folder has a test in it and after', async () => {
    const log = await writeLog('log.csv', TWO_HUNDRED);
    const dry = await command(['import', log, '--data', at('data'), '--dry-run', '--json']);
    expect(dry.status).toBe(3);
    expect(JSON.parse(dry.stdout)).toMatchObject({ rows: 200, stored: 194, refused: 6, dryRun: true });
    const records = await openStore(at('data'));
    expect((await records.listTests({ limit: 1 })).total).toBe(0);
    await records.close();
    await command(['import', log, '--data', at('data')]);
    const known = await command(['import', log, '--data', at('data'), '--dry-run', '--json']);
    expect(JSON.parse(known.stdout)).toMatchObject({ stored: 0, unchanged: 194, refused: 6 });
  });

  test('refused rows are written with their reasons, mended, and imported', async () => {
    const log = await writeLog('log.csv', TWO_HUNDRED);
    const { stdout } = await command(['import', log, '--data', at('data'), '--refused', at('refused.csv')]);
    expect(stdout).toContain('200 rows: 194 stored, 0 updated, 0 unchanged, 6 refused');
    expect(stdout).toContain('line 17, diameter_mm: diameter must be > 0');
    const refused = await readFile(at('refused.csv'), 'utf8');
    expect(refused.trim().split('\r\n')).toHaveLength(7);
    expect(refused).toContain('refused_line,refused_column,refused_code,refused_reason,specimen_id');
    const mended = refused
      .replace(',-3,', ',3,')
      .replace(',eighty,', ',80,')
      .replace(',31.02.2026,', ',2026-02-28,')
      .replace(',sideways,', ',cw,')
      .replace('S-7,2026', 'S-207,2026');
    // The empty specimen id stands first in its row, behind the reason.
    await writeFile(at('mended.csv'), mended.replace(/(got an empty cell"),,/, '$1,S-99,'));
    const { status, stdout: answer } = await command(['import', at('mended.csv'), '--data', at('data'), '--json']);
    expect(JSON.parse(answer).refusals).toEqual([]);
    expect(JSON.parse(answer)).toMatchObject({ rows: 6, stored: 6 });
    expect(status).toBe(0);
  });

  test('a changed row is an update, and what the log leaves empty stays', async () => {
    await command(['import', await writeLog('a.csv', [good('A')]), '--data', at('data')]);
    const log = await writeLog('b.csv', ['A,2026-03-01,,,solid-round,12,90,ccw,,,']);
    expect(JSON.parse((await command(['import', log, '--data', at('data'), '--json'])).stdout)).toMatchObject({
      stored: 0,
      updated: 1,
    });
    const records = await openStore(at('data'));
    const { tests } = await records.listTests({ limit: 5 });
    expect(tests).toMatchObject([{ specimenId: 'A', torqueMaxNm: 90, heat: 'H1', material: 'C45E', version: 2 }]);
    await records.close();
  });

  test('what is ambiguous is declared, not guessed', async () => {
    const log = await writeLog('log.csv', ['A;03/04/2026;1,234;44'], 'specimen_id;test_date;diameter_in;angle_deg');
    const asked = JSON.parse((await command(['import', log, '--data', at('data'), '--json'])).stdout);
    expect(asked.refusals).toMatchObject([{ line: 2, column: 'test_date' }]);
    expect(asked.refusals[0].also).toMatchObject([{ column: 'angle_u_deg', code: 'missing-value' }]);
    const declared = ['--date-order', 'dmy', '--decimal', 'comma', '--angle-u', '1.5'];
    const { status } = await command(['import', log, '--data', at('data'), ...declared]);
    expect(status).toBe(0);
    const records = await openStore(at('data'));
    const { tests } = await records.listTests({ limit: 5 });
    expect(tests[0]).toMatchObject({ testDate: '2026-04-03', geometry: { diameterMm: 1.234 * 25.4 } });
    expect(await records.readingsOf(tests[0]?.id ?? '')).toMatchObject([
      { method: 'instrument', result: { planeAngleDeg: 44, expandedUncertaintyDeg: 3, coverageFactor: 2 } },
    ]);
    await records.close();
  });

  test('photos of a folder and of an archive are kept and measured; the same import again adds nothing', async () => {
    await writeFile(at('helix.png'), await brokenBarPng({ planeAngleDeg: 42, seed: 5 }));
    await writeFile(
      at('photos.zip'),
      zipArchive([{ name: 'b.png', bytes: await brokenBarPng({ planeAngleDeg: 40, seed: 6 }) }]),
    );
    const a = await writeLog('a.csv', [good('A', 'helix.png')]);
    const b = await writeLog('b.csv', [good('B', 'b.png')]);
    const data = ['--data', at('data'), '--json'];
    const first = JSON.parse((await command(['import', a, '--photos', folder, ...data])).stdout);
    expect(first).toMatchObject({ stored: 1, photosQueued: 1, photosMeasured: 1, photoProblems: [] });
    const second = JSON.parse((await command(['import', b, '--photos', at('photos.zip'), ...data])).stdout);
    expect(second).toMatchObject({ stored: 1, photosQueued: 1, photosMeasured: 1 });
    const again = JSON.parse((await command(['import', b, '--photos', at('photos.zip'), ...data])).stdout);
    expect(again).toMatchObject({ unchanged: 1, photosQueued: 0, photosMeasured: 0, readingsAdded: 0 });
  });

  test('a progress bar stands on a terminal only, and never in the result', async () => {
    await writeFile(at('one.png'), await brokenBarPng({ seed: 1 }));
    await writeFile(at('two.png'), await brokenBarPng({ seed: 2 }));
    const log = await writeLog('log.csv', [good('A', 'one.png'), good('B', 'two.png')]);
    const args = ['import', log, '--photos', folder, '--json', '--data'];
    // How the photos turn out does not matter here.
    const measure = async (): Promise<PhotoMeasurement> => ({
      outcome: 'not-measured',
      reason: { code: 'too-small', message: 'not looked at' },
      sha256: '',
      elapsedMs: 0,
      warnings: [],
    });
    const piped = await command([...args, at('d1')], { measure });
    expect(piped.stderr).toBe('');
    const seen = await command([...args, at('d2')], { measure, terminal: true });
    expect(seen.stderr).toMatch(/[█░].*2 photos/);
    expect(() => JSON.parse(seen.stdout)).not.toThrow();
  });

  test.each([
    ['a log that is not there', ['import', 'nowhere.csv'], /nowhere\.csv.*no such file/],
    ['photos that are not there', ['import', 'LOG', '--photos', 'nowhere'], /nowhere/],
    ['an unknown order of dates', ['import', 'LOG', '--date-order', 'myd'], /dmy or mdy or ymd, got "myd"/],
    ['an uncertainty that is no number', ['import', 'LOG', '--angle-u', 'small'], /--angle-u must be a number/],
    ['an option that does not exist', ['import', 'LOG', '--foto', 'x'], /unknown option '--foto'/],
    ['no log', ['import'], /missing required argument/],
  ])('%s is wrong usage: status 2, the reason, nothing on standard output', async (_what, args, words) => {
    const log = await writeLog('log.csv', [good('A')]);
    const answer = await command([...args.map((a) => (a === 'LOG' ? log : a)), '--data', at('data')]);
    expect(answer).toMatchObject({ status: 2, stdout: '' });
    expect(answer.stderr).toMatch(words);
  });
});
