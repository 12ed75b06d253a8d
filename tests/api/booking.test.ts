/** Booking a drop-off: what is written, what is refused and how, and what a repeated request gets. */
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { rows, withShop } from '#server/lib/db';
import { hashToken, newId } from '#server/lib/ids';
import { Consent, Job, Link, Machine, Notice, OptOut, Person, Tag, Visit } from '#server/models/index';
import { isCode } from '#shared/domain/tagCode';
import type { BookAnswer } from '#shared/schemas/booking';
import type { SessionView } from '#shared/schemas/session';
import type { TimesFullDetails, TimesView } from '#shared/schemas/shop';
import type { StubView } from '#shared/schemas/stub';
import { addMachine, makeShop, type TestShop } from '../support/factories';
import { bookBody, errorOf, faultsOf, newKey, newMachine, postBooking } from '../support/jobs';
import { signedIn, startTestApp, visitor, type Client, type TestApp } from '../support/testApp';

let app: TestApp;
let shop: TestShop;
let manager: Client;

beforeAll(async () => {
  app = await startTestApp();
  shop = await makeShop(app, { placesPerHalfDay: 5 });
  manager = await signedIn(app, shop, shop.manager);
});
afterAll(() => app.stop());

/** Each test has a half-day of its own: mornings and afternoons of the week after. */
const ARRIVALS = ['07', '08', '09', '10', '11', '14', '15', '16', '17', '18'].flatMap((day) => [
  `2026-12-${day}T16:00:00.000Z`,
  `2026-12-${day}T20:30:00.000Z`,
]);
let used = 0;
const ownHalfDay = (): string => ARRIVALS[used++] ?? '';

const inFleet = (machineId: string | undefined) => ({
  from: 'fleet',
  machineId,
  complaintKindId: shop.complaintKinds[0]?.id,
  words: 'slow to build pressure',
});
const freshMachine = () =>
  withShop(shop.id, () => addMachine(app, shop.id, { accountId: shop.account.id, fleetNumber: '40' }));
const placesTaken = async (arrivesAt: string) => {
  const half = arrivesAt.includes('T16') ? 'am' : 'pm';
  const found = await withShop(shop.id, () =>
    rows<{ taken: number }>('select taken from half_days where day = $1 and half = $2', [
      arrivesAt.slice(0, 10),
      half,
    ]),
  );
  return found[0]?.taken ?? 0;
};

