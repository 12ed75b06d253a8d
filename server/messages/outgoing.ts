/** What goes over the wire for a claimed message. Inside a unit of work. */
import type { Ctx } from '#server/lib/context';
import { CODE_LIFE_MS } from '#server/lib/loginCodes';
import type { OutgoingMail } from '#server/lib/mail';
import type { OutgoingText } from '#server/lib/sms';
import { settingsOf } from '#server/lib/shops';
import { Shop, type Message } from '#server/models/index';
import { unsubscribeUrl } from './composeMessage';

export type Outgoing = { channel: 'text'; text: OutgoingText } | { channel: 'email'; mail: OutgoingMail };

const STATUS_TEXT_LIFE_SECONDS = 14_400;

/** @param from the shop's number, for a text */
export async function outgoingOf(ctx: Ctx, message: Message, from: string): Promise<Outgoing> {
  if (message.channel === 'email') return { channel: 'email', mail: await outgoingMail(ctx, message) };
  const { id, attempt, kind, toAddress: to, body } = message;
  return {
    channel: 'text',
    text: {
      from,
      to,
      body: body ?? '',
      statusCallback: `${ctx.env.PUBLIC_URL}/hooks/sms/status/${ctx.shopId}/${id}/${attempt}`,
      validitySeconds: kind === 'code' ? CODE_LIFE_MS / 1000 : STATUS_TEXT_LIFE_SECONDS,
    },
  };
}

async function outgoingMail(ctx: Ctx, message: Message): Promise<OutgoingMail> {
  const shop = await Shop.findByPk(ctx.shopId, { rejectOnEmpty: true });
  const { email } = await settingsOf(ctx.shopId);
  const { id, toAddress, subject, body, html, calendar, personId } = message;
  return {
    id,
    fromName: shop.name,
    replyTo: email,
    to: toAddress,
    subject: subject ?? '',
    text: body ?? '',
    html: html ?? '',
    calendar,
    unsubscribeUrl: unsubscribeUrl(ctx, { id: personId ?? '' }),
  };
}
