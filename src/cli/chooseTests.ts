import { LabError } from '../errors.ts';
import type { LaboratoryRecords } from '../records/laboratoryRecords.ts';
import type { Test } from '../records/test.ts';

/** What narrows the tests a command works on. */
export interface TestChoice {
  /** Specimen ids or record ids. */
  readonly test?: readonly string[];
  /** `material=…`, `heat=…` or `text=…`. */
  readonly where?: string;
}

type Narrowing = { readonly text?: string; readonly material?: string; readonly heat?: string };

const PAGE = 200;

/** Every test that fits, page by page: no more than a page is held here. */
export async function* testsWhere(records: LaboratoryRecords, query: Narrowing): AsyncGenerator<Test> {
  let cursor: string | null = null;
  do {
    const page: { tests: Test[]; nextCursor: string | null } = await records.listTests({
      limit: PAGE,
      ...query,
      ...(cursor !== null && { cursor }),
    });
    yield* page.tests;
    cursor = page.nextCursor;
  } while (cursor !== null);
}

async function* testsNamed(records: LaboratoryRecords, name: string): AsyncGenerator<Test> {
  let found = false;
  for await (const test of testsWhere(records, { text: name })) {
    if (test.specimenId !== name && test.id !== name) continue;
    found = true;
    yield test;
  }
  if (found) return;
  try {
    yield await records.readTest(name);
  } catch (error) {
    if (!(error instanceof LabError)) throw error;
    throw new LabError('not-found', `--test must be a specimen id or the id of a test, got "${name}"`, {
      input: '--test',
      value: name,
    });
  }
}

/** `heat=G-117` → a narrowing of the list. @throws LabError `usage` */
function narrowingOf(where: string | undefined): Narrowing {
  if (where === undefined) return {};
  const at = where.indexOf('=');
  const field = where.slice(0, at).trim();
  const value = where.slice(at + 1).trim();
  if (at < 1 || value === '' || (field !== 'material' && field !== 'heat' && field !== 'text')) {
    throw new LabError('usage', `--where must be material=…, heat=… or text=…, got "${where}"`, {
      input: '--where',
      value: where,
    });
  }
  return { [field]: value };
}

/** The tests a command line asks for; all of them without `--test` and `--where`. @throws LabError `usage`, `not-found` */
export async function* chosenTests(records: LaboratoryRecords, choice: TestChoice): AsyncGenerator<Test> {
  if (choice.test === undefined || choice.test.length === 0) {
    yield* testsWhere(records, narrowingOf(choice.where));
    return;
  }
  if (choice.where !== undefined) {
    throw new LabError('usage', '--test and --where cannot be used together, got both', { input: '--where' });
  }
  for (const name of choice.test) yield* testsNamed(records, name);
}

/** The refusal of a choice that nothing fits. */
export const noTestFits = (choice: TestChoice): LabError =>
  new LabError('not-found', 'no test fits what was asked for', { input: '--where', value: choice.where });
