/** What the provider and the mail server can do to a message, and what becomes of it. */
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { withShop } from '#server/lib/db';
import { sendCodeText } from '#server/messages/sendCode';
import { stopTexts } from '#server/messages/optOut';
import type { Message } from '#server/models/index';
import { AuditEvent, Consent, OptOut } from '#server/models/index';
import { claimMessage } from '#server/messages/claim';
import { taskCtx } from '#server/messages/taskCtx';
import { makeShop, type TestShop } from '../support/factories';
import { atGate, bookJobs, newMachine, postMove, sheetOf } from '../support/jobs';
import { ctxOf, pass, signedIn, visitor, type Client } from '../support/testApp';
import { startOutbox, until, type Outbox } from './support/outbox';

const SECOND = 1000;
const MINUTE = 60 * SECOND;
const HOUR = 60 * MINUTE;

let outbox: Outbox;
let shop: TestShop;
let counter: Client;
let tag: string;
beforeAll(async () => void (outbox = await startOutbox()));
afterAll(() => outbox.stop());

/** A visit whose booking is told; then a machine is checked in, and the grace of its text is over. */
beforeEach(async () => {
  outbox.app.clock.set(new Date('2026-12-03T16:00:00Z'));
  outbox.sms.gateway.clear();
  shop = await makeShop(outbox.app);
  counter = await signedIn(outbox.app, shop, shop.staff.counter);
  const machines = [newMachine(shop, { fleetNumber: 'A1' })];
  const { jobs } = await bookJobs(outbox.app, shop, { machines }, shop.crewLead);
  tag = jobs[0]?.tag ?? '';
  await outbox.work();
  await postMove(counter, tag, 'checked_in', { checkIn: atGate });
  pass(outbox.app, 61 * SECOND);
});

const texts = () => outbox.textsTo(shop.crewLead.phone).filter(({ body }) => body.includes('we have'));
const mails = async () =>
  (await outbox.mailsTo(shop.crewLead.email)).filter(({ subject }) => subject.includes('Checked in'));
async function message(): Promise<Message> {
  const found = (await outbox.messagesOf(shop)).filter(
    ({ channel, mergeable }) => channel === 'text' && mergeable,
  );
  expect(found).toHaveLength(1);
  return found[0] as Message;
}
const notice = async () =>
  (await sheetOf(counter, tag)).notices.find(
    ({ kind, channel }) => kind === 'checked_in' && channel === 'text',
  );

