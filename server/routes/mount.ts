import type { Express, Request, RequestHandler, Response } from 'express';
import { z, type ZodType } from 'zod';
import { AppError } from '#server/errors';
import type { Ctx, Services } from '#server/lib/context';
import { describeIssues } from '#shared/schemas/issues';
import { holds, type Actor } from '#shared/domain/roles';
import type { Route, RouteDefinition } from './route';

/** Mounts every route of the table. */
export function mountRoutes(app: Express, services: Services, table: readonly Route[]): void {
  for (const entry of table) {
    const handlers = 'raw' in entry ? entry.raw : [answer(services, entry)];
    app[entry.method](entry.path, ...handlers);
  }
}

function answer(services: Services, definition: RouteDefinition): RequestHandler {
  return async (req, res) => {
    const ctx = contextOf(services, req);
    const params = req.params as Record<string, string>;
    requireSignIn(definition, ctx.actor);
    const row = definition.load ? await definition.load({ ctx, params }) : undefined;
    requireAllowed(definition, ctx.actor, row);
    if (definition.idempotent) requireKey(req);
    if (req.bodyProblem) throw req.bodyProblem;
    const body = parse(definition.body, req.body ?? {});
    const query = parse(definition.query, req.query);
    const result = await definition.handle({ ctx, params, body, query, row, headers: req.headers, req });
    send(res, definition.status, result);
  };
}

function contextOf(services: Services, req: Request): Ctx {
  const actor = req.user ?? null;
  return { ...services, shopId: actor?.shopId ?? '', actor, ip: req.ip ?? '', now: services.clock.now() };
}

function requireSignIn(definition: RouteDefinition, actor: Actor | null): void {
  if (!('public' in definition.access) && !actor) throw new AppError('unauthenticated');
}

function requireAllowed(definition: RouteDefinition, actor: Actor | null, row: unknown): void {
  if ('roles' in definition.access && !holds(actor ?? { roles: [] }, definition.access.roles)) {
    throw new AppError('forbidden');
  }
  if (definition.allow && !definition.allow(actor, row)) throw new AppError('forbidden');
}

const Key = z.string().regex(/^[\w-]{8,255}$/);

function requireKey(req: Request): void {
  if (Key.safeParse(req.get('idempotency-key')).success) return;
  throw new AppError('invalid', {
    fields: [{ path: 'Idempotency-Key', key: 'errors.field.idempotency_key' }],
  });
}

function parse(schema: ZodType | undefined, input: unknown): unknown {
  if (!schema) return undefined;
  const result = schema.safeParse(input);
  if (result.success) return result.data;
  throw new AppError('invalid', { fields: describeIssues(result.error.issues) });
}

function send(res: Response, status: number | undefined, result: unknown): void {
  res.set('Cache-Control', 'no-store');
  if (result === undefined) res.status(204).end();
  else res.status(status ?? 200).json(result);
}
