import { AppError } from '#server/errors';
import { audit } from '#server/lib/audit';
import type { Ctx } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { actorOf } from '#server/lib/passport';
import { peopleOfPhone, whichPerson } from '#server/queries/people';
import { proveCode, useCode, type ProvedPhone } from './checkCode';
import type { Actor } from '#shared/domain/roles';
import type { CodeSignInBody } from '#shared/schemas/session';

/**
 * Signs a customer in by the code sent to his phone.
 * @throws AppError code_wrong, code_expired, which_person
 */
export async function signInByCode(ctx: Ctx, body: CodeSignInBody): Promise<Actor> {
  const { requestId, code, personId } = body;
  const proved = await proveCode(ctx, { requestId, code, purpose: 'sign_in' });
  return withShop(ctx.shopId, () => admit(ctx, proved, personId));
}

async function admit(ctx: Ctx, proved: ProvedPhone, personId: string | undefined): Promise<Actor> {
  const people = await peopleOfPhone(proved.phone);
  if (people.length === 0) throw new AppError('code_wrong');
  const person = await whichPerson(people, personId);
  await useCode(ctx, proved.requestId);
  await person.update({ phoneProvedAt: ctx.now, lastActedAt: ctx.now });
  await audit(ctx, 'signed_in', { personId: person.id, details: { by: 'code' } });
  return actorOf(person);
}