describe('the provider has trouble', () => {
  it('429: the text waits and goes once', async () => {
    outbox.sms.gateway.set({ faults: [{ kind: '429', next: 2 }] });
    await outbox.work();
    expect([(await message()).status, texts().length]).toEqual(['pending', 0]);
    pass(outbox.app, 2 * SECOND);
    await outbox.work();
    expect((await message()).attempt).toBe(2);
    pass(outbox.app, 4 * SECOND);
    await outbox.work();
    expect([(await message()).status, texts().length]).toEqual(['accepted', 1]);
  });

  it.each(['dropAfterAccept', '500AfterAccept'] as const)(
    '%s: the text is found at the provider and not sent again',
    async (kind) => {
      outbox.sms.gateway.set({ faults: [{ kind, next: 1 }], callbacks: { off: true } });
      await outbox.work();
      expect([(await message()).status, texts().length]).toEqual(['unknown', 1]);
      pass(outbox.app, 14 * SECOND);
      await outbox.work();
      expect((await message()).status).toBe('unknown');
      pass(outbox.app, 2 * SECOND);
      await outbox.work();
      expect((await message()).status).toBe('accepted');
      expect((await message()).providerId).toBe(texts()[0]?.sid);
      pass(outbox.app, HOUR);
      await outbox.work();
      expect(texts()).toHaveLength(1);
    },
  );

  it('an error before acceptance: only when it is missing twice, 15 s apart, does it go again', async () => {
    outbox.sms.gateway.set({ faults: [{ kind: '503', next: 1 }] });
    await outbox.work();
    for (const looks of [0, 1]) {
      expect((await message()).looksWithoutFind).toBe(looks);
      pass(outbox.app, 15 * SECOND);
      await outbox.work();
    }
    expect([(await message()).status, (await message()).attempt, texts().length]).toEqual(['accepted', 2, 1]);
  });

  it('a list that lags behind does not make it go twice', async () => {
    outbox.sms.gateway.set({
      faults: [{ kind: 'dropAfterAccept', next: 1 }],
      callbacks: { off: true },
      listLagMs: 400,
    });
    await outbox.work();
    pass(outbox.app, 15 * SECOND);
    await outbox.work();
    expect((await message()).looksWithoutFind).toBe(1);
    await new Promise((resolve) => setTimeout(resolve, 450));
    pass(outbox.app, 15 * SECOND);
    await outbox.work();
    expect([(await message()).status, texts().length]).toEqual(['accepted', 1]);
  });

  it('a report that comes before our own commit settles it', async () => {
    outbox.sms.gateway.set({ faults: [{ kind: 'hangAfterAccept', ms: 600, next: 1 }] });
    const working = outbox.work();
    await until('the report has settled it', async () => (await message()).status === 'accepted');
    expect((await message()).claim).not.toBeNull();
    await working;
    await until('it is delivered', async () => (await message()).delivery === 'delivered');
    expect([(await message()).providerId, texts().length]).toEqual([texts()[0]?.sid, 1]);
  });

  it('is given up visibly after four hours, and told by e-mail', async () => {
    outbox.sms.gateway.set({ faults: [{ kind: '429' }] });
    await outbox.work();
    for (let minutes = 0; minutes < 245; minutes += 35) {
      pass(outbox.app, 35 * MINUTE);
      await outbox.work();
    }
    expect([(await message()).status, (await message()).problem, texts().length]).toEqual([
      'failed',
      'gave_up',
      0,
    ]);
    counter = await signedIn(outbox.app, shop, shop.staff.counter);
    expect((await notice())?.problem).toMatch(/four hours/);
    expect(await mails()).toHaveLength(1);
  });
});

describe('the phone', () => {
  it('21610: is put on the list of those that want no texts, and told by e-mail', async () => {
    outbox.sms.gateway.set({ optedOut: [shop.crewLead.phone ?? ''] });
    await outbox.work();
    expect([(await message()).status, (await message()).errorCode]).toEqual(['failed', '21610']);
    expect(await mails()).toHaveLength(1);
    const row = await withShop(shop.id, () =>
      OptOut.findOne({ where: { phone: shop.crewLead.phone ?? '' } }),
    );
    expect([row?.optedOut, row?.source]).toEqual([true, 'carrier']);
  });

  it('21614: a number that takes no texts is shown on the job, and told by e-mail', async () => {
    outbox.sms.gateway.set({ notMobile: [shop.crewLead.phone ?? ''] });
    await outbox.work();
    expect(await notice()).toMatchObject({
      state: 'failed',
      problem: expect.stringContaining('(21614)') as string,
    });
    expect(await mails()).toHaveLength(1);
    expect(await withShop(shop.id, () => OptOut.count())).toBe(0);
  });

  it('a text that is reported undelivered falls back to e-mail and is flagged', async () => {
    outbox.sms.gateway.set({ faults: [{ kind: 'undelivered', errorCode: 30003 }] });
    await outbox.work();
    await until('the report is in', async () => (await notice())?.state === 'undelivered');
    expect((await notice())?.problem).toContain('30003');
    await outbox.work();
    expect(await mails()).toHaveLength(1);
  });

  it('that said STOP while its text was held gets the e-mail instead', async () => {
    await postStop();
    await outbox.work();
    expect([(await message()).status, (await message()).problem]).toEqual(['withdrawn', 'opted_out']);
    expect(texts()).toEqual([]);
    expect(await mails()).toHaveLength(1);
  });

  async function postStop(): Promise<void> {
    const person = shop.staff.counter;
    await withShop(shop.id, () => stopTexts(ctxOf(outbox.app, shop.id, person), shop.crewLead.id));
    const [consent] = await withShop(shop.id, () => Consent.findAll({ where: { kind: 'withdrawn' } }));
    expect(consent).toMatchObject({ personId: shop.crewLead.id, source: 'staff' });
    const event = await withShop(shop.id, () => AuditEvent.findOne({ where: { kind: 'texts_stopped' } }));
    expect(event?.personId).toBe(person.id);
  }
});

