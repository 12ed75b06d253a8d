/** What people text to the shop, and the reports of the provider: both only with its signature. */
import { randomBytes } from 'node:crypto';
import twilio from 'twilio';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { withShop } from '#server/lib/db';
import { Consent, InboundText, OptOut, Person, TextStatus } from '#server/models/index';
import type { GateView } from '#shared/schemas/job';
import { addPerson, makeShop, type TestShop } from '../support/factories';
import { atGate, bookJobs, newMachine, postMove, sheetOf } from '../support/jobs';
import { pass, signedIn, type Client } from '../support/testApp';
import { startOutbox, type Outbox } from './support/outbox';

let outbox: Outbox;
let shop: TestShop;
let counter: Client;
let tag: string;
beforeAll(async () => void (outbox = await startOutbox()));
afterAll(() => outbox.stop());
beforeEach(async () => {
  outbox.app.clock.set(new Date('2026-12-03T16:00:00Z'));
  shop = await makeShop(outbox.app);
  counter = await signedIn(outbox.app, shop, shop.staff.counter);
  const machines = [newMachine(shop, { fleetNumber: 'A1' })];
  const { jobs } = await bookJobs(outbox.app, shop, { machines }, shop.crewLead);
  tag = jobs[0]?.tag ?? '';
  await outbox.work();
});

const newSid = () => `SM${randomBytes(16).toString('hex')}`;
const phone = () => shop.crewLead.phone ?? '';
async function say(body: string, from = phone()): Promise<void> {
  const { webhookStatus } = await outbox.sms.gateway.receive(from, shop.sender, body);
  expect(webhookStatus).toBe(200);
  await outbox.work();
}
const stored = () => withShop(shop.id, () => InboundText.findAll({ order: ['at', 'id'] }));
const isOptedOut = async () =>
  (await withShop(shop.id, () => OptOut.findOne({ where: { phone: phone() } })))?.optedOut ?? false;
const replies = () => outbox.textsTo(phone()).map(({ body }) => body);
async function unanswered(): Promise<GateView['unanswered']> {
  return ((await counter.get('/api/shop/gate').expect(200)).body as GateView).unanswered;
}

describe('words that act', () => {
  it('STOP ends the texts at once, is recorded, and the next news comes by e-mail', async () => {
    await say('Stop.');
    expect(await isOptedOut()).toBe(true);
    const consents = await withShop(shop.id, () =>
      Consent.findAll({ where: { personId: shop.crewLead.id }, order: ['at', 'kind'] }),
    );
    expect(consents.map(({ kind, source }) => `${kind} ${source}`)).toContain('withdrawn text');
    await postMove(counter, tag, 'checked_in', { checkIn: atGate });
    pass(outbox.app, 61_000);
    await outbox.work();
    expect(replies().some((text) => text.includes('we have'))).toBe(false);
    expect((await outbox.mailsTo(shop.crewLead.email)).at(-1)?.subject).toContain('Checked in: No. A1');
    expect(await unanswered()).toEqual([]);
  });

  it.each(['STOPALL', 'unsubscribe', 'Cancel', 'END', 'quit', 'Revoke', 'OPTOUT', 'opt out'])(
    '%s does too',
    async (word) => {
      await say(word);
      expect(await isOptedOut()).toBe(true);
    },
  );

  it('START opens them again where consent is on record, and says so', async () => {
    await say('STOP');
    await say('START');
    expect(await isOptedOut()).toBe(false);
    expect(replies().at(-1)).toMatch(/^Shop \d+: texts are on again\. Reply STOP to stop/);
  });

  it('START alone opens nothing for a phone that never agreed', async () => {
    const stranger = shop.nextPhone();
    await say('STOP', stranger);
    await say('START', stranger);
    const row = await withShop(shop.id, () => OptOut.findOne({ where: { phone: stranger } }));
    expect(row?.optedOut).toBe(true);
    expect(outbox.textsTo(stranger).at(-1)?.body).toContain('we have no OK from you for texts');
  });

  it('START speaks for those who agreed, not for whoever else shares the phone', async () => {
    const { phone, accountId } = shop.crewLead;
    const { id: mate } = await withShop(shop.id, () =>
      addPerson(outbox.app, shop.id, ['crew_lead'], { phone, accountId }),
    );
    await say('STOP');
    await say('START');
    const kindsOf = (personId: string) =>
      withShop(shop.id, async () => {
        const found = await Consent.findAll({ where: { personId }, order: ['at'] });
        return found.map(({ kind }) => kind);
      });
    expect((await kindsOf(shop.crewLead.id)).at(-1)).toBe('given');
    expect(await kindsOf(mate)).toEqual([]);
  });

  it('HELP says who writes, where to call and how to stop', async () => {
    await say('help');
    expect(replies().at(-1)).toMatch(/^Shop \d+: .*Questions: \(\d{3}\) 555-01\d\d\. Reply STOP to stop\.$/);
  });

  it('are answered in the person’s language', async () => {
    await withShop(shop.id, () => Person.update({ language: 'es' }, { where: { id: shop.crewLead.id } }));
    await say('HELP');
    expect(replies().at(-1)).toContain('Preguntas:');
  });
});

