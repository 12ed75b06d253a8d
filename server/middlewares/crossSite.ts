/**
 * Requests that change something must come from our own pages. The browser says where a request comes from in
 * `Sec-Fetch-Site`; where it does not (plain http on the shop's network, old browsers), in `Origin`. A request that
 * carries neither does not come from a page and is refused. As a body counts JSON alone, which no form of another
 * site can send.
 */
import type { Request, RequestHandler } from 'express';
import { AppError } from '#server/errors';
import type { Env } from '#server/env';

const SAFE_METHODS = new Set(['GET', 'HEAD', 'OPTIONS']);
/** Doors with a proof of their own (a signature, the token itself), and reports, which browsers send unasked. */
const EXEMPT = [/^\/hooks\//, /^\/u\/[^/]+$/, /^\/api\/csp-reports$/];

/** Refuses what another site makes a browser send. */
export function refuseCrossSite(env: Pick<Env, 'PUBLIC_URL'>): RequestHandler {
  const publicOrigin = new URL(env.PUBLIC_URL).origin;
  return (req, _res, next) => {
    if (SAFE_METHODS.has(req.method) || EXEMPT.some((path) => path.test(req.path))) return next();
    if (!isOwn(req, publicOrigin) || !isJson(req)) throw new AppError('cross_site');
    next();
  };
}

function isOwn(req: Request, publicOrigin: string): boolean {
  const site = req.get('sec-fetch-site');
  if (site !== undefined) return site === 'same-origin';
  const origin = req.get('origin');
  // The second form is for the names by which a shop's own network reaches the server; no page of another site can
  // choose the Host that a browser sends.
  return origin !== undefined && (origin === publicOrigin || origin === `${req.protocol}://${req.host}`);
}

function isJson(req: Request): boolean {
  const type = req.get('content-type');
  if (type !== undefined) return /^application\/json\s*(;|$)/i.test(type);
  return req.get('transfer-encoding') === undefined && Number(req.get('content-length') ?? 0) === 0;
}
