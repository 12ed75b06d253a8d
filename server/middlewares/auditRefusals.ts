import type { ErrorRequestHandler } from 'express';
import { AppError } from '#server/errors';
import { audit } from '#server/lib/audit';
import type { Services } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { maskSecrets } from '#server/lib/logger';

/** Records in the shop's own log that somebody signed in tried what is not theirs to do. */
export function auditRefusals({ clock, log }: Services): ErrorRequestHandler {
  return (error: unknown, req, _res, next) => {
    const actor = req.user;
    if (!(error instanceof AppError) || error.code !== 'forbidden' || !actor) return next(error);
    const { shopId, personId } = actor;
    const details = { method: req.method, path: maskSecrets(req.originalUrl) };
    withShop(shopId, () =>
      audit({ shopId, now: clock.now(), ip: req.ip ?? '' }, 'refused', { personId, details }),
    )
      .catch((problem: unknown) => log.error({ err: problem }, 'a refusal could not be recorded'))
      .finally(() => next(error));
  };
}
