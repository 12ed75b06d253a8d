import { fieldError } from '#server/errors';
import { appendJobEvent } from './appendJobEvent';
import type { Ctx } from '#server/lib/context';
import { Person, Tag, type Job, type JobEvent } from '#server/models/index';
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
  await Tag.update({ toAt: ctx.now }, { where: { jobId: job.id, toAt: null } });
  await blank.update({ jobId: job.id, fromAt: ctx.now });
  await appendJobEvent(ctx, job, { kind: 'tag_replaced', visibleAt: event.visibleAt, details: { code } });
}
