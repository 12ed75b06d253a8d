/** Who hears of what, when, in how many texts. */
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { withShop } from '#server/lib/db';
import type { Person } from '#server/models/index';
import { makeShop, type TestShop } from '../support/factories';
import { bookJobs, bringTo, newMachine, postAct, postMove, met, sheetOf, atGate } from '../support/jobs';
import { pass, signedIn, type Client } from '../support/testApp';
import { agreeToTexts, startOutbox, until, type Outbox } from './support/outbox';

const SECOND = 1000;
const MINUTE = 60 * SECOND;

let outbox: Outbox;
let shop: TestShop;
let counter: Client;
beforeAll(async () => void (outbox = await startOutbox()));
afterAll(() => outbox.stop());
beforeEach(async () => {
  outbox.app.clock.set(new Date('2026-12-03T16:00:00Z'));
  shop = await makeShop(outbox.app);
  counter = await signedIn(outbox.app, shop, shop.staff.counter);
});

/** A visit booked by the crew lead, whose manager agreed to texts earlier; the booking itself told and settled. */
async function bookedVisit(machines = 1): Promise<string[]> {
  await agreeToTexts(shop, shop.manager.id, outbox.app.clock.now());
  const list = Array.from({ length: machines }, (_, index) =>
    newMachine(shop, { fleetNumber: `A${index + 1}` }),
  );
  const { jobs } = await bookJobs(outbox.app, shop, { machines: list.slice(0, 4) }, shop.crewLead);
  await outbox.work();
  return jobs.map(({ tag }) => tag);
}
const texts = (person: Person) => outbox.textsTo(person.phone).map(({ body }) => body);
const mails = (person: Person) => outbox.mailsTo(person.email);
/** The gate's tick, then everything that a text may wait for. */
async function checkIn(tag: string): Promise<void> {
  const answer = await postMove(counter, tag, 'checked_in', { checkIn: atGate });
  expect(answer.text).toContain('"checked_in"');
}

describe('a booking', () => {
  it('is told at once: text and e-mail to whoever booked, e-mail to the manager, with the calendar file', async () => {
    await bookJobs(outbox.app, shop, {}, shop.crewLead);
    await outbox.work();
    expect(texts(shop.crewLead)).toHaveLength(1);
    expect(texts(shop.crewLead)[0]).toMatch(/^Shop \d+: 1 machine booked for Mon 7 Dec, 9:00 am MST\. Stub /);
    expect(texts(shop.crewLead)[0]).toContain('Reply STOP to stop, HELP for help');
    expect(texts(shop.manager)).toEqual([]);
    for (const person of [shop.crewLead, shop.manager]) {
      const [mail, ...more] = await mails(person);
      expect(more).toEqual([]);
      expect(mail?.attachments.map(({ filename }) => filename)).toEqual(['visit.ics']);
      expect(mail?.headers['list-unsubscribe-post']).toBe('List-Unsubscribe=One-Click');
    }
    expect(await mails(shop.bookkeeper)).toEqual([]);
  });

  it('is told once by each way to a manager who booked himself', async () => {
    await bookJobs(outbox.app, shop, {}, shop.manager);
    await outbox.work();
    expect(texts(shop.manager)).toHaveLength(1);
    expect(await mails(shop.manager)).toHaveLength(1);
  });

  it('is told by e-mail alone where texts were not agreed to', async () => {
    const { toldBy } = await bookJobs(outbox.app, shop, { textConsent: false }, shop.crewLead);
    await outbox.work();
    expect(toldBy).toEqual({ text: false, email: true });
    expect(texts(shop.crewLead)).toEqual([]);
    expect(await mails(shop.crewLead)).toHaveLength(1);
  });

  it('goes to whoever booked by night, and to the manager in the morning', async () => {
    outbox.app.clock.set(new Date('2026-12-04T05:00:00Z'));
    await bookJobs(outbox.app, shop, {}, shop.crewLead);
    await outbox.work();
    expect(texts(shop.crewLead)).toHaveLength(1);
    expect(await mails(shop.manager)).toEqual([]);
    outbox.app.clock.set(new Date('2026-12-04T15:00:01Z'));
    await outbox.work();
    expect(await mails(shop.manager)).toHaveLength(1);
  });
});

