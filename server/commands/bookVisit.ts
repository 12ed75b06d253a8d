/**
 * Books a drop-off: the visit, a job and a tag for each machine, the places of the half-day, the link and the
 * notices, all or nothing.
 */
import { announceBooked } from '#server/messages/announce';
import { reachOfOne } from '#server/messages/recipients';
import { hangNewTag, newStubCode } from './codes';
import { useCode, type ProvedPhone } from './checkCode';
import { bookerOf } from './booker';
import { bookedMachines, type BookedMachine } from './bookedMachines';
import { oneOpenJob } from './oneOpenJob';
import { recordConsent } from './recordConsent';
import { refuseTime, takePlaces } from './places';
import type { Ctx } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { once, type KeyedRequest } from '#server/lib/idempotency';
import { createStubLink, stubPathOf } from '#server/lib/links';
import type { ShopProfile } from '#server/lib/shops';
import { Job, JobEvent, Visit, VisitEvent, type Person } from '#server/models/index';
import { machineName } from '#shared/domain/machineName';
import type { BookAnswer, BookBody } from '#shared/schemas/booking';

export interface BookInput {
  shop: ShopProfile;
  body: BookBody;
  key: string;
  /** A guest's proof of the phone; null for whoever is signed in. */
  proved: ProvedPhone | null;
}

/**
 * Books the visit once per key.
 * @throws AppError times_full, machine_already_booked, which_person, or invalid by field
 */
export async function bookVisit(ctx: Ctx, input: BookInput): Promise<BookAnswer> {
  const { shop, body, key } = input;
  const kept = await oneOpenJob('machine_already_booked', () =>
    withShop(shop.id, () => once(ctx, keyedBooking(body, key), () => book(ctx, input))),
  );
  return withStubPath(ctx, kept);
}

/** A booking's answer as it is kept for a second try: by the id of its link, whose address is a secret. */
export type KeptBooking = Omit<BookAnswer, 'stubPath'> & { linkId: string };

/** The answer of a booking from what is kept of it. */
export function withStubPath({ env }: Pick<Ctx, 'env'>, { linkId, ...kept }: KeptBooking): BookAnswer {
  return { ...kept, stubPath: stubPathOf(env, linkId) };
}

/** A second try after an answer got lost may carry a newer code; the booking that it means is the same. */
export function keyedBooking(body: BookBody, key: string): KeyedRequest {
  return {
    key,
    act: 'book',
    body: { ...body, guest: body.guest && { ...body.guest, requestId: '', code: '' } },
  };
}

async function book(ctx: Ctx, { shop, body, proved }: BookInput): Promise<KeptBooking> {
  const arrivesAt = new Date(body.arrivesAt);
  await refuseTime(ctx, shop, arrivesAt, body.machines.length);
  const booker = await bookerOf(ctx, body, proved);
  const machines = await bookedMachines(ctx, booker, body.machines);
  const halfDayId = await takePlaces(ctx, shop, arrivesAt, machines.length);
  const visit = await createVisit(ctx, booker, body, arrivesAt);
  const jobs = [];
  for (const machine of machines) jobs.push(await createJob(ctx, visit, machine, halfDayId, booker));
  if (body.textConsent) await recordConsent(ctx, shop, booker, body.language, 'booking');
  if (proved) await useCode(ctx, proved.requestId);
  await booker.update({ lastActedAt: ctx.now });
  const visitEvent = await VisitEvent.create({
    ...eventBase(ctx, booker),
    visitId: visit.id,
    kind: 'booked',
    details: { jobs: jobs.map((job) => job.tag) },
  });
  await announceBooked(ctx, { visitEvent, visit });
  const { text, email } = await reachOfOne(booker);
  return {
    visitId: visit.id,
    stubCode: visit.stubCode,
    linkId: await createStubLink(ctx, { visitId: visit.id, personId: booker.id, purpose: 'screen' }),
    arrivesAt: body.arrivesAt,
    jobs,
    toldBy: { text, email },
  };
}

/** What a customer does himself is visible at once. */
function eventBase(ctx: Ctx, booker: Person) {
  return {
    shopId: ctx.shopId,
    id: newId(),
    at: ctx.now,
    visibleAt: ctx.now,
    personId: booker.id,
    byName: booker.name,
  };
}

async function createVisit(ctx: Ctx, booker: Person, body: BookBody, arrivesAt: Date): Promise<Visit> {
  return Visit.create({
    shopId: ctx.shopId,
    id: newId(),
    accountId: booker.accountId ?? '',
    bookedByPersonId: booker.id,
    inbound: 'drop_off',
    arrivesAt,
    stubCode: await newStubCode(),
    note: body.note,
    createdAt: ctx.now,
  });
}

async function createJob(
  ctx: Ctx,
  visit: Visit,
  { machine, complaintKindId, words }: BookedMachine,
  halfDayId: string,
  booker: Person,
): Promise<{ tag: string; machine: string }> {
  const job = await Job.create({
    shopId: ctx.shopId,
    id: newId(),
    visitId: visit.id,
    machineId: machine.id,
    ownerAccountId: machine.accountId,
    billedAccountId: visit.accountId,
    complaintKindId,
    words,
    halfDayId,
    stage: 'booked',
    stageSince: ctx.now,
    createdAt: ctx.now,
  });
  await JobEvent.create({
    ...eventBase(ctx, booker),
    jobId: job.id,
    seq: 1,
    kind: 'booked',
    toStage: 'booked',
  });
  return { tag: await hangNewTag(ctx, job.id), machine: machineName(machine) };
}
