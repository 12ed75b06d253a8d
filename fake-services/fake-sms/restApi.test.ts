import twilio from 'twilio';
import { SegmentedMessage } from 'sms-segments-calculator';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startFakeSms } from '#fakes/fake-sms/fakeSms';
import type { FakeSms } from '#fakes/fake-sms/fakeSms';
import { countSegments } from '#fakes/fake-sms/segments';
import { ACCOUNT, failureOf, PHONE, RebasedClient, sdkFor, SHOP, TOKEN } from '#fakes/lib/testKit';

let fake: FakeSms;
let sdk: twilio.Twilio;
beforeAll(async () => {
  fake = await startFakeSms({ accountSid: ACCOUNT, authToken: TOKEN, callbacks: { delayMs: 5 } });
  sdk = sdkFor(fake.url);
});
afterAll(() => fake.stop());

const text = { to: PHONE, from: SHOP, body: 'No. 9 is ready.' };

describe('through the provider SDK', () => {
  it('creates a message and gives back the whole resource', async () => {
    const message = await sdk.messages.create({ ...text, validityPeriod: 600 });
    expect(message).toMatchObject({
      ...text,
      accountSid: ACCOUNT,
      status: 'queued',
      direction: 'outbound-api',
      numSegments: '1',
      numMedia: '0',
      errorCode: null,
      errorMessage: null,
      dateSent: null,
      apiVersion: '2010-04-01',
    });
    expect(message.sid).toMatch(/^SM[0-9a-f]{32}$/);
    expect(Math.abs(message.dateCreated.getTime() - Date.now())).toBeLessThan(3000);
    expect(message.uri).toBe(`/2010-04-01/Accounts/${ACCOUNT}/Messages/${message.sid}.json`);
  });

  it('fetches it later as delivered, with the time of sending', async () => {
    const { sid } = await sdk.messages.create(text);
    await expect.poll(async () => (await sdk.messages(sid).fetch()).status).toBe('delivered');
    expect((await sdk.messages(sid).fetch()).dateSent).toBeInstanceOf(Date);
  });

  it('takes the same request twice as two messages: there is no idempotency', async () => {
    const [one, other] = await Promise.all([sdk.messages.create(text), sdk.messages.create(text)]);
    expect(one.sid).not.toBe(other.sid);
  });

  it('lists by recipient and sender, newest first, over several pages', async () => {
    const to = '+13035550160';
    const sids: string[] = [];
    for (let index = 0; index < 5; index += 1) {
      sids.unshift((await sdk.messages.create({ to, from: SHOP, body: `Text ${index}` })).sid);
    }
    const listed = await sdk.messages.list({ to, pageSize: 2 });
    expect(listed.map((message) => message.sid)).toEqual(sids);
    expect(await sdk.messages.list({ to, from: '+13035550101' })).toEqual([]);
    const page = await sdk.messages.page({ to, pageSize: 2 });
    expect(page.instances.map((message) => message.sid)).toEqual(sids.slice(0, 2));
    expect(page.nextPageUrl).toContain('PageSize=2');
  });

  it('filters by the time of sending and leaves out what was not sent yet', async () => {
    const to = '+13035550161';
    const { sid } = await sdk.messages.create({ to, from: SHOP, body: 'When' });
    await expect.poll(async () => (await sdk.messages(sid).fetch()).status).toBe('delivered');
    const hour = 3_600_000;
    const count = async (filter: object): Promise<number> =>
      (await sdk.messages.list({ to, ...filter })).length;
    expect(await count({ dateSent: new Date() })).toBe(1);
    expect(await count({ dateSent: new Date(Date.now() - 24 * hour) })).toBe(0);
    expect(await count({ dateSentAfter: new Date(Date.now() - hour) })).toBe(1);
    expect(await count({ dateSentAfter: new Date(Date.now() + hour) })).toBe(0);
    expect(await count({ dateSentBefore: new Date(Date.now() - hour) })).toBe(0);
  });
});

// Codes: the provider's published error dictionary, twilio.com/docs/api/errors.
describe('refusals', () => {
  it.each([
    ['a number that is none', { ...text, to: '555-0142' }, 21211],
    ['a number no country has', { ...text, to: '+11234567890' }, 21211],
    ['no text', { ...text, body: '' }, 21602],
    ['a text over 1,600 signs', { ...text, body: 'x'.repeat(1601) }, 21617],
    ['a sender that is none', { ...text, from: 'shop' }, 21212],
  ])('%s', async (_what, message, code) => {
    expect(await failureOf(sdk.messages.create(message))).toMatchObject({ status: 400, code });
  });

  it('takes a text of exactly 1,600 signs', async () => {
    expect((await sdk.messages.create({ ...text, body: 'x'.repeat(1600) })).numSegments).toBe('11');
  });

  it('wrong token, other account, unknown message', async () => {
    const wrong = sdkFor(fake.url, 'not-the-token').messages.create(text);
    expect(await failureOf(wrong)).toMatchObject({ status: 401, code: 20003 });
    const other = twilio(ACCOUNT, TOKEN, {
      httpClient: new RebasedClient(fake.url),
      accountSid: `AC${'0'.repeat(32)}`,
    });
    expect(await failureOf(other.messages.create(text))).toMatchObject({ status: 404, code: 20404 });
    const missing = sdk.messages(`SM${'0'.repeat(32)}`).fetch();
    expect(await failureOf(missing)).toMatchObject({ status: 404, code: 20404 });
  });
});

describe('segments, as the public calculator counts them (npm sms-segments-calculator)', () => {
  it.each([
    'x'.repeat(160),
    'x'.repeat(161),
    'x'.repeat(306),
    'x'.repeat(307),
    '{'.repeat(80),
    '{'.repeat(81),
    `${'x'.repeat(152)}{${'x'.repeat(20)}`,
    'é'.repeat(160),
    'á'.repeat(70),
    'á'.repeat(71),
    `${'á'.repeat(66)}😀${'á'.repeat(10)}`,
    'Cinder Flat: la No. 9 ya se puede recoger, abierto hasta las 5 pm. mañana',
  ])('%s', (body) => {
    expect(countSegments(body)).toBe(new SegmentedMessage(body).segmentsCount);
  });
});