describe('the grace', () => {
  it('holds a text for as long as the move can be undone, and the sheet says until when', async () => {
    const [tag = ''] = await bookedVisit();
    const before = texts(shop.crewLead).length;
    await checkIn(tag);
    pass(outbox.app, 59 * SECOND);
    await outbox.work();
    expect(texts(shop.crewLead)).toHaveLength(before);
    const held = (await sheetOf(counter, tag)).notices.filter(({ state }) => state === 'held');
    expect(held).toHaveLength(1);
    expect(held[0]).toMatchObject({ kind: 'checked_in', channel: 'text', to: shop.crewLead.phone });
    expect(held[0]?.releaseAt).toBe('2026-12-03T16:01:00.000Z');
    expect(held[0]?.body).toMatch(/: we have No\. A1\. Stub /);
    pass(outbox.app, 2 * SECOND);
    await outbox.work();
    expect(texts(shop.crewLead)).toHaveLength(before + 1);
    expect(texts(shop.crewLead).at(-1)).toMatch(/: we have No\. A1\. Stub /);
  });

  it('lets an undo within it go unheard', async () => {
    const [tag = ''] = await bookedVisit();
    const before = texts(shop.crewLead).length;
    await checkIn(tag);
    const { job } = await sheetOf(counter, tag);
    pass(outbox.app, 30 * SECOND);
    await postAct(counter, tag, 'undo', { eventId: job.undo?.eventId }).expect(200);
    pass(outbox.app, 10 * MINUTE);
    await outbox.work();
    expect(texts(shop.crewLead)).toHaveLength(before);
    expect((await sheetOf(counter, tag)).notices.map(({ kind, state }) => `${kind} ${state}`)).toContain(
      'checked_in withdrawn',
    );
  });

  it('makes one text of three machines, when the youngest grace has ended', async () => {
    const tags = await bookedVisit(3);
    const before = texts(shop.crewLead).length;
    for (const tag of tags) {
      await checkIn(tag);
      pass(outbox.app, 40 * SECOND);
      await outbox.work();
    }
    expect(texts(shop.crewLead)).toHaveLength(before);
    pass(outbox.app, 21 * SECOND);
    await outbox.work();
    expect(texts(shop.crewLead)).toHaveLength(before + 1);
    expect(texts(shop.crewLead).at(-1)).toMatch(/: we have No\. A1, No\. A2 and No\. A3\. Stub /);
  });

  it('waits three graces at most; what is younger follows in a text of its own', async () => {
    const tags = await bookedVisit(4);
    const before = texts(shop.crewLead).length;
    for (const tag of tags) {
      await checkIn(tag);
      pass(outbox.app, 50 * SECOND);
      await outbox.work();
    }
    // The first came at 0 s, so its text goes at 180 s with those of 0, 50 and 100 s; the fourth came at 150 s.
    expect(texts(shop.crewLead)).toHaveLength(before + 1);
    expect(texts(shop.crewLead).at(-1)).toMatch(/: we have No\. A1, No\. A2 and No\. A3\. Stub /);
    pass(outbox.app, 11 * SECOND);
    await outbox.work();
    expect(texts(shop.crewLead)).toHaveLength(before + 2);
    expect(texts(shop.crewLead).at(-1)).toMatch(/: we have No\. A4\. Stub /);
  });

  it('keeps one withdrawn machine out of a text that speaks of the others', async () => {
    const tags = await bookedVisit(2);
    for (const tag of tags) await checkIn(tag);
    const { job } = await sheetOf(counter, tags[0] ?? '');
    await postAct(counter, tags[0] ?? '', 'undo', { eventId: job.undo?.eventId }).expect(200);
    pass(outbox.app, 2 * MINUTE);
    await outbox.work();
    expect(texts(shop.crewLead).at(-1)).toMatch(/: we have No\. A2\. Stub /);
  });
});

