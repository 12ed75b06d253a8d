import { Op } from 'sequelize';
import { fieldError } from '#server/errors';
import { appendJobEvent } from './appendJobEvent';
import type { Ctx } from '#server/lib/context';
import { JobEvent, Person, Tag, type Job } from '#server/models/index';
import type { MoveBody } from '#shared/schemas/job';

type CheckIn = NonNullable<MoveBody['checkIn']>;

/** What the gate writes down when a machine comes in: who brought it, what was left with it, which tag hangs on it. */
export async function checkInJob(ctx: Ctx, job: Job, event: JobEvent, checkIn: CheckIn): Promise<void> {
  const bringer = checkIn.broughtByPersonId ? await bringerOf(ctx, job, checkIn.broughtByPersonId) : null;
  await job.update({
    broughtByPersonId: bringer?.id ?? null,
    broughtByName: bringer?.name ?? checkIn.broughtByName,
    leftWithIt: checkIn.leftWithIt,
  });
  if (checkIn.newTag) await replaceTag(ctx, job, event, checkIn.newTag);
}

async function bringerOf(ctx: Ctx, job: Job, personId: string): Promise<Person> {
  const person = await Person.findOne({
    where: { id: personId, accountId: job.billedAccountId, leftAt: null },
  });
  if (!person) throw fieldError('checkIn.broughtByPersonId', 'errors.field.choose');
  // Who stands at the gate is awake: a text about it may go even in quiet hours.
  return person.update({ lastActedAt: ctx.now });
}

async function replaceTag(ctx: Ctx, job: Job, event: JobEvent, code: string): Promise<void> {
  const blank = await Tag.findOne({ where: { code, toAt: null }, lock: true });
  if (blank?.jobId === job.id) return;
  if (!blank || blank.jobId) throw fieldError('checkIn.newTag', 'errors.field.tag_not_blank');
  const before = await Tag.findOne({ where: { jobId: job.id, toAt: null } });
  await before?.update({ toAt: ctx.now });
  await blank.update({ jobId: job.id, fromAt: ctx.now });
  const details = { code, before: before?.code ?? '' };
  await appendJobEvent(ctx, job, { kind: 'tag_replaced', visibleAt: event.visibleAt, details });
}

/**
 * Takes back what the gate wrote down: the machine is not here. The tag hung then is a blank again, since it hangs on
 * another machine, whose check-in will name it.
 */
export async function takeBackCheckIn(ctx: Ctx, job: Job, checkIn: JobEvent): Promise<void> {
  await job.update({ broughtByPersonId: null, broughtByName: '', leftWithIt: '' });
  const replaced = await JobEvent.findOne({
    where: { jobId: job.id, kind: 'tag_replaced', seq: { [Op.gt]: checkIn.seq } },
    order: [['seq', 'DESC']],
  });
  if (!replaced) return;
  const { code, before } = replaced.details;
  await Tag.update({ jobId: null, fromAt: ctx.now }, { where: { code: String(code), jobId: job.id } });
  await Tag.update({ toAt: null }, { where: { code: String(before), jobId: job.id } });
  const details = { code: before, before: code };
  await appendJobEvent(ctx, job, { kind: 'tag_replaced', visibleAt: ctx.now, details });
}
