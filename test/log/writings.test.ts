import { stringify } from 'csv-stringify/sync';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { recogniseHeader } from '../../src/log/columns.ts';
import { type DateOrder, parseLogDate } from '../../src/log/dates.ts';
import { type DecimalMark, decimalMarkOf, parseLogNumber } from '../../src/log/decimal.ts';
import { inspectLog } from '../../src/log/node/inspectLog.ts';
import { logFromBytes } from '../../src/log/node/logSource.ts';
import { readRows } from '../../src/log/node/readRows.ts';
import { directionOfWord, torqueWithDirection } from '../../src/log/torqueDirection.ts';

describe('headers', () => {
  test.each([
    ['specimen_id', 'specimen_id', null],
    ['Proben-Nr.', 'specimen_id', null],
    ['  ÉPROUVETTE ', 'specimen_id', null],
    ['试样编号', 'specimen_id', null],
    ['試験片番号', 'specimen_id', null],
    ['Prüfdatum', 'test_date', null],
    ["Date d'essai", 'test_date', null],
    ['Werkstoff', 'material', null],
    ['Charge', 'heat', null],
    ['diameter_mm', 'diameter_mm', 'mm'],
    ['diameter_in', 'diameter_mm', 'in'],
    ['Diameter [in]', 'diameter_mm', 'in'],
    ['Außendurchmesser (mm)', 'diameter_mm', 'mm'],
    ['Ø, mm', 'diameter_mm', 'mm'],
    ['średnica [mm]', 'diameter_mm', 'mm'],
    ['Torque (N·m)', 'torque_max_Nm', 'N·m'],
    ['max. torque / lbf·in', 'torque_max_Nm', 'lbf·in'],
    ['Drehmoment in Nm', 'torque_max_Nm', 'N·m'],
    ['couple max (kN·m)', 'torque_max_Nm', 'kN·m'],
    ['Verdrehwinkel [°]', 'twist_fracture_deg', 'deg'],
    ['Number of turns', 'twist_fracture_deg', 'turns'],
    ['Axialkraft (kN)', 'axial_force_N', 'kN'],
    ['Fracture angle (deg)', 'angle_deg', 'deg'],
    ['standard uncertainty of angle', 'angle_u_deg', 'deg'],
    ['Bilddatei', 'photo', null],
    ['备注', 'remarks', null],
  ])('"%s" is %s in %s', (header, column, unit) => {
    expect(recogniseHeader(header)).toMatchObject({ column, ...(unit === null ? {} : { unit }) });
  });

  test.each(['angle uncertainty', 'foo', '', 'torque plan', 'colour'])('"%s" means nothing here', (header) => {
    expect(recogniseHeader(header)).toBeNull();
  });

  test('a unit that is not one of the quantity is refused, not passed over', () => {
    expect(() => recogniseHeader('Torque (MPa)')).toThrow(expect.objectContaining({ code: 'unknown-unit' }));
    expect(() => recogniseHeader('Diameter (parsec)')).toThrow(expect.objectContaining({ code: 'unknown-unit' }));
  });
});