describe('ready', () => {
  it('rings at the one who booked and at the manager, once each', async () => {
    const [tag = ''] = await bookedVisit();
    await bringTo(counter, tag, 'test_run');
    pass(outbox.app, 10 * MINUTE);
    await outbox.work();
    const before = { lead: texts(shop.crewLead).length, manager: texts(shop.manager).length };
    await postMove(counter, tag, 'ready', { outcome: 'repaired', lines: [met('passing_run')] });
    pass(outbox.app, 61 * SECOND);
    await outbox.work();
    await outbox.work();
    expect(texts(shop.crewLead).slice(before.lead)).toEqual([
      expect.stringMatching(/: No\. A1 is ready\. Stub /),
    ]);
    expect(texts(shop.manager).slice(before.manager)).toEqual([
      expect.stringMatching(/: No\. A1 is ready\. Stub /),
    ]);
  });

  it('is named as what it is when nothing was repaired', async () => {
    const [tag = ''] = await bookedVisit();
    await checkIn(tag);
    await postMove(counter, tag, 'ready', { outcome: 'given_back', lines: [met('asked_to_stop')] });
    pass(outbox.app, 5 * MINUTE);
    await outbox.work();
    expect(texts(shop.crewLead).at(-1)).toMatch(/: No\. A1 goes back as it is, ready to pick up\. Stub /);
    expect(texts(shop.crewLead).join()).not.toContain('is ready.');
  });

  it('overtakes a check-in that nobody has heard of yet', async () => {
    const [tag = ''] = await bookedVisit();
    const before = texts(shop.crewLead).length;
    await bringTo(counter, tag, 'ready');
    pass(outbox.app, 5 * MINUTE);
    await outbox.work();
    expect(texts(shop.crewLead).slice(before)).toEqual([expect.stringMatching(/: No\. A1 is ready\. Stub /)]);
    const states = (await sheetOf(counter, tag)).notices.map(({ kind, state }) => `${kind} ${state}`);
    expect(states).toContain('checked_in overtaken');
  });

  it('is not said of a machine that was collected or went back meanwhile', async () => {
    const [one = '', two = ''] = await bookedVisit(2);
    const before = texts(shop.crewLead).length;
    await bringTo(counter, one, 'collected');
    await bringTo(counter, two, 'ready');
    await postMove(counter, two, 'repair');
    pass(outbox.app, 5 * MINUTE);
    await outbox.work();
    await outbox.work();
    expect(texts(shop.crewLead).slice(before).join()).not.toContain('ready');
    const states = (await sheetOf(counter, two)).notices.map(({ kind, state }) => `${kind} ${state}`);
    expect(states).toContain('ready overtaken');
  });

  it('goes after all when the step back is itself undone', async () => {
    const [tag = ''] = await bookedVisit();
    await bringTo(counter, tag, 'ready');
    pass(outbox.app, 50 * SECOND);
    await postMove(counter, tag, 'repair');
    pass(outbox.app, 20 * SECOND);
    await outbox.work();
    expect(texts(shop.crewLead).join()).not.toContain('ready');
    const { job } = await sheetOf(counter, tag);
    await postAct(counter, tag, 'undo', { eventId: job.undo?.eventId }).expect(200);
    pass(outbox.app, 5 * MINUTE);
    await outbox.work();
    expect(texts(shop.crewLead).at(-1)).toMatch(/: No\. A1 is ready\. Stub /);
  });
});

describe('collected and cancelled', () => {
  it('tells the manager of a collected machine by plain e-mail, and nobody by text', async () => {
    const [tag = ''] = await bookedVisit();
    await bringTo(counter, tag, 'ready');
    pass(outbox.app, 5 * MINUTE);
    await outbox.work();
    const before = texts(shop.crewLead).length;
    await postMove(counter, tag, 'collected', {
      lines: [met('hand_over'), met('who_may_collect'), met('paid', { amountCents: 4200 })],
    });
    pass(outbox.app, 5 * MINUTE);
    await outbox.work();
    expect(texts(shop.crewLead)).toHaveLength(before);
    const mail = (await mails(shop.manager)).at(-1);
    expect(mail?.subject).toContain('Collected: No. A1');
    // No sum before the bill is closed, and none in any case where the reader may not see it.
    expect(`${mail?.text}${mail?.html}`).not.toMatch(/42\.00|\$/);
    expect((await mails(shop.crewLead)).at(-1)?.subject).not.toContain('Collected');
  });

  it('tells of a cancelled machine, with a calendar file that replaces the first', async () => {
    const [one = ''] = await bookedVisit(2);
    await postMove(counter, one, 'cancelled');
    pass(outbox.app, 2 * MINUTE);
    await outbox.work();
    expect(texts(shop.crewLead).at(-1)).toMatch(/: No\. A1 for Mon 7 Dec is cancelled\. Stub /);
    const [first, second] = await mails(shop.manager);
    const line = (mail: typeof first, name: string) =>
      mail?.attachments[0]?.content.split(/\r\n/).find((each) => each.startsWith(name));
    expect(line(second, 'UID:')).toBe(line(first, 'UID:'));
    expect([line(first, 'SEQUENCE:'), line(second, 'SEQUENCE:')]).toEqual(['SEQUENCE:0', 'SEQUENCE:1']);
    expect(line(second, 'STATUS:')).toBe('STATUS:CONFIRMED');
  });
});

