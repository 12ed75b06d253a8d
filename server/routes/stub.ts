import { AppError } from '#server/errors';
import { rows, withShop } from '#server/lib/db';
import { hashToken } from '#server/lib/ids';
import { readStub } from '#server/queries/stub';
import type { LinkEndedDetails, StubView } from '#shared/schemas/stub';
import { route, type LoadInput, type Route } from './route';

/** The public page of a visit, behind its unguessable link. */
export const stubRoutes: Route[] = [
  route({
    method: 'get',
    path: '/api/t/:token',
    access: { public: 'the link itself is the proof: whoever was sent it may look' },
    load: loadStub,
    handle: ({ ctx, row }): Promise<StubView> => Promise.resolve({ now: ctx.now.toISOString(), ...row }),
  }),
];

async function loadStub({ ctx, params }: LoadInput): Promise<Omit<StubView, 'now'>> {
  const tokenHash = hashToken(params.token ?? '');
  const [entry] = await rows<{ shop_id: string }>(
    'select shop_id from link_directory where token_hash = $1',
    [tokenHash],
  );
  const found = entry ? await withShop(entry.shop_id, () => readStub(tokenHash, ctx.now)) : null;
  if (!found) throw new AppError('not_found');
  if (found.ended) throw new AppError('link_ended', { details: whomToAsk(found.view) });
  return found.view;
}

function whomToAsk({ shop: { slug, name, phone } }: Omit<StubView, 'now'>): LinkEndedDetails {
  return { shop: { slug, name, phone } };
}
