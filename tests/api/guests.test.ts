/** Booking without an account: the phone that a code has proved says who it is. */
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { withShop } from '#server/lib/db';
import { Account, Consent, Person, Visit } from '#server/models/index';
import type { BookAnswer } from '#shared/schemas/booking';
import type { WhichPersonDetails } from '#shared/schemas/session';
import { addPerson, makeShop, type TestShop } from '../support/factories';
import { bookBody, errorOf, faultsOf, newKey, postBooking } from '../support/jobs';
import { pass, placeCode, startTestApp, visitor, type TestApp } from '../support/testApp';

let app: TestApp;
let shop: TestShop;

beforeAll(async () => {
  app = await startTestApp();
  shop = await makeShop(app, { placesPerHalfDay: 100 });
});
afterAll(() => app.stop());

type Loose = Record<string, unknown>;

/** A guest's booking with a code fresh for his phone. */
async function guestBooking(phone: string | null, changes: Loose = {}, rest: Loose = {}) {
  const proof = await placeCode(app, { shopId: shop.id, phone }, 'book');
  const guest = { name: 'Lou Pike', accountName: 'Pike Decks', email: '', phone, ...proof, ...changes };
  return bookBody(shop, { guest, ...rest });
}
const post = (body: Loose, key?: string) => postBooking(visitor(app), shop, body, key);
const bookerOf = (body: unknown) =>
  withShop(shop.id, async () => {
    const visit = await Visit.findByPk((body as BookAnswer).visitId, { rejectOnEmpty: true });
    return Person.findByPk(visit.bookedByPersonId, { rejectOnEmpty: true });
  });

describe('who it is', () => {
  test('a new phone: a person, an account of the typed name with him as manager', async () => {
    const phone = shop.nextPhone();
    const answer = await post(await guestBooking(phone, { email: 'Lou@Example.com' })).expect(201);
    const person = await bookerOf(answer.body);
    expect([person.name, person.phone, person.email, person.roles]).toEqual([
      'Lou Pike',
      phone,
      'lou@example.com',
      ['manager'],
    ]);
    expect(person.phoneProvedAt).toEqual(app.clock.now());
    const account = await withShop(shop.id, () => Account.findByPk(person.accountId ?? ''));
    expect(account?.name).toBe('Pike Decks');
    expect(await withShop(shop.id, () => Consent.count({ where: { personId: person.id, phone } }))).toBe(1);
  });

  test('never an account that has that name already', async () => {
    const name = shop.account.name;
    const answer = await post(await guestBooking(shop.nextPhone(), { accountName: name })).expect(201);
    const person = await bookerOf(answer.body);
    expect(person.accountId).not.toBe(shop.account.id);
    expect(await withShop(shop.id, () => Account.count({ where: { name } }))).toBe(2);
  });

  test('a phone that the shop knows is that person, whatever name is typed', async () => {
    const before = await withShop(shop.id, () => Person.count());
    const answer = await post(await guestBooking(shop.manager.phone, { name: 'Somebody Else' })).expect(201);
    const person = await bookerOf(answer.body);
    expect([person.id, person.name, person.accountId]).toEqual([
      shop.manager.id,
      shop.manager.name,
      shop.account.id,
    ]);
    expect(await withShop(shop.id, () => Person.count())).toBe(before);
  });

  test('several who share a phone: asked which, and the code is still good then', async () => {
    const phone = shop.nextPhone();
    const fields = { phone, accountId: shop.account.id };
    const twins = await withShop(shop.id, async () => [
      await addPerson(app, shop.id, ['manager'], { ...fields, name: 'Ada' }),
      await addPerson(app, shop.id, ['manager'], { ...fields, name: 'Ben' }),
    ]);
    const body = await guestBooking(phone);
    const asked = await post(body);
    expect([asked.status, errorOf(asked).code]).toEqual([409, 'which_person']);
    const { people } = errorOf(asked).details as WhichPersonDetails;
    expect(people.map(({ name, account }) => [name, account]).sort()).toEqual([
      ['Ada', shop.account.name],
      ['Ben', shop.account.name],
    ]);
    const chosen = { ...body, guest: { ...(body.guest as Loose), personId: twins[1]?.id } };
    expect((await bookerOf((await post(chosen).expect(201)).body)).id).toBe(twins[1]?.id);
  });

  test('a choice of somebody who has another phone is no choice', async () => {
    const phone = shop.nextPhone();
    const answer = await post(await guestBooking(phone, { personId: shop.crewLead.id })).expect(201);
    expect((await bookerOf(answer.body)).id).not.toBe(shop.crewLead.id);
  });

  test('staff and people who have left are nobody at this door', async () => {
    const fields = { phone: shop.nextPhone(), accountId: shop.account.id };
    const gone = await withShop(shop.id, async () => {
      const person = await addPerson(app, shop.id, ['manager'], fields);
      return person.update({ leftAt: app.clock.now() });
    });
    const answer = await post(await guestBooking(gone.phone)).expect(201);
    expect((await bookerOf(answer.body)).id).not.toBe(gone.id);
    const ofStaff = await post(await guestBooking(shop.staff.mechanic.phone)).expect(201);
    expect((await bookerOf(ofStaff.body)).id).not.toBe(shop.staff.mechanic.id);
  });

  test('a bookkeeper does not book, by a code either', async () => {
    const answer = await post(await guestBooking(shop.bookkeeper.phone));
    expect([answer.status, errorOf(answer).code]).toEqual([403, 'forbidden']);
  });

  test('the fleet is for whoever is signed in: a proved phone alone opens none', async () => {
    const complaintKindId = shop.complaintKinds[0]?.id;
    const machines = [{ from: 'fleet', machineId: shop.machines[0]?.id, complaintKindId, words: '' }];
    const answer = await post(await guestBooking(shop.manager.phone, {}, { machines }));
    expect([answer.status, faultsOf(answer)]).toEqual([400, ['machines.0.machineId']]);
  });

  test('somebody who wants no texts and gives no address could not be told', async () => {
    const answer = await post(await guestBooking(shop.nextPhone(), {}, { textConsent: false }));
    expect([answer.status, faultsOf(answer)]).toEqual([400, ['guest.email']]);
  });
});