describe('a message that cannot be made ready', () => {
  it('waits a minute, says so on the job, and goes when the fault is mended', async () => {
    const { id } = await message();
    await outbox.owner.query(`alter table links rename to links_away`);
    await expect(outbox.work()).rejects.toThrow(/links/);
    await outbox.owner.query(`alter table links_away rename to links`);
    expect((await notice())?.problem).toMatch(/could not be made ready/);
    await outbox.work();
    expect(texts()).toEqual([]);
    pass(outbox.app, MINUTE);
    await outbox.work();
    expect([(await message()).id, (await message()).status, (await message()).problem]).toEqual([
      id,
      'accepted',
      null,
    ]);
  });

  it('and a shop without a number texts nobody, but mails', async () => {
    await outbox.owner.query('delete from sender_numbers where shop_id = $1', [shop.id]);
    await outbox.work();
    expect([(await message()).status, (await message()).problem]).toEqual(['failed', 'no_sender']);
    expect(await mails()).toHaveLength(1);
  });
});

describe('the gateways', () => {
  it('refuse to work while a unit of work is open', async () => {
    const inUnit = (act: () => Promise<unknown>) => withShop(shop.id, act);
    const text = { from: shop.sender, to: phoneOf(), body: 'x', statusCallback: '', validitySeconds: 60 };
    await expect(inUnit(() => outbox.senders.sms.send(text))).rejects.toThrow('inside a unit of work');
    await expect(inUnit(() => outbox.senders.lookUp(text.to))).rejects.toThrow('inside a unit of work');
  });
  const phoneOf = () => shop.crewLead.phone ?? '';
});

describe('a worker that died', () => {
  it('leaves a claim that another takes over: the text is looked for before it goes', async () => {
    const { id } = await message();
    await withShop(shop.id, () =>
      claimMessage(taskCtx(outbox.app.services, shop.id), id, 'dead-before-it-sent'),
    );
    expect((await message()).status).toBe('sending');
    await outbox.work();
    expect([(await message()).status, texts().length]).toEqual(['unknown', 0]);
    for (let looks = 0; looks < 2; looks += 1) {
      pass(outbox.app, 15 * SECOND);
      await outbox.work();
    }
    expect([(await message()).status, texts().length]).toEqual(['accepted', 1]);
  });

  it('is not taken for dead while it lives: nobody touches its claim', async () => {
    const { id } = await message();
    await withShop(shop.id, () => claimMessage(taskCtx(outbox.app.services, shop.id), id, 'alive'));
    await outbox.owner.query(
      `insert into worker_heartbeats (worker_id, pool_id, started_at, beat_at)
       values ('alive', 'p', clock_timestamp(), clock_timestamp())`,
    );
    await outbox.work();
    expect((await message()).status).toBe('sending');
    await outbox.owner.query(`delete from worker_heartbeats where worker_id = 'alive'`);
    await outbox.work();
    expect((await message()).status).toBe('unknown');
  });
});

