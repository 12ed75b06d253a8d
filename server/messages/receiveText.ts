/** A text from a customer: kept once, heeded, and put where staff will see it. Inside a unit of work. */
import type { Ctx } from '#server/lib/context';
import { rows, run } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { settingsOf } from '#server/lib/shops';
import { translate } from '#server/lib/translate';
import { Person } from '#server/models/index';
import { ENDED_LIST } from '#server/queries/endedStages';
import { formatPhone } from '#shared/domain/phone';
import type { Language } from '#shared/domain/when';
import { allowTextsTo, isOptedOut, stopTextsTo } from './optOut';
import { readText, type TextKind } from './readText';
import { sendNow } from './sendCode';
import { foldText } from './textWords';

export interface IncomingText {
  providerId: string;
  from: string;
  to: string;
  body: string;
}

interface Writer {
  personId: string | null;
  language: Language;
  visitId: string | null;
  jobId: string | null;
}

/** Longer texts than the provider passes on do not exist; a forged one stays bounded. */
const BODY_MAX = 2000;

/** Takes in one text. The same one delivered twice acts once. */
export async function receiveText(ctx: Ctx, text: IncomingText): Promise<void> {
  const kind = readText(text.body);
  const writer = await writerOf(text.from);
  if (!(await keep(ctx, text, kind, writer))) return;
  await Person.update({ lastActedAt: ctx.now }, { where: { phone: text.from, leftAt: null } });
  const isAnswered = await act(ctx, text, kind, writer);
  if (isAnswered) {
    await run('update inbound_texts set answered_at = $2 where provider_id = $1 returning id', [
      text.providerId,
      ctx.now,
    ]);
  }
}

/** Does what the word asks for. @returns whether nobody of the shop needs to look at it any more */
async function act(ctx: Ctx, text: IncomingText, kind: TextKind, writer: Writer): Promise<boolean> {
  switch (kind) {
    case 'stop':
      // The provider itself confirms a STOP and then blocks: a second confirmation would not arrive.
      await stopTextsTo(ctx, text.from, 'text', text.body.slice(0, BODY_MAX));
      return true;
    case 'start':
      return start(ctx, text, writer);
    case 'help':
      await reply(ctx, text, writer, 'help');
      return true;
    default:
      return false;
  }
}

/** "Yes" from somebody who never stopped means something else, and a person reads it. */
async function start(ctx: Ctx, text: IncomingText, writer: Writer): Promise<boolean> {
  if (!(await isOptedOut(text.from))) return false;
  const isAllowed = await allowTextsTo(ctx, text.from, text.body.slice(0, BODY_MAX));
  await reply(ctx, text, writer, isAllowed ? 'start' : 'start_refused');
  return true;
}

async function reply(ctx: Ctx, text: IncomingText, writer: Writer, key: string): Promise<void> {
  const { textName, phone } = await settingsOf(ctx.shopId);
  const params = { shop: foldText(textName), phone: formatPhone(phone) };
  const body = translate(writer.language, `notices.text.${key}`, params);
  const { language, personId } = writer;
  await sendNow(ctx, { kind: 'reply', phone: text.from, language, personId, body });
}

async function keep(ctx: Ctx, text: IncomingText, kind: TextKind, writer: Writer): Promise<boolean> {
  const { providerId, from, to, body } = text;
  const { personId, visitId, jobId } = writer;
  const kept = await run(
    `insert into inbound_texts (shop_id, id, provider_id, from_phone, to_phone, body, kind, person_id, visit_id, job_id, at)
     values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11) on conflict (shop_id, provider_id) do nothing returning id`,
    [
      ctx.shopId,
      newId(),
      providerId,
      from,
      to,
      body.slice(0, BODY_MAX),
      kind,
      personId,
      visitId,
      jobId,
      ctx.now,
    ],
  );
  return kept.length > 0;
}

/**
 * Whose phone it is, and about which visit: the newest with an open job that a person of that phone booked, or that
 * belongs to the account such a person manages. The job is named where only one is open.
 */
async function writerOf(phone: string): Promise<Writer> {
  const [found] = await rows<Writer>(
    `select p.id as "personId", p.language, v.id as "visitId",
       case when v.open_jobs = 1 then v.job_id end as "jobId"
     from people p
     left join lateral (
       select w.id, w.created_at, w.booked_by_person_id, count(j.id) as open_jobs, min(j.id::text)::uuid as job_id
       from visits w
       join jobs j on j.shop_id = w.shop_id and j.visit_id = w.id
         and j.stage not in (${ENDED_LIST})
       where w.shop_id = p.shop_id and (w.booked_by_person_id = p.id
         or w.account_id = p.account_id and p.roles @> array['manager'])
       group by w.shop_id, w.id
       order by w.created_at desc limit 1
     ) v on true
     where p.phone = $1 and p.left_at is null and p.account_id is not null
     order by v.created_at desc nulls last, (v.booked_by_person_id = p.id) desc nulls last, p.created_at, p.id
     limit 1`,
    [phone],
  );
  return found ?? { personId: null, language: 'en', visitId: null, jobId: null };
}
