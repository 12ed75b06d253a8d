/** What goes over the wire for a claimed message. Inside a unit of work. */
import type { Ctx } from '#server/lib/context';
import type { OutgoingMail } from '#server/lib/mail';
import type { OutgoingText } from '#server/lib/sms';
import { settingsOf } from '#server/lib/shops';
import { rows } from '#server/lib/db';
import { Shop, type Message } from '#server/models/index';
import { unsubscribeUrl } from './composeMessage';

export type Outgoing = { channel: 'text'; text: OutgoingText } | { channel: 'email'; mail: OutgoingMail };

const STATUS_TEXT_LIFE_SECONDS = 14_400;
const CODE_LIFE_SECONDS = 600;

/** @throws Error when the shop has no sender number, so that the shop's operator hears of it */
export async function outgoingOf(ctx: Ctx, message: Message): Promise<Outgoing> {
  if (message.channel === 'email') return { channel: 'email', mail: await outgoingMail(ctx, message) };
  const { id, attempt, kind, toAddress: to, body } = message;
  return {
    channel: 'text',
    text: {
      from: await senderNumber(ctx.shopId),
      to,
      body: body ?? '',
      statusCallback: `${ctx.env.PUBLIC_URL}/hooks/sms/status/${ctx.shopId}/${id}/${attempt}`,
      validitySeconds: kind === 'code' ? CODE_LIFE_SECONDS : STATUS_TEXT_LIFE_SECONDS,
    },
  };
}

async function senderNumber(shopId: string): Promise<string> {
  const [row] = await rows<{ phone: string }>('select phone from sender_numbers where shop_id = $1', [
    shopId,
  ]);
  if (!row) throw new Error(`shop ${shopId} has no number to text from`);
  return row.phone;
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
