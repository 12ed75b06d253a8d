import type { ErrorRequestHandler, RequestHandler } from 'express';
import { AppError } from '#server/errors';
import { maskSecrets } from '#server/lib/logger';
import { languageOf } from '#server/lib/language';
import { translate } from '#server/lib/translate';
import type { Services } from '#server/lib/context';
import type { ErrorAnswer } from '#shared/errors';
import type { Language } from '#shared/domain/when';

/** The database is away, or all connections are in use for longer than anybody waits: it is worth another try. */
const OUT_OF_REACH = new Set([
  'SequelizeConnectionAcquireTimeoutError',
  'SequelizeConnectionError',
  'SequelizeConnectionRefusedError',
]);

/** What the body parser and Express itself throw, as errors of ours. */
function known(error: unknown): AppError | null {
  if (error instanceof AppError) return error;
  const { status, name } = error as { status?: number; name?: string };
  if (OUT_OF_REACH.has(name ?? '')) return new AppError('unavailable', { retryAfter: 5, cause: error });
  if (status === 413) {
    return new AppError('invalid', { fields: [{ path: '', key: 'errors.field.too_large' }], cause: error });
  }
  if (status !== undefined && status >= 400 && status < 500) {
    return new AppError('invalid', { fields: [{ path: '', key: 'errors.field.unreadable' }], cause: error });
  }
  return null;
}

/** The one error handler: known errors get their answer, unknown ones are logged whole and answered blandly. */
export function answerErrors({ log }: Services): ErrorRequestHandler {
  // Express knows an error handler by its four parameters.
  return (error: unknown, req, res, next) => {
    const found = known(error);
    const answer = found ?? new AppError('internal');
    if (answer.status >= 500) {
      log.error({ err: error, path: maskSecrets(req.path), requestId: req.id }, 'request failed');
    }
    if (res.headersSent) return next(error);
    if (answer.retryAfter) res.set('Retry-After', String(answer.retryAfter));
    res.set('Cache-Control', 'no-store');
    res.status(answer.status).json(errorAnswer(answer, languageOf(req), req.id));
  };
}

/** The body of an answer that is not a success, in the reader's language. */
export function errorAnswer(error: AppError, language: Language, requestId: string): ErrorAnswer {
  const fields = error.fields?.map((field) => ({
    ...field,
    message: translate(language, field.key, field.params),
  }));
  return {
    error: {
      code: error.code,
      message: translate(language, `errors.${error.code}`),
      ...(fields ? { fields } : {}),
      ...(error.details === undefined ? {} : { details: error.details }),
      requestId,
    },
  };
}

/** An API address that no route has. */
export const unknownAddress: RequestHandler = () => {
  throw new AppError('not_found');
};