describe('a booking that succeeds', () => {
  test('three machines: visit, jobs, tags, places, link, consent and notices', async () => {
    const arrivesAt = ownHalfDay();
    const known = await freshMachine();
    const machines = [inFleet(known.id), newMachine(shop), newMachine(shop, { maker: 'Ironvale' })];
    const answer = await postBooking(
      manager,
      shop,
      bookBody(shop, { arrivesAt, machines, note: 'two trucks' }),
    );
    expect(answer.status).toBe(201);
    const booked = answer.body as BookAnswer;
    expect(booked.jobs).toHaveLength(3);
    expect(booked.jobs.every(({ tag }) => isCode(tag))).toBe(true);
    expect(isCode(booked.stubCode)).toBe(true);
    expect(await placesTaken(arrivesAt)).toBe(3);
    await withShop(shop.id, async () => {
      const visit = await Visit.findByPk(booked.visitId, { rejectOnEmpty: true });
      expect([visit.accountId, visit.bookedByPersonId, visit.note]).toEqual([
        shop.account.id,
        shop.manager.id,
        'two trucks',
      ]);
      const jobs = await Job.findAll({ where: { visitId: visit.id } });
      expect(jobs.map(({ stage, version }) => [stage, version])).toEqual(Array(3).fill(['booked', 1]));
      const tags = await Tag.findAll({ where: { jobId: jobs.map(({ id }) => id) } });
      expect(tags.map(({ code }) => code).sort()).toEqual(booked.jobs.map(({ tag }) => tag).sort());
      expect(await Machine.count({ where: { id: known.id, accountId: shop.account.id } })).toBe(1);
      const consent = await Consent.findOne({
        where: { personId: shop.manager.id },
        order: [['at', 'DESC']],
        rejectOnEmpty: true,
      });
      expect([consent.kind, consent.phone, consent.source]).toEqual(['given', shop.manager.phone, 'booking']);
      expect(consent.wording).toContain(shop.name);
      expect(consent.wording).toMatch(/STOP/);
      const notices = await Notice.findAll({ where: { visitId: visit.id } });
      expect(notices.map(({ kind, channel, personId }) => [kind, channel, personId]).sort()).toEqual([
        ['booked', 'email', shop.manager.id],
        ['booked', 'text', shop.manager.id],
      ]);
    });
    expect(booked.toldBy).toEqual({ text: true, email: true });
  });

  test('its link opens the stub, and only its hash is kept', async () => {
    const answer = await postBooking(manager, shop, bookBody(shop, { arrivesAt: ownHalfDay() }));
    const { stubPath, stubCode } = answer.body as BookAnswer;
    expect(stubPath).toMatch(/^\/t\/[\w-]{22}$/);
    const stub = (await visitor(app).get(`/api${stubPath}`).expect(200)).body as StubView;
    expect(stub.stubCode).toBe(stubCode);
    const token = stubPath.slice(3);
    const kept = await withShop(shop.id, () => Link.findOne({ where: { tokenHash: hashToken(token) } }));
    expect(kept).not.toBeNull();
    const everything = await withShop(shop.id, () =>
      rows<{ row: string }>(
        `select l::text as row from links l union all select k::text from idempotency_keys k
         union all select e::text from visit_events e`,
      ),
    );
    expect(everything.length).toBeGreaterThan(3);
    expect(everything.filter(({ row }) => row.includes(token))).toEqual([]);
  });

  test('the words of consent are kept in the language they were read in', async () => {
    await postBooking(manager, shop, bookBody(shop, { arrivesAt: ownHalfDay(), language: 'es' })).expect(201);
    const [latest] = await withShop(shop.id, () =>
      rows<{ language: string; wording: string }>(
        'select language, wording from consents where language = $1',
        ['es'],
      ),
    );
    expect(latest?.wording).toMatch(/mensajes/);
  });

  test('the session knows who has agreed to texts, and who has stopped them since', async () => {
    await postBooking(manager, shop, bookBody(shop, { arrivesAt: ownHalfDay() })).expect(201);
    const textsOn = async () => ((await manager.get('/api/session')).body as SessionView).person?.textsOn;
    expect(await textsOn()).toBe(true);
    const stop = await withShop(shop.id, () =>
      OptOut.create({
        shopId: shop.id,
        id: newId(),
        phone: shop.manager.phone ?? '',
        optedOut: true,
        source: 'text',
        at: app.clock.now(),
      }),
    );
    expect(await textsOn()).toBe(false);
    await withShop(shop.id, () => stop.destroy());
  });

  test('without consent no consent is written', async () => {
    const lead = await signedIn(app, shop, shop.crewLead);
    const body = bookBody(shop, { arrivesAt: ownHalfDay(), textConsent: false });
    const answer = await postBooking(lead, shop, body).expect(201);
    expect((answer.body as BookAnswer).toldBy).toEqual({ text: false, email: true });
    const found = await withShop(shop.id, () => Consent.count({ where: { personId: shop.crewLead.id } }));
    expect(found).toBe(0);
  });
});

describe('times', () => {
  test('a half-day with too little room is full for this visit and free for a smaller one', async () => {
    const arrivesAt = ownHalfDay();
    const four = bookBody(shop, { arrivesAt, machines: Array.from({ length: 4 }, () => newMachine(shop)) });
    await postBooking(manager, shop, four).expect(201);
    const isFull = async (machines: number) => {
      const { days } = (await visitor(app).get(`/api/shops/${shop.slug}/times?machines=${machines}`))
        .body as TimesView;
      const times = days.flatMap((day) => day.times);
      return times.find(({ at }) => new Date(at).toISOString() === arrivesAt)?.full;
    };
    expect([await isFull(1), await isFull(2)]).toEqual([false, true]);

    const before = await countsOf();
    const two = bookBody(shop, { arrivesAt, machines: [newMachine(shop), newMachine(shop)] });
    const answer = await postBooking(manager, shop, two);
    expect([answer.status, errorOf(answer).code]).toEqual([409, 'times_full']);
    const { half, next } = errorOf(answer).details as TimesFullDetails;
    expect(half).toBe(arrivesAt.includes('T16') ? 'am' : 'pm');
    expect(next).toHaveLength(6);
    expect(next.map((at) => new Date(at).toISOString())).not.toContain(arrivesAt);
    expect(await countsOf()).toEqual(before);
    expect(await placesTaken(arrivesAt)).toBe(4);
    await postBooking(manager, shop, bookBody(shop, { arrivesAt })).expect(201);
  });

  test.each([
    ['between two arrival times', '2026-12-07T16:10:00.000Z'],
    ['on a Saturday', '2026-12-05T16:00:00.000Z'],
    ['already past', '2026-12-03T14:30:00.000Z'],
    ['in five weeks', '2027-01-07T16:00:00.000Z'],
  ])('%s is not offered', async (_what, arrivesAt) => {
    const answer = await postBooking(manager, shop, bookBody(shop, { arrivesAt }));
    expect([answer.status, faultsOf(answer)]).toEqual([400, ['arrivesAt']]);
  });
});