describe('a one-time code', () => {
  const phone = () => shop.manager.phone ?? '';
  async function askForCode(): Promise<void> {
    await withShop(shop.id, () =>
      sendCodeText(ctxOf(outbox.app, shop.id), {
        ...{ phone: phone(), language: 'en', code: '482916', personId: null },
        ...{ shopTextName: 'Cinder Flat', purpose: 'sign_in' },
      }),
    );
  }
  const rowOf = async () => (await outbox.messagesOf(shop)).find(({ kind }) => kind === 'code');

  it('goes at once, also by night, and its words are blanked when it has gone', async () => {
    outbox.app.clock.set(new Date('2026-12-04T08:00:00Z'));
    await askForCode();
    await outbox.work();
    expect(outbox.textsTo(phone()).map(({ body }) => body)).toEqual([
      'Cinder Flat: 482916 is your code. It works for 10 minutes. Reply STOP to stop, HELP for help',
    ]);
    expect([(await rowOf())?.status, (await rowOf())?.body]).toEqual(['accepted', null]);
    expect(outbox.app.log.join('')).not.toContain('482916');
  });

  it('that was not sent in ten minutes is never sent', async () => {
    outbox.sms.gateway.set({ faults: [{ kind: '429', next: 1 }] });
    await askForCode();
    await outbox.work();
    pass(outbox.app, 10 * MINUTE);
    await outbox.work();
    expect([(await rowOf())?.status, (await rowOf())?.problem, (await rowOf())?.body]).toEqual([
      'failed',
      'expired',
      null,
    ]);
    expect(outbox.textsTo(phone())).toEqual([]);
  });
});

describe('an e-mail', () => {
  const booked = async () =>
    (await outbox.mailsTo(shop.manager.email)).filter(({ subject }) => subject.includes('Booked'));

  it('carries the one-click end of e-mails, which works without a cookie', async () => {
    const [mail] = await booked();
    const address = /<(http[^>]+)>/.exec(mail?.headers['list-unsubscribe'] ?? '')?.[1] ?? '';
    const path = new URL(address).pathname;
    const before = await visitor(outbox.app).get(`/api${path}`).expect(200);
    expect(before.body).toEqual({ shopName: shop.name, email: shop.manager.email, already: false });
    const oneClick = await fetch(address, {
      method: 'POST',
      headers: { 'Content-Type': 'application/x-www-form-urlencoded' },
      body: 'List-Unsubscribe=One-Click',
    });
    expect(oneClick.status).toBe(200);
    const after = await visitor(outbox.app).get(`/api${path}`).expect(200);
    expect((after.body as { already: boolean }).already).toBe(true);
    await bookJobs(outbox.app, shop, {}, shop.manager);
    await outbox.work();
    expect(await booked()).toHaveLength(1);
    await visitor(outbox.app)
      .get(`/api${path.slice(0, -1)}_`)
      .expect(404);
  });

  it('lets nobody write into its headers', async () => {
    await outbox.app.owner.query(`update shops set name = E'Flat\\r\\nBcc: evil@example.com' where id = $1`, {
      bind: [shop.id],
    });
    await bookJobs(outbox.app, shop, {}, shop.manager);
    await outbox.work();
    const mail = (await booked()).at(-1);
    expect(mail?.from).toContain('Flat Bcc: evil@example.com');
    expect([mail?.headers.bcc, mail?.envelope.to]).toEqual([undefined, [shop.manager.email]]);
    expect(await outbox.mailsTo('evil@example.com')).toEqual([]);
  });

  it('is tried again when the server is away, and refused for good only by a refusal', async () => {
    outbox.mail.set([{ kind: 'refuse', code: 451, next: 1 }]);
    await bookJobs(outbox.app, shop, {}, shop.manager);
    await outbox.work();
    expect(await booked()).toHaveLength(1);
    pass(outbox.app, 2 * SECOND);
    await outbox.work();
    expect(await booked()).toHaveLength(2);
    outbox.mail.set([{ kind: 'refuse', code: 550, next: 1 }]);
    await bookJobs(outbox.app, shop, {}, shop.manager);
    await outbox.work();
    pass(outbox.app, HOUR);
    await outbox.work();
    expect(await booked()).toHaveLength(2);
    const row = (await outbox.messagesOf(shop)).find(({ status }) => status === 'failed');
    expect([row?.channel, row?.problem, row?.errorCode]).toEqual(['email', 'mail_refused', '550']);
  });

  it('says who sends it, and has one Message-ID on every try', async () => {
    const [mail] = await booked();
    const row = (await outbox.messagesOf(shop)).find(({ toAddress }) => toAddress === shop.manager.email);
    expect(mail?.messageId).toBe(`<${row?.id}@benchbell.example>`);
    expect(mail?.from).toContain(shop.name);
    expect(mail?.headers['reply-to']).toBe(shop.settings.email);
  });
});
