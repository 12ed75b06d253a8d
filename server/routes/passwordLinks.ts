import { loadPasswordLink, setPassword, type OpenPasswordLink } from '#server/commands/setPassword';
import { atShop, loadShop } from '#server/lib/shopContext';
import { presentSession } from '#server/presenters/session';
import { SetPasswordBody, type PasswordLinkView } from '#shared/schemas/session';
import { route, type LoadInput, type Route } from './route';

const PATH = '/api/shops/:shop/password-links/:token';
const ACCESS = { public: 'the one-time link itself is the proof' };

async function loadLink(input: LoadInput): Promise<OpenPasswordLink> {
  const shop = await loadShop(input);
  return loadPasswordLink(input.ctx, shop, input.params.token ?? '');
}

/** One-time links by which the shop's people set their passwords. Looking at one changes nothing. */
export const passwordLinkRoutes: Route[] = [
  route({
    method: 'get',
    path: PATH,
    access: ACCESS,
    load: loadLink,
    handle: ({ row: { person, link } }): Promise<PasswordLinkView> =>
      Promise.resolve({
        name: person.name,
        email: person.email ?? '',
        expiresAt: link.expiresAt.toISOString(),
      }),
  }),
  route({
    method: 'post',
    path: PATH,
    access: ACCESS,
    load: loadLink,
    body: SetPasswordBody,
    // Signs nobody in: the new password is asked for at once, and shows that it was kept.
    handle: async ({ ctx, row, body }) => {
      await setPassword(atShop(ctx, row.shop), row, body.password);
      return presentSession(ctx, null);
    },
  }),
];
