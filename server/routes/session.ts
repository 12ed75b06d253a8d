/** Signing in and out. A browser holds one session, in one shop. */
import type { Request } from 'express';
import { Strategy as LocalStrategy } from 'passport-local';
import { signInByCode } from '#server/commands/signInByCode';
import { signInByPassword } from '#server/commands/signInByPassword';
import { signOutEverywhere } from '#server/commands/signOutEverywhere';
import { AppError } from '#server/errors';
import type { Ctx, Services } from '#server/lib/context';
import { passportOf, type AppPassport } from '#server/lib/passport';
import { atShop, loadShop } from '#server/lib/shopContext';
import { signIn, signOut } from '#server/middlewares/session';
import { presentSession } from '#server/presenters/session';
import { CUSTOMER_ROLES, STAFF_ROLES, type Actor } from '#shared/domain/roles';
import { CodeSignInBody, PasswordSignInBody, type SessionView } from '#shared/schemas/session';
import { route, type Route } from './route';

/** The routes on the session itself. */
export function sessionRoutes(services: Services): Route[] {
  const passport = passportOf(services);
  return [
    route({
      method: 'get',
      path: '/api/session',
      access: { public: 'every page asks who is signed in, if anybody' },
      handle: ({ ctx }) => presentSession(ctx, ctx.actor),
    }),
    route({
      method: 'post',
      path: '/api/shops/:shop/sign-in/code',
      access: { public: 'this is how a customer signs in' },
      load: loadShop,
      body: CodeSignInBody,
      handle: async ({ ctx, row: shop, body, req }) =>
        enter(ctx, req, await signInByCode(atShop(ctx, shop), body)),
    }),
    route({
      method: 'post',
      path: '/api/shops/:shop/sign-in/password',
      access: { public: 'this is how staff sign in' },
      load: loadShop,
      body: PasswordSignInBody,
      handle: async ({ ctx, row: shop, body, req }) => {
        const actor = await authenticate(passport, req, () => signInByPassword(atShop(ctx, shop), body));
        if (!actor) throw new AppError('sign_in_failed');
        return enter(ctx, req, actor);
      },
    }),
    route({
      method: 'post',
      path: '/api/sign-out',
      access: { public: 'a session that has just run out is signed out all the same' },
      handle: ({ req }) => leave(req),
    }),
    route({
      method: 'post',
      path: '/api/sign-out-everywhere',
      access: { roles: [...STAFF_ROLES, ...CUSTOMER_ROLES] },
      handle: async ({ ctx, req }) => {
        if (ctx.actor) await signOutEverywhere(ctx, ctx.actor);
        await leave(req);
      },
    }),
  ];
}

async function enter(ctx: Ctx, req: Request, actor: Actor): Promise<SessionView> {
  await signIn(req, actor);
  return presentSession(ctx, actor);
}

async function leave(req: Request): Promise<void> {
  if (req.res) await signOut(req, req.res);
}

/** Lets Passport's local strategy ask `check`; the strategy itself reads address and password from the body. */
function authenticate(
  passport: AppPassport,
  req: Request,
  check: () => Promise<Actor | null>,
): Promise<Actor | null> {
  const strategy = new LocalStrategy({ usernameField: 'email' }, (_email, _password, done) => {
    check().then((actor) => done(null, actor ?? false), done);
  });
  return new Promise((resolve, reject) => {
    const settle = (error: Error | null, actor?: Actor | false) =>
      error ? reject(error) : resolve(actor || null);
    const handler = passport.authenticate(strategy, { session: false }, settle) as (
      req: Request,
      res: unknown,
      next: (error?: Error) => void,
    ) => void;
    handler(req, req.res, (error) => (error ? reject(error) : resolve(null)));
  });
}
