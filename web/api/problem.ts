/** A refusal of the service, RFC 9457 problem details, or a failure to reach it. */
export class Problem extends Error {
  readonly title: string;
  readonly status: number;
  readonly code: string;
  /** Which input was wrong, e.g. `geometry.diameterMm`. */
  readonly input: string | undefined;
  readonly fix: string | undefined;

  constructor(fields: {
    readonly title: string;
    readonly detail?: string | undefined;
    readonly status: number;
    readonly code: string;
    readonly input?: string | undefined;
    readonly fix?: string | undefined;
  }) {
    super(fields.detail ?? fields.title);
    this.name = 'Problem';
    this.title = fields.title;
    this.status = fields.status;
    this.code = fields.code;
    this.input = fields.input;
    this.fix = fields.fix;
  }
}

const textOf = (value: unknown): string | undefined => (typeof value === 'string' && value !== '' ? value : undefined);

/** Turns the body of a refused request into a `Problem`; a body that is no problem document still gives one. */
export function problemOfBody(status: number, body: unknown): Problem {
  const fields: Record<string, unknown> = typeof body === 'object' && body !== null ? { ...body } : {};
  return new Problem({
    status,
    title: textOf(fields.title) ?? `The service answered ${status}.`,
    detail: textOf(fields.detail),
    code: textOf(fields.code) ?? `http-${status}`,
    input: textOf(fields.input),
    fix: textOf(fields.fix),
  });
}

export const unreachable = (): Problem =>
  new Problem({
    status: 0,
    title: 'The service does not answer.',
    detail: 'The service does not answer. What you typed is still here.',
    code: 'unreachable',
    fix: 'Check that Breakplane is still running, then try again.',
  });