describe('words that only look like it', () => {
  it.each(['OK 4821', 'No 4821', 'ok, 4821.'])(
    '%s is an answer: kept, shown, and ends nothing',
    async (words) => {
      await say(words);
      expect(await isOptedOut()).toBe(false);
      expect(await unanswered()).toMatchObject([
        { kind: 'answer', body: words, tag, personName: shop.crewLead.name },
      ]);
      expect((await sheetOf(counter, tag)).texts).toMatchObject([{ kind: 'answer', body: words }]);
    },
  );

  it.each(['please stop texting me', 'no más mensajes', "don't text me"])(
    '"%s" is flagged for a person',
    async (words) => {
      await say(words);
      expect(await isOptedOut()).toBe(false);
      expect(await unanswered()).toMatchObject([{ kind: 'maybe_stop', body: words }]);
    },
  );

  it('a question is put on the job', async () => {
    await say('when can I pick it up?');
    expect((await sheetOf(counter, tag)).texts).toMatchObject([
      { kind: 'other', body: 'when can I pick it up?' },
    ]);
  });

  it('a yes from somebody who never stopped is left to a person', async () => {
    await say('yes');
    expect(await unanswered()).toMatchObject([{ kind: 'start', body: 'yes' }]);
  });
});

describe('the signature', () => {
  const form = () => ({ MessageSid: newSid(), From: phone(), To: shop.sender, Body: 'STOP' });
  async function post(
    path: string,
    fields: Record<string, string>,
    signature?: string,
    headers = {},
  ): Promise<number> {
    const answer = await fetch(`${outbox.app.env.PUBLIC_URL}${path}`, {
      method: 'POST',
      headers: { ...(signature ? { 'X-Twilio-Signature': signature } : {}), ...headers },
      body: new URLSearchParams(fields),
    });
    return answer.status;
  }
  const sign = (path: string, fields: Record<string, string>, token = outbox.app.env.TWILIO_AUTH_TOKEN) =>
    twilio.getExpectedTwilioSignature(token, `${outbox.app.env.PUBLIC_URL}${path}`, fields);
  const inbound = '/hooks/sms/inbound';

  it('is needed, right, and for these very words', async () => {
    const fields = form();
    expect(await post(inbound, fields)).toBe(403);
    expect(await post(inbound, fields, sign(inbound, fields, 'another token'))).toBe(403);
    expect(await post(inbound, { ...fields, Body: 'START' }, sign(inbound, fields))).toBe(403);
    expect(await stored()).toEqual([]);
    expect(await post(inbound, fields, sign(inbound, fields))).toBe(200);
    expect(await stored()).toHaveLength(1);
  });

  it('is checked for our own public address, whatever the request says of its host', async () => {
    const fields = form();
    const forged = twilio.getExpectedTwilioSignature(
      outbox.app.env.TWILIO_AUTH_TOKEN,
      `http://evil.example${inbound}`,
      fields,
    );
    expect(await post(inbound, fields, forged, { 'X-Forwarded-Host': 'evil.example' })).toBe(403);
  });

  it('lets a text that comes twice act once', async () => {
    const fields = { ...form(), Body: 'HELP' };
    for (let time = 0; time < 2; time += 1) {
      expect(await post(inbound, fields, sign(inbound, fields))).toBe(200);
    }
    await outbox.work();
    expect(replies().filter((text) => text.includes('Questions:'))).toHaveLength(1);
  });

  it('does not open a shop whose number was not texted', async () => {
    const fields = { ...form(), To: '+13035550199' };
    expect(await post(inbound, fields, sign(inbound, fields))).toBe(404);
  });

  it.each([{ From: 'nobody' }, { MessageSid: 'x' }, { To: '' }])(
    '%j is refused without a trace',
    async (wrong) => {
      const fields = { ...form(), ...wrong };
      expect(await post(inbound, fields, sign(inbound, fields))).toBe(400);
      expect(await stored()).toEqual([]);
    },
  );

  it('on reports: kept once each, and what a text has reached is never taken back', async () => {
    const [message] = (await outbox.messagesOf(shop)).filter(({ channel }) => channel === 'text');
    const path = `/hooks/sms/status/${shop.id}/${message?.id}/1`;
    const report = async (MessageStatus: string) => {
      const fields = { MessageSid: message?.providerId ?? '', MessageStatus };
      return post(path, fields, sign(path, fields));
    };
    for (const status of ['delivered', 'sent', 'delivered', 'queued']) expect(await report(status)).toBe(204);
    const [after] = (await outbox.messagesOf(shop)).filter(({ channel }) => channel === 'text');
    expect(after?.delivery).toBe('delivered');
    const kept = await withShop(shop.id, () =>
      TextStatus.findAll({ where: { providerId: message?.providerId ?? '' } }),
    );
    expect(new Set(kept.map(({ status }) => status)).size).toBe(kept.length);
    expect(await post(path, { MessageSid: newSid(), MessageStatus: 'sent' }, 'wrong')).toBe(403);
  });
});