describe('a correction', () => {
  it('withdraws what has not gone', async () => {
    const [tag = ''] = await bookedVisit();
    await bringTo(counter, tag, 'ready');
    const { job } = await sheetOf(counter, tag);
    await postAct(counter, tag, 'corrections', {
      version: job.version,
      to: 'repair',
      reason: 'wrong tag',
      tell: true,
    }).expect(200);
    pass(outbox.app, 5 * MINUTE);
    await outbox.work();
    expect(texts(shop.crewLead).join()).not.toMatch(/ready|too soon/);
  });

  it('names those who were told, and tells them once', async () => {
    const [tag = ''] = await bookedVisit();
    await bringTo(counter, tag, 'ready');
    pass(outbox.app, 5 * MINUTE);
    await outbox.work();
    const { job, told } = await sheetOf(counter, tag);
    expect(told.map(({ personId }) => personId)).toContain(shop.manager.id);
    await postAct(counter, tag, 'corrections', {
      version: job.version,
      to: 'repair',
      reason: 'wrong tag',
      tell: true,
    }).expect(200);
    pass(outbox.app, 2 * MINUTE);
    await outbox.work();
    for (const person of [shop.crewLead, shop.manager]) {
      expect(texts(person).filter((text) => text.includes('too soon'))).toEqual([
        expect.stringContaining('we wrote too soon, sorry. No. A1: in repair.'),
      ]);
    }
  });
});

describe('quiet hours', () => {
  /** Ready at 19:59:30 in Denver: its grace ends half a minute into the night. */
  async function readyByNight(): Promise<string> {
    const [tag = ''] = await bookedVisit();
    await bringTo(counter, tag, 'test_run');
    outbox.app.clock.set(new Date('2026-12-04T02:59:30Z'));
    await outbox.work();
    const client = await signedIn(outbox.app, shop, shop.staff.counter);
    await postMove(client, tag, 'ready', { outcome: 'repaired', lines: [met('passing_run')] });
    return tag;
  }
  const isRung = (person: Person) => texts(person).some((text) => text.includes('is ready'));

  it('holds a text until the morning', async () => {
    await readyByNight();
    outbox.app.clock.set(new Date('2026-12-04T03:01:00Z'));
    await outbox.work();
    expect(isRung(shop.crewLead)).toBe(false);
    outbox.app.clock.set(new Date('2026-12-04T14:59:59Z'));
    await outbox.work();
    expect(isRung(shop.crewLead)).toBe(false);
    outbox.app.clock.set(new Date('2026-12-04T15:00:00Z'));
    await outbox.work();
    expect(isRung(shop.crewLead)).toBe(true);
  });

  it('goes by the person’s zone, else by the account’s, else by the shop’s', async () => {
    await withShop(shop.id, async () => {
      await shop.account.update({ zone: 'America/Los_Angeles' });
      await shop.manager.update({ zone: 'Pacific/Honolulu' });
    });
    await readyByNight();
    // 20:01 in Denver is 19:01 in Los Angeles and 17:01 in Honolulu.
    outbox.app.clock.set(new Date('2026-12-04T03:01:00Z'));
    await outbox.work();
    expect([isRung(shop.crewLead), isRung(shop.manager)]).toEqual([true, true]);
  });

  it('is broken for a person who has acted within the last 15 minutes', async () => {
    await withShop(shop.id, () => shop.manager.update({ lastActedAt: new Date('2026-12-04T02:50:00Z') }));
    await readyByNight();
    outbox.app.clock.set(new Date('2026-12-04T03:01:00Z'));
    await outbox.work();
    expect([isRung(shop.crewLead), isRung(shop.manager)]).toEqual([false, true]);
  });
});

describe('what became of a text', () => {
  it('is told by the provider and shown on the job', async () => {
    const [tag = ''] = await bookedVisit();
    const stateOf = async () =>
      (await sheetOf(counter, tag)).notices.find(({ channel }) => channel === 'text')?.state;
    await until('the text is delivered', async () => (await stateOf()) === 'delivered');
  });
});
