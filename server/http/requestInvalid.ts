import { z } from 'zod';
import { type ErrorCode, LabError } from '../../src/errors.ts';
import type { FieldProblem } from './problem.ts';

type Issue = z.core.$ZodIssue;

/** A request that does not fit its schema: the first field that is wrong, and all the others. */
export class RequestInvalid extends LabError {
  readonly errors: readonly FieldProblem[];

  constructor(errors: readonly FieldProblem[]) {
    const [first] = errors;
    const code = first?.code;
    super(isCode(code) ? code : 'invalid-request', first?.message ?? 'the request does not fit', {
      ...(first && { input: first.input }),
    });
    this.name = 'RequestInvalid';
    this.errors = errors;
  }
}

const CODES: readonly ErrorCode[] = [
  'out-of-range',
  'not-a-number',
  'missing-value',
  'contradiction',
  'invalid-request',
];
const isCode = (code: string | undefined): code is ErrorCode => CODES.some((known) => known === code);

function valueAt(data: unknown, path: readonly PropertyKey[]): unknown {
  let value = data;
  for (const key of path) {
    if (typeof value !== 'object' || value === null) return undefined;
    value = Reflect.get(value, key);
  }
  return value;
}

const shown = (value: unknown): string => {
  if (value === undefined) return 'nothing';
  const text = typeof value === 'string' ? `"${value}"` : (JSON.stringify(value) ?? String(value));
  return text.length > 80 ? `${text.slice(0, 77)}…` : text;
};

/** What must hold, in words. */
function mustBe(issue: Issue): { code: ErrorCode; expectation: string } {
  switch (issue.code) {
    case 'invalid_type':
      return issue.expected === 'number' || issue.expected === 'int'
        ? { code: 'not-a-number', expectation: `must be a ${issue.expected === 'int' ? 'whole ' : ''}number` }
        : { code: 'invalid-request', expectation: `must be ${issue.expected}` };
    case 'too_small': {
      if (issue.origin === 'string') return { code: 'missing-value', expectation: 'must not be empty' };
      const what = issue.origin === 'array' ? 'must have at least' : issue.inclusive ? 'must be ≥' : 'must be >';
      return { code: 'out-of-range', expectation: `${what} ${String(issue.minimum)}` };
    }
    case 'too_big': {
      const what =
        issue.origin === 'string' || issue.origin === 'array'
          ? 'must have at most'
          : issue.inclusive
            ? 'must be ≤'
            : 'must be <';
      const unit = issue.origin === 'string' ? ' characters' : '';
      return { code: 'out-of-range', expectation: `${what} ${String(issue.maximum)}${unit}` };
    }
    case 'invalid_value':
      return { code: 'invalid-request', expectation: `must be ${issue.values.map(String).join(' or ')}` };
    case 'invalid_format':
      return {
        code: 'invalid-request',
        expectation: issue.format === 'date' ? 'must be a day, YYYY-MM-DD' : `must be of the form ${issue.format}`,
      };
    case 'custom':
      return { code: 'contradiction', expectation: issue.message };
    default:
      return { code: 'invalid-request', expectation: issue.message };
  }
}

/** Of the members of a union, the one that was meant: the one whose own discriminator fits. */
function meantMember(members: readonly (readonly Issue[])[]): readonly Issue[] {
  const fits = members.filter(
    (issues) => !issues.some((issue) => issue.code === 'invalid_value' && issue.path.length === 1),
  );
  return fits[0] ?? members[0] ?? [];
}

function fieldProblems(issue: Issue, data: unknown, where: string, base: readonly PropertyKey[]): FieldProblem[] {
  const path = [...base, ...issue.path];
  if (issue.code === 'invalid_union' && issue.errors.length > 0) {
    return meantMember(issue.errors).flatMap((inner) => fieldProblems(inner, data, where, path));
  }
  const input = path.map(String).join('.') || where;
  const value = valueAt(data, path);
  if (issue.code === 'unrecognized_keys') {
    return [{ input, code: 'invalid-request', message: `${input} must not have ${issue.keys.join(', ')}` }];
  }
  const { code, expectation } = mustBe(issue);
  if (issue.code === 'custom') return [{ input, code, message: `${expectation}, got ${shown(value)}` }];
  return [
    {
      input,
      code: value === undefined ? 'missing-value' : code,
      message: `${input} ${expectation}, got ${shown(value)}`,
    },
  ];
}

/** All issues of a failed parse as problems of fields. @param where what was parsed, e.g. `body` */
export function requestInvalid(error: z.core.$ZodError, data: unknown, where: string): RequestInvalid {
  return new RequestInvalid(error.issues.flatMap((issue) => fieldProblems(issue, data, where, [])));
}

/** Parses what a schema describes. @throws RequestInvalid */
export function parseOrRefuse<Schema extends z.ZodType>(
  schema: Schema,
  data: unknown,
  where: string,
): z.output<Schema> {
  const parsed = z.safeParse(schema, data);
  if (parsed.success) return parsed.data;
  throw requestInvalid(parsed.error, data, where);
}
