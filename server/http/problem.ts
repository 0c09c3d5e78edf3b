import { STATUS_CODES } from 'node:http';
import { z } from 'zod';
import { ERRORS, type ErrorCode, type LabError } from '../../src/errors.ts';

/** One field of a request that is wrong. */
export const FieldProblem = z.object({
  input: z.string().describe('which field, e.g. geometry.diameterMm'),
  code: z.string(),
  message: z.string(),
});
export type FieldProblem = z.infer<typeof FieldProblem>;

/** Problem details as in RFC 9457, with what a laboratory needs beside them. */
export const ProblemDetails = z
  .object({
    type: z.string().describe('identifies the kind of problem'),
    title: z.string(),
    status: z.number().int(),
    detail: z.string().describe('what must hold, then what came'),
    instance: z.string().optional().describe('the request this is about'),
    code: z.string(),
    input: z.string().optional(),
    fix: z.string().describe('what to do about it'),
    errors: z.array(FieldProblem).optional(),
  })
  .meta({ id: 'ProblemDetails' });
export type ProblemDetails = z.infer<typeof ProblemDetails>;

const TITLES: Readonly<Record<ErrorCode, string>> = {
  'out-of-range': 'A value is out of range.',
  'not-a-number': 'A value is not a number.',
  'unknown-unit': 'A unit is not known.',
  'missing-value': 'A value is missing.',
  contradiction: 'Two values contradict each other.',
  'invalid-request': 'The request cannot be understood.',
  'not-found': 'There is no such record.',
  'already-exists': 'The record is already there.',
  'changed-meanwhile': 'Somebody else changed the record meanwhile.',
  'not-a-photo': 'The file is not a photo.',
  'too-large': 'The file is too large.',
  'not-a-log': 'The file is not a test log.',
  'foreign-host': 'The service is not meant for this address.',
  'foreign-origin': 'Another page must not use this service.',
  'not-loopback': 'The service stays on this machine.',
  usage: 'The request cannot be understood.',
  busy: 'The service is busy.',
};

const typeOf = (code: string): string => `urn:breakplane:problem:${code}`;

export function problemOfLabError(error: LabError, errors?: readonly FieldProblem[]): ProblemDetails {
  return {
    type: typeOf(error.code),
    title: TITLES[error.code],
    status: ERRORS[error.code].status,
    detail: error.message,
    code: error.code,
    ...(error.input !== undefined && { input: error.input }),
    fix: error.fix,
    ...(errors && errors.length > 0 && { errors: [...errors] }),
  };
}

const PLAIN: Readonly<Record<number, { code: string; fix: string }>> = {
  400: { code: 'bad-request', fix: 'Correct the request; openapi.json describes it.' },
  404: { code: 'no-such-address', fix: 'Check the address; openapi.json lists all of them.' },
  405: { code: 'method-not-allowed', fix: 'Use one of the methods in the Allow header.' },
  408: { code: 'timeout', fix: 'Send the request again.' },
  413: { code: 'too-large', fix: 'Send less at once.' },
  415: { code: 'unsupported-media-type', fix: 'Send the media type that openapi.json states.' },
};

/** A refusal that HTTP itself knows, without a code of the laboratory. */
export function problemOfStatus(status: number, detail: string): ProblemDetails {
  const { code, fix } = PLAIN[status] ?? { code: `http-${status}`, fix: 'Correct the request.' };
  return { type: typeOf(code), title: `${STATUS_CODES[status] ?? 'Refused'}.`, status, detail, code, fix };
}

/** A fault of the program: nothing of its inside is shown, the id leads to the line in the log. */
export function problemOfFault(requestId: string): ProblemDetails {
  return {
    type: typeOf('fault'),
    title: 'Something went wrong in the service.',
    status: 500,
    detail: `The service could not do this; nothing was stored half. Its log tells more under "${requestId}".`,
    code: 'fault',
    fix: 'Try again; if it happens again, report it with the id.',
  };
}
