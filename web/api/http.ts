import { Problem, problemOfBody, unreachable } from './problem.ts';

const BASE = '/api/v1';

interface RequestOptions {
  readonly method?: 'GET' | 'POST' | 'PUT';
  readonly json?: unknown;
  readonly headers?: Readonly<Record<string, string>>;
  readonly signal?: AbortSignal;
}

/** Asks the service and returns its JSON answer. @throws Problem when it refuses or does not answer */
export async function request<Answer>(path: string, options: RequestOptions = {}): Promise<Answer> {
  const { json, headers, signal, method = 'GET' } = options;
  let response: Response;
  try {
    response = await fetch(BASE + path, {
      method,
      headers: {
        accept: 'application/json',
        ...(json === undefined ? {} : { 'content-type': 'application/json' }),
        ...headers,
      },
      ...(json === undefined ? {} : { body: JSON.stringify(json) }),
      ...(signal ? { signal } : {}),
    });
  } catch (error) {
    if (signal?.aborted) throw error;
    throw unreachable();
  }
  const body: unknown = await response.json().catch(() => null);
  if (!response.ok) throw problemOfBody(response.status, body);
  return body as Answer;
}

/** Share of a file already sent, 0 to 1; 1 means: sent, the service is at work on it. */
export type OnSent = (share: number) => void;

/** Sends files; `fetch` cannot say how far an upload is, so this one goes another way. @throws Problem */
export function sendForm<Answer>(path: string, form: FormData, onSent?: OnSent): Promise<Answer> {
  return new Promise((resolve, reject) => {
    const call = new XMLHttpRequest();
    call.open('POST', BASE + path);
    call.setRequestHeader('accept', 'application/json');
    call.upload.addEventListener('progress', (event) => {
      if (event.lengthComputable && event.total > 0) onSent?.(event.loaded / event.total);
    });
    call.upload.addEventListener('load', () => onSent?.(1));
    call.addEventListener('load', () => {
      const body = parsed(call.responseText);
      if (call.status >= 200 && call.status < 300) resolve(body as Answer);
      else reject(problemOfBody(call.status, body));
    });
    for (const failure of ['error', 'abort', 'timeout']) call.addEventListener(failure, () => reject(unreachable()));
    call.send(form);
  });
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

/** Any thrown value as a `Problem`, for showing. */
export function asProblem(error: unknown): Problem {
  if (error instanceof Problem) return error;
  return new Problem({ title: 'Something went wrong in the page.', detail: String(error), status: 0, code: 'fault' });
}