describe('numbers', () => {
  test.each<[string, DecimalMark, number | 'not-a-number' | 'two-readings']>([
    ['12.5', 'point', 12.5],
    ['12,5', 'comma', 12.5],
    // A mark that can only be one thing is that thing, whatever the log's habit.
    ['12,5', 'point', 12.5],
    ['12.5', 'comma', 12.5],
    ['1.234', 'comma', 1234],
    ['1.234', 'point', 1.234],
    ['1,234', 'point', 1234],
    ['1,234', 'comma', 1.234],
    ['1,234', 'mixed', 'two-readings'],
    ['1.234', 'mixed', 'two-readings'],
    ['0,125', 'mixed', 0.125],
    ['1.234.567,8', 'comma', 1234567.8],
    ['1,234,567.8', 'point', 1234567.8],
    ['1 234 567,8', 'comma', 1234567.8],
    ["1'234.5", 'point', 1234.5],
    ['1\u202f234,5', 'comma', 1234.5],
    ['−3', 'point', -3],
    ['–3', 'point', -3],
    ['+3', 'point', 3],
    ['.5', 'point', 0.5],
    ['5.', 'point', 5],
    ['1e3', 'point', 1000],
    ['1.5E-3', 'point', 0.0015],
    ['1,2,3', 'comma', 'not-a-number'],
    ['1.2.3', 'point', 'not-a-number'],
    ['12 5', 'point', 'not-a-number'],
    ['twelve', 'point', 'not-a-number'],
    ['NaN', 'point', 'not-a-number'],
    ['Infinity', 'point', 'not-a-number'],
    ['1e999', 'point', 'not-a-number'],
    ['0x10', 'point', 'not-a-number'],
    ['--3', 'point', 'not-a-number'],
    ['', 'point', 'not-a-number'],
  ])('%j in a log with decimal %s is %s', (text, mark, expected) => {
    const read = parseLogNumber(text, mark);
    if (typeof expected === 'number') expect(read).toEqual({ ok: true, value: expected });
    else expect(read).toEqual({ ok: false, why: expected });
  });

  test('any number written with either mark is read back', () => {
    fc.assert(
      fc.property(fc.double({ min: -1e6, max: 1e6, noNaN: true }), (value) => {
        const text = value.toFixed(4);
        expect(parseLogNumber(text, 'point')).toEqual({ ok: true, value: Number(text) + 0 });
        expect(parseLogNumber(text.replace('.', ','), 'comma')).toEqual({ ok: true, value: Number(text) + 0 });
      }),
    );
  });

  test.each<[string[], string, DecimalMark]>([
    [['12.5', '3'], ',', 'point'],
    [['12,5', '3'], ';', 'comma'],
    [['12', '3'], ';', 'comma'],
    [['12', '3'], ',', 'point'],
    [['12.5', '3,25'], '\t', 'mixed'],
    [['1.234', '1,5'], ';', 'comma'],
  ])('the cells %j parted by %j have decimal %s', (cells, delimiter, mark) => {
    expect(decimalMarkOf(cells, delimiter)).toBe(mark);
  });
});

describe('dates', () => {
  test.each<[string, DateOrder, string | null]>([
    ['2026-03-04', 'unknown', '2026-03-04'],
    ['2026/3/4', 'unknown', '2026-03-04'],
    ['20260304', 'unknown', '2026-03-04'],
    ['2026-03-04T13:45:00Z', 'unknown', '2026-03-04'],
    ['2026-03-04 1:45 PM', 'unknown', '2026-03-04'],
    ['2026年3月4日', 'unknown', '2026-03-04'],
    ['25/03/2026', 'unknown', '2026-03-25'],
    ['03/25/2026', 'unknown', '2026-03-25'],
    ['04/04/2026', 'unknown', '2026-04-04'],
    ['03/04/2026', 'unknown', null],
    ['03/04/2026', 'dmy', '2026-04-03'],
    ['03/04/2026', 'mdy', '2026-03-04'],
    ['03/04/2026', 'ymd', null],
    ['4 March 2026', 'unknown', '2026-03-04'],
    ['4. März 2026', 'unknown', '2026-03-04'],
    ['4 de marzo de 2026', 'unknown', '2026-03-04'],
    ['March 4th, 2026', 'unknown', '2026-03-04'],
    ['4 août 2026', 'unknown', '2026-08-04'],
    ['2026-02-29', 'unknown', null],
    ['2024-02-29', 'unknown', '2024-02-29'],
    ['31.04.2026', 'dmy', null],
    ['25/03/26', 'dmy', null],
    ['46085', 'unknown', null],
    ['yesterday', 'unknown', null],
    ['1776-07-04', 'unknown', null],
  ])('%s with order %s is %s', (text, order, expected) => {
    const read = parseLogDate(text, order);
    if (expected === null) expect(read).toMatchObject({ ok: false, why: expect.stringMatching(/.{10}/) });
    else expect(read).toEqual({ ok: true, isoDate: expected });
  });
});

describe('direction of the torque', () => {
  test.each([
    ['ccw', 'ccw'],
    ['Counter-clockwise', 'ccw'],
    ['gegen den Uhrzeigersinn', 'ccw'],
    ['CW', 'cw'],
    ['sens horaire', 'cw'],
    ['im Uhrzeigersinn', 'cw'],
    ['逆时针', 'ccw'],
    ['left', null],
    ['', null],
  ])('"%s" is %s', (word, direction) => {
    expect(directionOfWord(word)).toBe(direction);
  });

  test('a negative torque is clockwise; against a stated ccw it is refused', () => {
    expect(torqueWithDirection(-85, null, 'T')).toEqual({ torqueMaxNm: 85, torqueDirection: 'cw' });
    expect(torqueWithDirection(-85, 'cw', 'T')).toEqual({ torqueMaxNm: 85, torqueDirection: 'cw' });
    expect(torqueWithDirection(85, null, 'T')).toEqual({ torqueMaxNm: 85, torqueDirection: null });
    expect(() => torqueWithDirection(-85, 'ccw', 'T')).toThrow(expect.objectContaining({ code: 'contradiction' }));
  });
});

