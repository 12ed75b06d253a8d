/** The one place where HTTP becomes values and errors. No Vue here. */
import { ERROR_CODES, type ErrorAnswer, type ErrorCode, type FieldProblem } from '#shared/errors';
import { setServerNow } from '@/lib/clock';

/** What the server, or the way to it, said instead of an answer. `code` leads into the catalogue `errors.*`. */
export class ApiError extends Error {
  readonly code: ErrorCode;
  readonly status: number;
  readonly fields: FieldProblem[];
  readonly details: unknown;
  readonly requestId: string;

  constructor(status: number, error: ErrorAnswer['error'], cause?: unknown) {
    super(error.message, { cause });
    this.name = 'ApiError';
    this.code = error.code;
    this.status = status;
    this.fields = error.fields ?? [];
    this.details = error.details;
    this.requestId = error.requestId;
  }
}

/** The typed details of an error with that code; null for everything else. */
export function detailsOf<Details extends object>(error: unknown, code: ErrorCode): Partial<Details> | null {
  if (!(error instanceof ApiError) || error.code !== code) return null;
  return error.details ?? {};
}

/** Told when the server no longer knows the session, wherever that is noticed. */
let whenSignedOut: () => void = () => undefined;
export function onSignedOut(tell: () => void): void {
  whenSignedOut = tell;
}

export interface CallOptions {
  body?: unknown;
  /** Idempotency-Key: the same for every try of one intent, so that a retry never acts twice. */
  key?: string;
  signal?: AbortSignal;
  query?: Record<string, string | number>;
}

/**
 * Calls the server.
 * @throws ApiError for every answer that is not a success, and with code `unavailable` when none came
 */
export async function call<Answer>(
  method: 'GET' | 'POST',
  path: string,
  options: CallOptions = {},
): Promise<Answer> {
  const response = await send(method, path, options);
  const answer = await readJson(response);
  if (!response.ok) {
    const error = errorOf(response.status, answer);
    if (error.code === 'unauthenticated') whenSignedOut();
    throw error;
  }
  syncClock(answer);
  return answer as Answer;
}

async function send(method: string, path: string, options: CallOptions): Promise<Response> {
  const headers: Record<string, string> = { Accept: 'application/json' };
  if (options.body !== undefined) headers['Content-Type'] = 'application/json';
  if (options.key) headers['Idempotency-Key'] = options.key;
  try {
    return await fetch(path + queryOf(options.query), {
      method,
      headers,
      body: options.body === undefined ? undefined : JSON.stringify(options.body),
      credentials: 'same-origin',
      signal: options.signal,
    });
  } catch (cause) {
    if (options.signal?.aborted) throw cause;
    throw unavailable(0, cause);
  }
}

function queryOf(query: CallOptions['query']): string {
  if (!query) return '';
  const pairs = Object.entries(query).map(([name, value]) => [name, String(value)]);
  return `?${new URLSearchParams(pairs).toString()}`;
}

async function readJson(response: Response): Promise<unknown> {
  const text = await response.text();
  try {
    return text === '' ? null : JSON.parse(text);
  } catch {
    return null;
  }
}

function errorOf(status: number, answer: unknown): ApiError {
  const error = (answer as Partial<ErrorAnswer> | null)?.error;
  if (error && ERROR_CODES.includes(error.code)) return new ApiError(status, error);
  return unavailable(status);
}

/** A proxy's page, a dropped line: nothing that our server said. */
function unavailable(status: number, cause?: unknown): ApiError {
  return new ApiError(status, { code: 'unavailable', message: 'No answer', requestId: '' }, cause);
}

function syncClock(answer: unknown): void {
  const at = (answer as { now?: unknown } | null)?.now;
  if (typeof at === 'string') setServerNow(at);
}
