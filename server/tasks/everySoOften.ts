import type { Logger } from 'pino';

/**
 * Does something again and again, never twice at once; a failure is logged and the next round comes anyway.
 * @returns ends it, after the round that is under way
 */
export function everySoOften(
  ms: number,
  what: string,
  log: Logger,
  act: () => Promise<unknown>,
): () => Promise<void> {
  let isOver = false;
  let timer: NodeJS.Timeout | undefined;
  let round: Promise<void> = Promise.resolve();
  const next = (): void => {
    round = act()
      .then(() => undefined)
      .catch((error: unknown) => log.error({ err: error }, `${what} failed`))
      .finally(() => {
        if (!isOver) timer = setTimeout(next, ms);
      });
  };
  next();
  return async () => {
    isOver = true;
    clearTimeout(timer);
    await round;
  };
}