/** How much there is of what a booking writes. */
async function countsOf(): Promise<number[]> {
  return withShop(shop.id, async () => [
    await Visit.count(),
    await Job.count(),
    await Tag.count(),
    await Machine.count(),
    await Person.count(),
    await Notice.count(),
    await Link.count(),
    (await rows('select 1 from idempotency_keys')).length,
  ]);
}

describe('machines', () => {
  test('another crew’s are not a crew lead’s to book; his own are', async () => {
    const lead = await signedIn(app, shop, shop.crewLead);
    const [own, , ofOtherCrew, ofNoCrew] = shop.machines;
    const arrivesAt = ownHalfDay();
    for (const machine of [ofOtherCrew, ofNoCrew]) {
      const refused = await postBooking(
        lead,
        shop,
        bookBody(shop, { arrivesAt, machines: [inFleet(machine?.id)] }),
      );
      expect([refused.status, faultsOf(refused)]).toEqual([400, ['machines.0.machineId']]);
    }
    await postBooking(lead, shop, bookBody(shop, { arrivesAt, machines: [inFleet(own?.id)] })).expect(201);
  });

  test('one that is booked already cannot be booked again, nor twice in one visit', async () => {
    const { id } = await freshMachine();
    const twice = bookBody(shop, { arrivesAt: ownHalfDay(), machines: [inFleet(id), inFleet(id)] });
    expect(faultsOf(await postBooking(manager, shop, twice))).toEqual(['machines.1.machineId']);
    await postBooking(
      manager,
      shop,
      bookBody(shop, { arrivesAt: ownHalfDay(), machines: [inFleet(id)] }),
    ).expect(201);
    const arrivesAt = ownHalfDay();
    const again = await postBooking(manager, shop, bookBody(shop, { arrivesAt, machines: [inFleet(id)] }));
    expect([again.status, errorOf(again).code]).toEqual([409, 'machine_already_booked']);
    expect(await placesTaken(arrivesAt)).toBe(0);
  });

  test('two at once for one machine: one books it', async () => {
    const { id } = await freshMachine();
    const body = bookBody(shop, { arrivesAt: ownHalfDay(), machines: [inFleet(id)] });
    const answers = await Promise.all([1, 2].map(() => postBooking(manager, shop, body)));
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409]);
  });

  test('a kind of complaint that the shop no longer offers is refused at its field', async () => {
    const kind = shop.complaintKinds.at(-1);
    await withShop(shop.id, async () => kind?.update({ active: false }));
    const machines = [newMachine(shop), newMachine(shop, { complaintKindId: kind?.id })];
    const answer = await postBooking(manager, shop, bookBody(shop, { arrivesAt: ownHalfDay(), machines }));
    expect([answer.status, faultsOf(answer)]).toEqual([400, ['machines.1.complaintKindId']]);
  });
});

describe('the same request again', () => {
  test('the same key gets the same answer, and there is one visit', async () => {
    const key = newKey();
    const body = bookBody(shop, { arrivesAt: ownHalfDay() });
    const before = await withShop(shop.id, () => Visit.count());
    const first = await postBooking(manager, shop, body, key);
    const second = await postBooking(manager, shop, body, key);
    expect([second.status, second.body]).toEqual([201, first.body]);
    expect(await withShop(shop.id, () => Visit.count())).toBe(before + 1);
  });

  test('at the same moment too', async () => {
    const key = newKey();
    const arrivesAt = ownHalfDay();
    const body = bookBody(shop, { arrivesAt });
    const answers = await Promise.all([1, 2, 3, 4].map(() => postBooking(manager, shop, body, key)));
    for (const { body: said } of answers) expect(said).toEqual(answers[0]?.body);
    expect(answers.map(({ status }) => status)).toEqual([201, 201, 201, 201]);
    expect(await placesTaken(arrivesAt)).toBe(1);
  });

  test('the key with other words, or from somebody else, is refused', async () => {
    const key = newKey();
    const body = bookBody(shop, { arrivesAt: ownHalfDay() });
    await postBooking(manager, shop, body, key).expect(201);
    const other = await postBooking(manager, shop, { ...body, note: 'another' }, key);
    expect([other.status, errorOf(other).code]).toEqual([422, 'key_reused']);
    const lead = await signedIn(app, shop, shop.crewLead);
    expect((await postBooking(lead, shop, body, key)).status).toBe(422);
  });

  test('a key whose first try failed is free', async () => {
    const key = newKey();
    const wrong = bookBody(shop, { arrivesAt: '2026-12-05T16:00:00.000Z' });
    await postBooking(manager, shop, wrong, key).expect(400);
    await postBooking(manager, shop, bookBody(shop, { arrivesAt: ownHalfDay() }), key).expect(201);
  });
});