/** Cells of every row, as the import sees them. */
async function cellsOf(bytes: Uint8Array, pieceBytes = bytes.length || 1): Promise<string[][]> {
  const source = {
    ...logFromBytes(bytes, 'log.csv'),
    async *open() {
      for (let at = 0; at < bytes.length; at += pieceBytes) yield bytes.subarray(at, at + pieceBytes);
    },
  };
  const rows: string[][] = [];
  for await (const batch of readRows(source, await inspectLog(source))) {
    for (const row of batch) if (row.raw !== '') rows.push([...(row.cells ?? ['unreadable'])]);
  }
  return rows;
}

describe('rows', () => {
  const HEADERS = ['specimen_id', 'diameter_mm', 'remarks'];
  const text = fc
    .string({ unit: fc.constantFrom(...'ab1 ,;"\n\té€.漢'), maxLength: 12 })
    // Spaces before a cell are dropped, by the convention of the reader.
    .map((t) => t.replace(/^[ \t\n]+/, '').replace(/\n{2,}/g, '\n'));

  test.each([',', ';', '\t', '|'])('any cells written with %j are read back as they were', async (delimiter) => {
    await fc.assert(
      fc.asyncProperty(
        fc.array(fc.tuple(fc.constant('S'), fc.constant('10'), text), { minLength: 1, maxLength: 6 }),
        fc.constantFrom('\n', '\r\n'),
        fc.integer({ min: 1, max: 9 }),
        async (rows, recordDelimiter, pieceBytes) => {
          const csv = stringify([HEADERS, ...rows], { delimiter, record_delimiter: recordDelimiter, quoted: true });
          expect(await cellsOf(new TextEncoder().encode(csv), pieceBytes)).toEqual(rows);
        },
      ),
      { numRuns: 150 },
    );
  });

  const log = 'specimen_id;diameter_mm;remarks\r\nS-1;10;„Prüfling“ – 5 €\r\n';
  const row = [['S-1', '10', '„Prüfling“ – 5 €']];
  const utf16be = Buffer.from(`\uFEFF${log}`, 'utf16le').swap16();
  const windows1252 = Buffer.from(
    [...log].map((c) => ({ '„': 0x84, '“': 0x93, '–': 0x96, '€': 0x80 })[c] ?? c.charCodeAt(0)),
  );

  test.each([
    ['UTF-8', Buffer.from(log)],
    ['UTF-8 with a byte-order mark', Buffer.from(`\uFEFF${log}`)],
    ['UTF-16 LE with a byte-order mark', Buffer.from(`\uFEFF${log}`, 'utf16le')],
    ['UTF-16 BE with a byte-order mark', utf16be],
    ['UTF-16 LE without one', Buffer.from(log, 'utf16le')],
    ['UTF-16 BE without one', utf16be.subarray(2)],
    ['Windows-1252', windows1252],
  ])('a log in %s, cut anywhere on its way', async (_name, bytes) => {
    for (const pieceBytes of [1, 2, 3, 7, bytes.length]) expect(await cellsOf(bytes, pieceBytes)).toEqual(row);
  });

  test.each([
    ['carriage returns alone', 'specimen_id,diameter_mm\rS-1,10\rS-2,11\r'],
    ['CRLF', 'specimen_id,diameter_mm\r\nS-1,10\r\nS-2,11\r\n'],
    ['no line break at the end', 'specimen_id,diameter_mm\nS-1,10\nS-2,11'],
    ['blank lines between', '\n\nspecimen_id,diameter_mm\n\nS-1,10\n\nS-2,11\n\n'],
    ['a separator declared as spreadsheets do', 'sep=,\nspecimen_id,diameter_mm\nS-1,10\nS-2,11\n'],
    ['title lines above the header', 'Torsion log of March\nby bench 1\nspecimen_id,diameter_mm\nS-1,10\nS-2,11\n'],
  ])('%s', async (_name, csv) => {
    expect(await cellsOf(new TextEncoder().encode(csv))).toEqual([
      ['S-1', '10'],
      ['S-2', '11'],
    ]);
  });
});
