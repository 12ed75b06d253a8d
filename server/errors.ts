import type { ErrorCode, FieldProblem } from '#shared/errors';

const STATUS: Record<ErrorCode, number> = {
  unauthenticated: 401,
  not_found: 404,
  forbidden: 403,
  invalid: 400,
  moved_meanwhile: 409,
  move_refused: 409,
  too_late: 409,
  times_full: 409,
  machine_already_booked: 409,
  machine_has_open_job: 409,
  code_wrong: 400,
  code_expired: 400,
  which_person: 409,
  sign_in_failed: 401,
  opted_out: 409,
  too_many: 429,
  key_reused: 422,
  link_ended: 410,
  cross_site: 403,
  unavailable: 503,
  internal: 500,
};

export type FieldIssue = Omit<FieldProblem, 'message'>;

interface AppErrorOptions {
  fields?: FieldIssue[];
  details?: unknown;
  /** Seconds after which another try makes sense. */
  retryAfter?: number;
  cause?: unknown;
}

/** An error with an answer for the person: a stable code, and what the words need. Everything else is a fault of ours. */
export class AppError extends Error {
  readonly status: number;
  readonly fields: FieldIssue[] | undefined;
  readonly details: unknown;
  readonly retryAfter: number | undefined;

  constructor(
    readonly code: ErrorCode,
    options: AppErrorOptions = {},
  ) {
    super(code, { cause: options.cause });
    this.name = 'AppError';
    this.status = STATUS[code];
    this.fields = options.fields;
    this.details = options.details;
    this.retryAfter = options.retryAfter;
  }
}

/** An `invalid` error about one field. */
export function fieldError(path: string, key: string, params?: Record<string, string | number>): AppError {
  return new AppError('invalid', { fields: [{ path, key, ...(params ? { params } : {}) }] });
}
