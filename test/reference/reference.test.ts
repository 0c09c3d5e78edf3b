import { readdirSync, readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import { afterAll, describe, expect, test } from 'vitest';
import { EXPECTED_UNITS } from './expectedUnits.ts';
import { plainNumber, readInputs } from './inputs.ts';
import { MECHANICS_QUANTITIES } from './mechanicsQuantities.ts';
import { QUANTITIES as PLANE_QUANTITIES } from './quantities.ts';

interface Row {
  readonly id: string;
  readonly quantity: string;
  readonly inputs: string;
  readonly expected: string;
  readonly unit: string;
  readonly tolerance: string;
  readonly kind: string;
  readonly source: string;
}
const QUANTITIES = { ...PLANE_QUANTITIES, ...MECHANICS_QUANTITIES };
const KINDS = ['published', 'memory', 'library', 'formula'] as const;

const folder = new URL('.', import.meta.url);
const tables = readdirSync(folder)
  .filter((name) => name.endsWith('.csv'))
  .map((name) => ({
    name,
    rows: parse(readFileSync(new URL(name, folder)), { columns: true, comment: '#', comment_no_infix: true }) as Row[],
  }));
const all = tables.flatMap((table) => table.rows);
const passed: Record<string, number> = {};

describe.each(tables)('$name', ({ rows }) => {
  test.each(rows)('$id $quantity ($inputs) = $expected $unit', (row) => {
    const unit = EXPECTED_UNITS[row.unit];
    const quantity = QUANTITIES[row.quantity];
    if (unit === undefined || quantity === undefined) throw new Error(`unknown unit or quantity in row ${row.id}`);
    const expected = plainNumber(row.expected, 'expected');
    const size = plainNumber(row.tolerance.replace('%', ''), 'tolerance');
    const tolerance = row.tolerance.endsWith('%') ? (Math.abs(expected) * size) / 100 : size;
    expect(row.source.length, 'source').toBeGreaterThan(5);
    expect(KINDS).toContain(row.kind);
    expect(tolerance).toBeGreaterThan(0);
    const got = quantity(readInputs(row.inputs)) / unit;
    expect(Math.abs(got - expected), `got ${got} ${row.unit}, ${row.source} has ${expected}`).toBeLessThanOrEqual(
      tolerance * (1 + 1e-9),
    );
    passed[row.kind] = (passed[row.kind] ?? 0) + 1;
  });
});

test('every row has its own id', () => {
  expect(new Set(all.map((row) => row.id)).size).toBe(all.length);
});

test('there are at least 120 rows, 20 of them against reference libraries', () => {
  expect(all.length).toBeGreaterThanOrEqual(120);
  expect(all.filter((row) => row.kind === 'library').length).toBeGreaterThanOrEqual(20);
});

afterAll(() => {
  const counts = KINDS.map((kind) => `${passed[kind] ?? 0} ${kind}`).join(', ');
  process.stdout.write(
    `reference checks passed: ${Object.values(passed).reduce((a, b) => a + b, 0)} of ${all.length} (${counts})\n`,
  );
});
