/**
 * The registry of refusals: the only place where codes are born.
 *
 * Three kinds of "no" are never mixed: a photo that does not allow a measurement is a
 * returned value (`outcome: 'not-measured'`), a wrong request is a `LabError` from this
 * registry (HTTP 4xx, exit status 2), anything else thrown is a fault of the program
 * (HTTP 500, exit status 70).
 */
export const ERRORS = {
  'out-of-range': { status: 422, fix: 'Give a value inside the stated range.' },
  'not-a-number': { status: 422, fix: 'Give a plain number with its unit.' },
  'unknown-unit': { status: 422, fix: 'Use one of the units listed in the message.' },
  'missing-value': { status: 422, fix: 'Fill in the value.' },
  contradiction: { status: 422, fix: 'Two values exclude each other; correct one of them.' },
  'invalid-request': { status: 422, fix: 'Correct the fields named in the message.' },
  'not-found': { status: 404, fix: 'Check the identifier; the record may have another one.' },
  'already-exists': { status: 409, fix: 'Open the existing record, or change the specimen id or test date.' },
  'changed-meanwhile': { status: 409, fix: 'Reload the record and make the change again.' },
  'not-a-photo': { status: 415, fix: 'Send a JPEG, PNG, WebP, TIFF or HEIC photo.' },
  'too-large': { status: 413, fix: 'Send a smaller file.' },
  'not-a-log': { status: 422, fix: 'Give a CSV file with a header row; see the canonical headers.' },
  'foreign-host': { status: 421, fix: 'Open the page under the address the service printed.' },
  'foreign-origin': { status: 403, fix: 'Open the page under the address the service printed.' },
  'not-loopback': { status: 400, fix: 'Serve on 127.0.0.1, ::1 or localhost; there are no accounts yet.' },
  usage: { status: 400, fix: 'See --help.' },
  busy: { status: 503, fix: 'Try again in a moment.' },
} as const;

export type ErrorCode = keyof typeof ERRORS;

/** A wrong request: names the input, the value that came, what was expected and what to do. */
export class LabError extends Error {
  readonly code: ErrorCode;
  /** Which input was wrong, e.g. `diameterMm`. */
  readonly input: string | undefined;
  /** The value that came, as it came. */
  readonly value: unknown;

  constructor(code: ErrorCode, message: string, where: { readonly input?: string; readonly value?: unknown } = {}) {
    super(message);
    this.name = 'LabError';
    this.code = code;
    this.input = where.input;
    this.value = where.value;
  }

  /** What the user can do about it. */
  get fix(): string {
    return ERRORS[this.code].fix;
  }

  get status(): number {
    return ERRORS[this.code].status;
  }
}
