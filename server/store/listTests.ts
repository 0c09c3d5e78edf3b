import { type ExpressionBuilder, type Kysely, type SqlBool, sql } from 'kysely';
import { LabError } from '../../src/errors.ts';
import type { ListQuery } from '../../src/records/laboratoryRecords.ts';
import type { Test } from '../../src/records/test.ts';
import { foldText, testOf } from './documents.ts';
import type { StoreSchema, TestRecord } from './schema.ts';
import type { Standing } from './standing.ts';

type Db = Kysely<StoreSchema>;

export const SORT_ORDERS = ['newest', 'oldest', 'changed'] as const;
export type SortOrder = (typeof SORT_ORDERS)[number];

/** What a list may be narrowed by; all of it together. */
export interface TestFilter extends ListQuery {
  readonly mode?: string;
  /** true: only tests with something odd; false: only those without. */
  readonly flagged?: boolean;
  readonly operator?: string;
  readonly section?: string;
  /** Days, YYYY-MM-DD, both included. */
  readonly from?: string;
  readonly to?: string;
  readonly angleFromDeg?: number;
  readonly angleToDeg?: number;
  /** true: tests with a plane angle; false: tests without. */
  readonly measured?: boolean;
  readonly sort?: SortOrder;
}

/** A test in the list, with what its readings say. */
export type TestRow = Test & Standing & { readonly photoCount: number; readonly readingCount: number };

export interface TestPage {
  readonly tests: TestRow[];
  readonly nextCursor: string | null;
  readonly total: number;
}

export const rowOf = (record: TestRecord): TestRow => ({
  ...testOf(record),
  mode: record.mode as Standing['mode'],
  probability: record.probability,
  planeAngleDeg: record.plane_angle_deg,
  expandedUncertaintyDeg: record.expanded_uncertainty_deg,
  photoCount: record.photo_count,
  readingCount: record.reading_count,
  flags: JSON.parse(record.flags),
});

const escapeLike = (text: string): string => text.replace(/[\\%_]/g, (c) => `\\${c}`);

type Builder = ExpressionBuilder<StoreSchema, 'tests'>;

/** The words of a search, at most eight: each must occur. */
const wordsOf = (text: string): string[] => foldText(text).split(/\s+/).filter(Boolean).slice(0, 8);

function conditions(e: Builder, query: TestFilter) {
  const all = wordsOf(query.text ?? '').map(
    (word) => sql<SqlBool>`${e.ref('search_text')} like ${`%${escapeLike(word)}%`} escape '\\'`,
  );
  const list = [
    query.material === undefined ? null : e('material_key', '=', foldText(query.material)),
    query.heat === undefined ? null : e('heat_key', '=', foldText(query.heat)),
    query.operator === undefined ? null : e('operator_key', '=', foldText(query.operator)),
    query.section === undefined ? null : e('section', '=', query.section),
    query.mode === undefined ? null : query.mode === 'none' ? e('mode', 'is', null) : e('mode', '=', query.mode),
    query.flagged === undefined ? null : e('flag_count', query.flagged ? '>' : '=', 0),
    query.measured === undefined ? null : e('plane_angle_deg', query.measured ? 'is not' : 'is', null),
    query.from === undefined ? null : e('sort_date', '>=', query.from),
    query.to === undefined ? null : e.and([e('sort_date', '<=', query.to), e('sort_date', '!=', '')]),
    query.angleFromDeg === undefined ? null : e('plane_angle_deg', '>=', query.angleFromDeg),
    query.angleToDeg === undefined ? null : e('plane_angle_deg', '<=', query.angleToDeg),
  ];
  return e.and([...all, ...list.filter((condition) => condition !== null)]);
}

interface Cursor {
  readonly sort: SortOrder;
  readonly key: string;
  readonly id: string;
}

const cursorText = (cursor: Cursor): string => Buffer.from(JSON.stringify(cursor)).toString('base64url');

function cursorOf(text: string, sort: SortOrder): Cursor {
  try {
    const found: unknown = JSON.parse(Buffer.from(text, 'base64url').toString('utf8'));
    if (typeof found === 'object' && found !== null && 'key' in found && 'id' in found && 'sort' in found) {
      const { key, id, sort: of } = found;
      if (typeof key === 'string' && typeof id === 'string' && of === sort) return { sort, key, id };
    }
  } catch {
    // Falls through: a cursor is only ever one this service gave.
  }
  throw new LabError('invalid-request', `cursor must be the nextCursor of the page before, got "${text}"`, {
    input: 'cursor',
    value: text,
  });
}

/** One page of tests. The order is that of day (or of change), then of entry; a test without a day counts as the oldest. */
export async function listTestRows(db: Db, query: TestFilter): Promise<TestPage> {
  const sort = query.sort ?? 'newest';
  const column = sort === 'changed' ? 'updated_at' : 'sort_date';
  const direction = sort === 'oldest' ? 'asc' : 'desc';
  const after = query.cursor === undefined ? null : cursorOf(query.cursor, sort);
  const beyond = direction === 'asc' ? '>' : '<';
  let page = db
    .selectFrom('tests')
    .selectAll()
    .where((e) => conditions(e, query))
    .orderBy(column, direction)
    .orderBy('id', direction)
    .limit(query.limit + 1);
  if (after) {
    page = page.where(
      (e) => sql<SqlBool>`(${e.ref(column)}, ${e.ref('id')}) ${sql.raw(beyond)} (${after.key}, ${after.id})`,
    );
  }
  const records = await page.execute();
  const { total } = await db
    .selectFrom('tests')
    .select((e) => e.fn.countAll().as('total'))
    .where((e) => conditions(e, query))
    .executeTakeFirstOrThrow();
  const shown = records.slice(0, query.limit);
  const last = shown.at(-1);
  return {
    tests: shown.map(rowOf),
    nextCursor: last && records.length > query.limit ? cursorText({ sort, key: last[column], id: last.id }) : null,
    total: Number(total),
  };
}
