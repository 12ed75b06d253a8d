/** One-time codes and replies: texts that go at once, are never merged and know no quiet hours. Inside a unit of work. */
import type { Ctx } from '#server/lib/context';
import { rows } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { enqueueMessages } from '#server/lib/queue';
import { translate } from '#server/lib/translate';
import { Message } from '#server/models/index';
import type { Language } from '#shared/domain/when';
import { foldText } from './textWords';

export interface CodeText {
  phone: string;
  language: Language;
  code: string;
  /** Whose phone it is, where that is one known person. */
  personId: string | null;
  shopTextName: string;
  purpose: 'book' | 'sign_in';
}

/** Texts a one-time code. Its words are shown to nobody and blanked once the message has settled. */
export async function sendCodeText(ctx: Ctx, given: CodeText): Promise<void> {
  const { phone, language, code, personId } = given;
  const shop = foldText(given.shopTextName);
  const words = translate(language, 'notices.text.code', { shop, code });
  const isFirst = await isFirstText(phone);
  const body = isFirst ? `${words} ${translate(language, 'notices.text.first')}` : words;
  await sendNow(ctx, { kind: 'code', phone, language, personId, body });
}

export interface ImmediateText {
  kind: 'code' | 'reply';
  phone: string;
  language: Language;
  personId: string | null;
  body: string;
}

/** Writes a text whose words are known and queues it in the same unit. */
export async function sendNow(ctx: Ctx, given: ImmediateText): Promise<void> {
  const { kind, phone, language, personId, body } = given;
  const id = newId();
  await Message.create({
    shopId: ctx.shopId,
    id,
    kind,
    channel: 'text',
    personId,
    toAddress: phone,
    language,
    status: 'pending',
    createdAt: ctx.now,
    notBefore: ctx.now,
    heldFor: 'nothing',
    queuedAt: ctx.now,
    body,
  });
  await enqueueMessages([id]);
}

/** Whether the shop has sent that phone no text before: the first one says how to stop them. */
export async function isFirstText(phone: string): Promise<boolean> {
  const [row] = await rows<{ before: boolean }>(
    `select exists (select 1 from messages where to_address = $1 and channel = 'text' and kind <> 'reply'
       and status in ('accepted', 'sending', 'unknown')) as before`,
    [phone],
  );
  return !row?.before;
}
