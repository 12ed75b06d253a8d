/**
 * Sessions: one for each browser, in one shop. Over https the cookie is `__Host-sid` with Secure, over plain http
 * (loopback, a phone on the shop's network) `sid`. Visitors have none until they sign in.
 */
import { randomBytes } from 'node:crypto';
import type { NextFunction, Request, RequestHandler, Response } from 'express';
import expressSession from 'express-session';
import type { Services } from '#server/lib/context';
import { passportOf, LIFETIMES, type Signed } from '#server/lib/passport';
import { openSessionPool, SessionStore } from '#server/lib/sessionStore';
import type { Actor } from '#shared/domain/roles';

/** An idle stamp costs a write, so a session in use gets one a minute at most. */
const STAMP_EVERY = 60_000;
const COOKIE = { httpOnly: true, sameSite: 'lax', path: '/' } as const;
const cookieName = (secure: boolean): string => (secure ? '__Host-sid' : 'sid');

/** The middlewares that put the signed-in person on the request. */
export function sessions(services: Services): RequestHandler[] {
  const pool = openSessionPool(services);
  const overHttps = sessionOver(true, new SessionStore(pool, services), services);
  const overHttp = sessionOver(false, new SessionStore(pool, services), services);
  const passport = passportOf(services);
  return [
    (req, res, next) => (req.secure ? overHttps : overHttp)(req, res, next),
    endOldSession(services),
    passport.session() as RequestHandler,
    forgetLostPerson,
  ];
}

function sessionOver(secure: boolean, store: SessionStore, { env }: Services): RequestHandler {
  return expressSession({
    name: cookieName(secure),
    secret: env.SESSION_SECRET,
    genid: () => randomBytes(32).toString('base64url'),
    store,
    resave: false,
    saveUninitialized: false,
    cookie: { ...COOKIE, secure },
  });
}

function isOver(signed: Signed, seenAt: number, now: number): boolean {
  const { idle, absolute } = signed.isStaff ? LIFETIMES.staff : LIFETIMES.customer;
  return now - seenAt >= idle || now - signed.at >= absolute;
}

/** Ends a session that has run out, and stamps one that is in use. */
function endOldSession({ clock }: Services): RequestHandler {
  return (req, _res, next) => {
    const signed = req.session.passport?.user;
    if (!signed) return next();
    const now = clock.now().getTime();
    const seenAt = req.session.seenAt ?? signed.at;
    if (isOver(signed, seenAt, now)) return dropSession(req, next);
    if (now - seenAt >= STAMP_EVERY) req.session.seenAt = now;
    next();
  };
}

/** A person who has left, or whose shop is suspended, has no session any more. */
const forgetLostPerson: RequestHandler = (req, _res, next) => {
  if (req.session.passport && !req.user) return dropSession(req, next);
  next();
};

function dropSession(req: Request, next: NextFunction): void {
  req.sessionStore.destroy(req.sessionID, (error?: unknown) => {
    if (error) return next(error);
    req.sessionStore.generate(req);
    next();
  });
}

/** Signs a person in, under a new session id. */
export function signIn(req: Request, actor: Actor): Promise<void> {
  return new Promise((resolve, reject) => {
    req.logIn(actor, (error?: unknown) => (error ? reject(asError(error)) : resolve()));
  });
}

/** Ends this browser's session and takes its cookie back. */
export function signOut(req: Request, res: Response): Promise<void> {
  return new Promise((resolve, reject) => {
    req.session.destroy((error?: unknown) => {
      if (error) return reject(asError(error));
      res.clearCookie(cookieName(req.secure), { ...COOKIE, secure: req.secure });
      resolve();
    });
  });
}

function asError(problem: unknown): Error {
  return problem instanceof Error ? problem : new Error('the session could not be saved', { cause: problem });
}