describe('the code', () => {
  test('a wrong one books nothing; after five the right one is too late', async () => {
    const before = await withShop(shop.id, () => Visit.count());
    const body = await guestBooking(shop.nextPhone());
    const guest = body.guest as { code: string };
    const wrong = { ...body, guest: { ...guest, code: guest.code === '000000' ? '000001' : '000000' } };
    for (let tries = 0; tries < 5; tries += 1) {
      const answer = await post(wrong);
      expect([answer.status, errorOf(answer).code]).toEqual([400, 'code_wrong']);
    }
    const late = await post(body);
    expect([late.status, errorOf(late).code]).toEqual([400, 'code_expired']);
    expect(await withShop(shop.id, () => Visit.count())).toBe(before);
  });

  test('one that proves another phone is refused at the phone', async () => {
    const answer = await post(await guestBooking(shop.nextPhone(), { phone: shop.manager.phone }));
    expect([answer.status, faultsOf(answer)]).toEqual([400, ['guest.phone']]);
  });

  test('one that was asked for at sign-in does not book', async () => {
    const phone = shop.nextPhone();
    const proof = await placeCode(app, { shopId: shop.id, phone }, 'sign_in');
    const answer = await post(await guestBooking(phone, proof));
    expect([answer.status, errorOf(answer).code]).toEqual([400, 'code_expired']);
  });

  test('it is good for ten minutes and for one booking', async () => {
    const old = await guestBooking(shop.nextPhone());
    pass(app, 10 * 60_000);
    expect(errorOf(await post(old)).code).toBe('code_expired');
    const body = await guestBooking(shop.nextPhone());
    await post(body).expect(201);
    const second = await post(body);
    expect([second.status, errorOf(second).code]).toEqual([400, 'code_expired']);
  });

  test('a time that was just taken costs no second text: the code stays good', async () => {
    const body = await guestBooking(shop.nextPhone(), {}, { arrivesAt: '2026-12-05T16:00:00.000Z' });
    await post(body).expect(400);
    await post({ ...body, arrivesAt: '2026-12-07T16:00:00.000Z' }).expect(201);
  });
});

describe('the same request again', () => {
  test('after the code is used up, and with a newer code, the first answer comes', async () => {
    const key = newKey();
    const phone = shop.nextPhone();
    const body = await guestBooking(phone);
    const first = await post(body, key).expect(201);
    expect((await post(body, key)).body).toEqual(first.body);
    const newer = {
      ...body,
      guest: { ...(body.guest as Loose), ...(await placeCode(app, { shopId: shop.id, phone }, 'book')) },
    };
    const again = await post(newer, key);
    expect([again.status, again.body]).toEqual([201, first.body]);
    const other = await post({ ...body, note: 'another' }, key);
    expect([other.status, errorOf(other).code]).toEqual([422, 'key_reused']);
  });

  test('a double tap books once', async () => {
    const key = newKey();
    const body = await guestBooking(shop.nextPhone());
    const answers = await Promise.all([1, 2, 3].map(() => post(body, key)));
    expect(answers.map(({ status }) => status)).toEqual([201, 201, 201]);
    for (const { body: said } of answers) expect(said).toEqual(answers[0]?.body);
  });

  test('one code for two different bookings at once lets one through', async () => {
    const body = await guestBooking(shop.nextPhone());
    const answers = await Promise.all([1, 2].map(() => post(body, newKey())));
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 400]);
  });
});
