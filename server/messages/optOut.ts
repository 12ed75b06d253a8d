/** Phones that want no texts. Our own list is the master, whatever the carrier does. Inside a unit of work. */
import { Op } from 'sequelize';
import { AppError } from '#server/errors';
import { audit } from '#server/lib/audit';
import type { Ctx } from '#server/lib/context';
import { newId } from '#server/lib/ids';
import { Consent, Message, OptOut, Person } from '#server/models/index';
import { turnToEmail } from './fallback';
import { lockMessage } from './lockMessage';

/** Who said that the texts end: the phone itself, the carrier, or staff on the customer's word. */
export type OptOutSource = 'text' | 'carrier' | 'staff';

/** Ends texts to a phone at once: recorded, consent withdrawn, and what still waits goes by e-mail. */
export async function stopTextsTo(
  ctx: Ctx,
  phone: string,
  source: OptOutSource,
  wording: string,
): Promise<void> {
  // Said twice, or said by the carrier of a phone that we know of: recorded once.
  if (!(await isOptedOut(phone))) {
    await setOptOut(ctx, phone, true, source);
    await recordConsents(ctx, phone, 'withdrawn', source, wording);
    await audit(ctx, 'texts_stopped', { personId: ctx.actor?.personId, details: { phone, source } });
  }
  await turnPendingToEmail(ctx, phone);
}

/**
 * Allows texts to a phone again.
 * @returns false where no consent is on record: then a word by text is not enough
 */
export async function allowTextsTo(ctx: Ctx, phone: string, wording: string): Promise<boolean> {
  if (!(await Consent.findOne({ where: { phone, kind: 'given' } }))) return false;
  await setOptOut(ctx, phone, false, 'text');
  await recordConsents(ctx, phone, 'given', 'text', wording);
  await audit(ctx, 'texts_allowed', { details: { phone, source: 'text' } });
  return true;
}

/**
 * The staff's button: the customer asked to get no more texts.
 * @throws AppError not_found where there is no such person or no phone
 */
export async function stopTexts(ctx: Ctx, personId: string): Promise<void> {
  const person = await Person.findByPk(personId);
  if (!person?.phone) throw new AppError('not_found');
  await stopTextsTo(ctx, person.phone, 'staff', 'customer asked the shop to stop');
}

/** Whether the phone wants no texts. */
export async function isOptedOut(phone: string): Promise<boolean> {
  return (await OptOut.findOne({ where: { phone, optedOut: true } })) !== null;
}

async function setOptOut(ctx: Ctx, phone: string, optedOut: boolean, source: OptOutSource): Promise<void> {
  const known = await OptOut.findOne({ where: { phone }, lock: true });
  const row = { optedOut, source, at: ctx.now };
  if (known) await known.update(row);
  else await OptOut.create({ shopId: ctx.shopId, id: newId(), phone, ...row });
}

/**
 * One row for each person who agreed to texts to that phone once. A word from a shared phone speaks for them alone:
 * nobody is made to agree by what another texts.
 */
async function recordConsents(
  ctx: Ctx,
  phone: string,
  kind: Consent['kind'],
  source: string,
  wording: string,
): Promise<void> {
  const given = await Consent.findAll({ where: { phone, kind: 'given' } });
  const agreed = given.map(({ personId }) => personId);
  const people = await Person.findAll({ where: { id: agreed, phone, leftAt: null }, order: ['id'] });
  for (const { id: personId, language } of people) {
    const facts = { personId, phone, kind, wording, language, source, ip: ctx.ip, at: ctx.now };
    await Consent.create({ shopId: ctx.shopId, id: newId(), ...facts });
  }
}

async function turnPendingToEmail(ctx: Ctx, phone: string): Promise<void> {
  const waiting = await Message.findAll({
    where: { toAddress: phone, channel: 'text', kind: { [Op.ne]: 'reply' }, status: 'pending' },
    // Visits are locked in this order everywhere where several are.
    order: ['visitId', 'id'],
  });
  for (const { id } of waiting) {
    const message = await lockMessage(id);
    if (message?.status !== 'pending') continue;
    if (message.kind === 'notices') await turnToEmail(ctx, message, 'opted_out');
    else await message.update({ status: 'failed', problem: 'opted_out', settledAt: ctx.now, body: null });
  }
}
