/** Generated logs with exactly known faults: the counts an import must give are known before it runs. */

export const GENERATED_HEADER =
  'specimen_id,test_date,material,heat,section,diameter_mm,bore_mm,torque_max_Nm,torque_direction,angle_deg,angle_u_deg,operator,remarks';

interface Row {
  id: string;
  date: string;
  section: string;
  diameter: string;
  bore: string;
  torque: string;
  direction: string;
  angle: string;
  uncertainty: string;
  remarks: string;
}

/** Twelve ways for a row to be bad, each with the column it is refused at. */
export const FAULTS: readonly { readonly column: string | null; readonly spoil: (row: Row) => Partial<Row> }[] = [
  { column: 'diameter_mm', spoil: () => ({ diameter: '-12' }) },
  { column: 'diameter_mm', spoil: () => ({ diameter: 'twelve' }) },
  { column: 'diameter_mm', spoil: () => ({ diameter: '' }) },
  { column: 'bore_mm', spoil: () => ({ section: 'tube', bore: '12' }) },
  { column: 'section', spoil: () => ({ section: 'pentagon' }) },
  { column: 'torque_max_Nm', spoil: () => ({ torque: '0' }) },
  { column: 'torque_direction', spoil: () => ({ direction: 'sideways' }) },
  { column: 'test_date', spoil: () => ({ date: '03/04/2026' }) },
  { column: 'angle_u_deg', spoil: () => ({ angle: '44', uncertainty: '' }) },
  { column: 'angle_deg', spoil: () => ({ angle: '500', uncertainty: '1' }) },
  { column: 'specimen_id', spoil: () => ({ id: '' }) },
  { column: null, spoil: () => ({ remarks: 'one cell, too many' }) },
];

/** One row in fifty is bad, the twelve faults in turn. */
export const isBad = (i: number): boolean => i % 50 === 25;
export const faultOf = (i: number) => FAULTS[Math.floor(i / 50) % FAULTS.length] as (typeof FAULTS)[number];
export const badRows = (rows: number): number => Math.floor((rows + 24) / 50);

const MATERIALS = ['C45E', 'EN-GJL-250', 'AlMgSi1'];
const day = (i: number): string =>
  new Date(Date.UTC(2010, 0, 1) + Math.floor(i / 20) * 86_400_000).toISOString().slice(0, 10);

/** The i-th row of a generated log. @param torqueAdded N·m added to every torque: another state of the same log */
export function generatedRow(i: number, torqueAdded = 0): string {
  const sound: Row = {
    id: `S-${i}`,
    date: day(i),
    section: 'solid round',
    diameter: '12.0',
    bore: '',
    torque: String(85 + (i % 20) + torqueAdded),
    direction: i % 3 === 0 ? 'cw' : 'ccw',
    angle: i % 2 === 0 ? '' : String(40 + (i % 9)),
    uncertainty: i % 2 === 0 ? '' : '1',
    remarks: i % 11 === 0 ? '"said ""hard"", twice"' : '',
  };
  const row = isBad(i) ? { ...sound, ...faultOf(i).spoil(sound) } : sound;
  return [
    ...[row.id, row.date, MATERIALS[i % 3], `H${i % 97}`, row.section, row.diameter, row.bore],
    ...[row.torque, row.direction, row.angle, row.uncertainty, `Operator ${i % 5}`, row.remarks],
  ].join(',');
}

/** The bytes of a generated log, some rows at a time, so that the log itself takes no memory. */
export async function* generatedLog(rows: number, torqueAdded = 0): AsyncGenerator<Uint8Array> {
  const encoder = new TextEncoder();
  yield encoder.encode(`${GENERATED_HEADER}\n`);
  for (let from = 0; from < rows; from += 1000) {
    const count = Math.min(1000, rows - from);
    yield encoder.encode(Array.from({ length: count }, (_, k) => `${generatedRow(from + k, torqueAdded)}\n`).join(''));
  }
}
