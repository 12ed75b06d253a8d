import { AppError } from '#server/errors';
import type { ProvedPhone } from './checkCode';
import type { Ctx } from '#server/lib/context';
import { newId } from '#server/lib/ids';
import { Account, Person } from '#server/models/index';
import { peopleOfPhone, whichPerson } from '#server/queries/people';
import { may } from '#shared/policies/abilities';
import type { BookBody } from '#shared/schemas/booking';

/**
 * Who books: the person signed in, the person whose phone was proved, or a new one with an account of the typed name.
 * A guest never joins an account by its name.
 */
export async function bookerOf(ctx: Ctx, body: BookBody, proved: ProvedPhone | null): Promise<Person> {
  if (!proved) return signedIn(ctx);
  const known = await peopleOfPhone(proved.phone);
  if (known.length === 0) return newGuest(ctx, body, proved);
  const person = await whichPerson(known, body.guest?.personId);
  if (!may(person, 'book')) throw new AppError('forbidden');
  return fillIn(ctx, person, body);
}

async function signedIn(ctx: Ctx): Promise<Person> {
  const person = ctx.actor ? await Person.findByPk(ctx.actor.personId) : null;
  if (!person) throw new AppError('unauthenticated');
  return person;
}

/** A known person keeps what is on record; an address that was missing is taken from the form. */
async function fillIn(ctx: Ctx, person: Person, body: BookBody): Promise<Person> {
  const email = person.email ?? (body.guest?.email || null);
  return person.update({ email, phoneProvedAt: ctx.now });
}

async function newGuest(ctx: Ctx, body: BookBody, proved: ProvedPhone): Promise<Person> {
  const { guest } = body;
  if (!guest) throw new AppError('unauthenticated');
  const account = await Account.create({
    shopId: ctx.shopId,
    id: newId(),
    name: guest.accountName,
    createdAt: ctx.now,
  });
  return Person.create({
    shopId: ctx.shopId,
    id: newId(),
    accountId: account.id,
    name: guest.name,
    phone: proved.phone,
    phoneProvedAt: ctx.now,
    email: guest.email || null,
    roles: ['manager'],
    language: body.language,
    createdAt: ctx.now,
  });
}
