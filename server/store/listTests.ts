import { type Expression, type ExpressionBuilder, type Kysely, type SqlBool, sql } from 'kysely';
import { LabError } from '../../src/errors.ts';
import type { ListQuery } from '../../src/records/laboratoryRecords.ts';
import type { Test } from '../../src/records/test.ts';
import { foldText, testOf } from './documents.ts';
import { isSqlite } from './migrations.ts';
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
  /** true: tests somebody has looked at as they stand now; false: the others. */
  readonly reviewed?: boolean;
  /** true: tests with a plane angle; false: tests without. */
  readonly measured?: boolean;
  readonly sort?: SortOrder;
}

/** A test in the list, with what its readings say. */
export type TestRow = Test &
  Standing & { readonly photoCount: number; readonly readingCount: number; readonly reviewed: boolean };

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
  reviewed: record.reviewed === 1,
  flags: JSON.parse(record.flags),
});

const escapeLike = (text: string): string => text.replace(/[\\%_]/g, (c) => `\\${c}`);

type Builder = ExpressionBuilder<StoreSchema, 'tests'>;

/** Shorter words are not in the text index. */
const SHORTEST_INDEXED = 3;
/** Up to this many matches are sorted here; more lie so close together in the order of the list that its index finds them. */
const FEW = 2000;

/** The words of a search, at most eight: each must occur. */
const wordsOf = (text: string): string[] => foldText(text).split(/\s+/).filter(Boolean).slice(0, 8);

/** Conditions of the text: by the text index where there is one and it is wanted, else by comparing. */
function textConditions(e: Builder, words: readonly string[], indexed: boolean): Expression<SqlBool>[] {
  const inIndex = indexed ? words.filter((word) => [...word].length >= SHORTEST_INDEXED) : [];
  const compared = words
    .filter((word) => !inIndex.includes(word))
    .map((word) => sql<SqlBool>`${e.ref('search_text')} like ${`%${escapeLike(word)}%`} escape '\\'`);
  if (inIndex.length === 0) return compared;
  const phrase = inIndex.map((word) => `"${word.replaceAll('"', '""')}"`).join(' AND ');
  return [sql<SqlBool>`tests.rowid in (select rowid from tests_text where tests_text match ${phrase})`, ...compared];
}

/**
 * @param indexed true: every condition may use its own index; false: the index of the order is to be followed. The plus
 * sign keeps a number from choosing an index of its own, whose matches would all have to be sorted.
 */
function conditions(e: Builder, query: TestFilter, indexed: boolean) {
  const number = (column: 'plane_angle_deg' | 'flag_count') =>
    indexed ? e.ref(column) : sql<number | null>`+${e.ref(column)}`;
  const list = [
    query.material === undefined ? null : e('material_key', '=', foldText(query.material)),
    query.heat === undefined ? null : e('heat_key', '=', foldText(query.heat)),
    query.operator === undefined ? null : e('operator_key', '=', foldText(query.operator)),
    query.section === undefined ? null : e('section', '=', query.section),
    query.mode === undefined ? null : query.mode === 'none' ? e('mode', 'is', null) : e('mode', '=', query.mode),
    query.flagged === undefined ? null : e(number('flag_count'), query.flagged ? '>' : '=', 0),
    query.reviewed === undefined ? null : e('reviewed', '=', query.reviewed ? 1 : 0),
    query.measured === undefined ? null : e(number('plane_angle_deg'), query.measured ? 'is not' : 'is', null),
    query.from === undefined ? null : e('sort_date', '>=', query.from),
    query.to === undefined ? null : e.and([e('sort_date', '<=', query.to), e('sort_date', '!=', '')]),
    query.angleFromDeg === undefined ? null : e(number('plane_angle_deg'), '>=', query.angleFromDeg),
    query.angleToDeg === undefined ? null : e(number('plane_angle_deg'), '<=', query.angleToDeg),
  ];
  const text = textConditions(e, wordsOf(query.text ?? ''), indexed);
  return e.and([...text, ...list.filter((condition) => condition !== null)]);
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

type SortColumn = 'updated_at' | 'sort_date';

interface Order {
  readonly sort: SortOrder;
  readonly column: SortColumn;
  readonly direction: 'asc' | 'desc';
}

function orderOf(sort: SortOrder): Order {
  return {
    sort,
    column: sort === 'changed' ? 'updated_at' : 'sort_date',
    direction: sort === 'oldest' ? 'asc' : 'desc',
  };
}

/** Few matches: all their keys are read, put in order here, and only the page is read whole. */
async function pageOfFew(db: Db, query: TestFilter, order: Order, after: Cursor | null): Promise<TestRecord[]> {
  const { column, direction } = order;
  const keys = await db
    .selectFrom('tests')
    .select(['id', column])
    .where((e) => conditions(e, query, isSqlite(db)))
    .execute();
  const sign = direction === 'asc' ? 1 : -1;
  const compare = (a: { key: string; id: string }, b: { key: string; id: string }): number =>
    sign * (a.key < b.key ? -1 : a.key > b.key ? 1 : a.id < b.id ? -1 : a.id > b.id ? 1 : 0);
  const ids = keys
    .map((row) => ({ key: row[column], id: row.id }))
    .filter((row) => after === null || compare(row, after) > 0)
    .sort(compare)
    .slice(0, query.limit + 1)
    .map((row) => row.id);
  if (ids.length === 0) return [];
  const records = await db.selectFrom('tests').selectAll().where('id', 'in', ids).execute();
  const byId = new Map(records.map((record) => [record.id, record]));
  return ids.flatMap((id) => byId.get(id) ?? []);
}

/** Many matches: the index of the order is followed until the page is full. */
async function pageOfMany(db: Db, query: TestFilter, order: Order, after: Cursor | null): Promise<TestRecord[]> {
  const { column, direction } = order;
  let page = db
    .selectFrom('tests')
    .selectAll()
    .where((e) => conditions(e, query, false))
    .orderBy(column, direction)
    .orderBy('id', direction)
    .limit(query.limit + 1);
  if (after) {
    const beyond = sql.raw(direction === 'asc' ? '>' : '<');
    page = page.where((e) => sql<SqlBool>`(${e.ref(column)}, ${e.ref('id')}) ${beyond} (${after.key}, ${after.id})`);
  }
  return page.execute();
}

async function countTests(db: Db, query: TestFilter): Promise<number> {
  const { total } = await db
    .selectFrom('tests')
    .select((e) => e.fn.countAll().as('total'))
    .where((e) => conditions(e, query, isSqlite(db)))
    .executeTakeFirstOrThrow();
  return Number(total);
}

/** One page of tests. The order is that of day (or of change), then of entry; a test without a day counts as the oldest. */
export async function listTestRows(db: Db, query: TestFilter): Promise<TestPage> {
  const order = orderOf(query.sort ?? 'newest');
  const after = query.cursor === undefined ? null : cursorOf(query.cursor, order.sort);
  const total = await countTests(db, query);
  const records = await (total <= FEW ? pageOfFew : pageOfMany)(db, query, order, after);
  const shown = records.slice(0, query.limit);
  const last = shown.at(-1);
  return {
    tests: shown.map(rowOf),
    nextCursor:
      last && records.length > query.limit
        ? cursorText({ sort: order.sort, key: last[order.column], id: last.id })
        : null,
    total,
  };
}
