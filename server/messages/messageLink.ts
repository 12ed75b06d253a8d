import type { Ctx } from '#server/lib/context';
import { run } from '#server/lib/db';
import { hashToken, linkToken } from '#server/lib/ids';
import { Link, type Message } from '#server/models/index';

/**
 * The stub's address for one message, made when its words are made. The link's id is the message's own, so that a
 * message whose words are made twice keeps one link. Inside a unit of work.
 */
export async function messageLink(ctx: Ctx, message: Message): Promise<string> {
  const { id, visitId, personId, channel } = message;
  const token = linkToken(ctx.env.LINK_KEY, id);
  if (visitId && !(await Link.findByPk(id))) {
    const tokenHash = hashToken(token);
    await Link.create({
      shopId: ctx.shopId,
      id,
      visitId,
      personId,
      purpose: channel,
      tokenHash,
      createdAt: ctx.now,
    });
    await run('insert into link_directory (token_hash, shop_id) values ($1, $2)', [tokenHash, ctx.shopId]);
  }
  return `${ctx.env.PUBLIC_URL}/t/${token}`;
}
