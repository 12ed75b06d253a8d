/**
 * The codes by which server and client speak of what went wrong. The words for people are in the catalogues
 * under `errors.<code>`.
 */
export const ERROR_CODES = [
  'unauthenticated',
  'not_found',
  'forbidden',
  'invalid',
  'moved_meanwhile',
  'move_refused',
  'too_late',
  'times_full',
  'machine_already_booked',
  'machine_has_open_job',
  'code_wrong',
  'code_expired',
  'which_person',
  'sign_in_failed',
  'opted_out',
  'too_many',
  'key_reused',
  'link_ended',
  'cross_site',
  'unavailable',
  'internal',
] as const;
export type ErrorCode = (typeof ERROR_CODES)[number];

/** One thing wrong with one field. `key` and `params` lead into the catalogues; `message` is in the reader's language. */
export interface FieldProblem {
  /** Dotted path into the body: `machines.0.words`. */
  path: string;
  key: string;
  params?: Record<string, string | number>;
  message: string;
}

/** Every answer that is not a success has this body. */
export interface ErrorAnswer {
  error: {
    code: ErrorCode;
    message: string;
    fields?: FieldProblem[];
    /** Typed by code: see the schemas of the routes that give it. */
    details?: unknown;
    requestId: string;
  };
}
