import type { Ctx } from '#server/lib/context';
import { createStubLink, stubPathOf } from '#server/lib/links';
import { Link, type Message } from '#server/models/index';

/**
 * The stub's address for one message, made when its words are made. The link's id is the message's own, so that a
 * message whose words are made twice keeps one link. Inside a unit of work.
 */
export async function messageLink(ctx: Ctx, message: Message): Promise<string> {
  const { id, visitId, personId, channel } = message;
  if (visitId && !(await Link.findByPk(id))) {
    await createStubLink(ctx, { visitId, personId, purpose: channel }, id);
  }
  return `${ctx.env.PUBLIC_URL}${stubPathOf(ctx.env, id)}`;
}
