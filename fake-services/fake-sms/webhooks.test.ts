import twilio from 'twilio';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { startFakeSms } from '#fakes/fake-sms/fakeSms';
import type { FakeSms } from '#fakes/fake-sms/fakeSms';
import type { SmsFaultSettings } from '#fakes/fake-sms/faults';
import { ACCOUNT, failureOf, PHONE, sdkFor, sendJson, SHOP, startReceiver, TOKEN } from '#fakes/lib/testKit';
import type { FormReceiver, ReceivedForm } from '#fakes/lib/testKit';

let receiver: FormReceiver;
let fake: FakeSms;
beforeEach(async () => void (receiver = await startReceiver()));
afterEach(async () => {
  await fake.stop();
  await receiver.stop();
});

async function start(settings: SmsFaultSettings & { optOutType?: boolean } = {}): Promise<void> {
  const common = { accountSid: ACCOUNT, authToken: TOKEN, inboundUrl: `${receiver.url}/inbound?shop=1` };
  fake = await startFakeSms({ ...common, callbacks: { delayMs: [5, 15] }, ...settings });
}

function send(to = PHONE): Promise<{ sid: string }> {
  const statusCallback = `${receiver.url}/status/7/1`;
  return sdkFor(fake.url).messages.create({ to, from: SHOP, body: 'Ready', statusCallback });
}

function inbound(body: string, from = PHONE): Promise<Response> {
  return sendJson(`${fake.url}/_control/inbound`, { from, to: SHOP, body });
}

function isGenuine({ path, fields, signature }: ReceivedForm): boolean {
  return twilio.validateRequest(TOKEN, signature, `${receiver.url}${path}`, fields);
}

const statuses = (): (string | undefined)[] => receiver.received.map(({ fields }) => fields.MessageStatus);

describe('the signature', () => {
  it('is on callbacks and inbound texts, over the exact address', async () => {
    await start();
    await send();
    await inbound('Hello & good day, señor?');
    await expect.poll(() => receiver.received.length).toBe(3);
    expect(receiver.received.map(isGenuine)).toEqual([true, true, true]);
    const [first] = receiver.received as [ReceivedForm];
    expect(isGenuine({ ...first, fields: { ...first.fields, MessageStatus: 'failed' } })).toBe(false);
  });
});

describe('status callbacks', () => {
  it('report sent and delivered, in order, and never the first status', async () => {
    await start();
    const { sid } = await send();
    await expect.poll(statuses).toEqual(['sent', 'delivered']);
    expect(receiver.received[1]).toMatchObject({
      path: '/status/7/1',
      fields: { MessageSid: sid, AccountSid: ACCOUNT, To: PHONE, From: SHOP, ApiVersion: '2010-04-01' },
    });
    expect(receiver.received[1]?.fields).not.toHaveProperty('ErrorCode');
  });

  it('carry the code of a text that did not arrive', async () => {
    await start({
      faults: [
        { kind: 'undelivered', errorCode: 30006, next: 1 },
        { kind: 'failed', errorCode: 30005, next: 1 },
      ],
    });
    const { sid } = await send();
    await expect.poll(statuses).toEqual(['sent', 'undelivered']);
    expect(receiver.received[1]?.fields.ErrorCode).toBe('30006');
    expect(await sdkFor(fake.url).messages(sid).fetch()).toMatchObject({
      status: 'undelivered',
      errorCode: 30006,
    });
    await send();
    await expect.poll(statuses).toEqual(['sent', 'undelivered', 'failed']);
    expect(receiver.received[2]?.fields.ErrorCode).toBe('30005');
  });

  it('are doubled, dropped and switched off on demand', async () => {
    await start({ callbacks: { delayMs: 2, double: 1 } });
    await send();
    await expect.poll(statuses).toEqual(['sent', 'sent', 'delivered', 'delivered']);
    await sendJson(`${fake.url}/_control/faults`, { callbacks: { double: 0, drop: 1 } });
    const dropped = await send();
    await sendJson(`${fake.url}/_control/faults`, { callbacks: { drop: 0, off: true } });
    const silent = await send();
    for (const { sid } of [dropped, silent]) {
      await expect.poll(() => fake.gateway.store.find(sid)?.status).toBe('delivered');
    }
    await new Promise((resolve) => setTimeout(resolve, 50));
    expect(receiver.received).toHaveLength(4);
  });

  it('come in another order when shuffled', async () => {
    await start({ callbacks: { delayMs: [10, 60], shuffle: true } });
    const sids = (await Promise.all(Array.from({ length: 12 }, () => send()))).map(({ sid }) => sid);
    await expect.poll(() => receiver.received.length, { timeout: 3000 }).toBe(24);
    const firsts = sids.map((sid) => receiver.received.find(({ fields }) => fields.MessageSid === sid));
    expect(firsts.some((form) => form?.fields.MessageStatus === 'delivered')).toBe(true);
  });

  it('are not repeated when the receiver fails', async () => {
    await start();
    receiver.answer.status = 500;
    await send();
    await expect.poll(statuses).toEqual(['sent', 'delivered']);
    await new Promise((resolve) => setTimeout(resolve, 100));
    expect(receiver.received).toHaveLength(2);
  });
});

describe('texts from people', () => {
  it('reach the webhook as the provider words them', async () => {
    await start();
    expect(await (await inbound('Where is No. 9?')).json()).toMatchObject({ webhookStatus: 204 });
    expect(receiver.received[0]).toMatchObject({
      path: '/inbound?shop=1',
      fields: {
        From: PHONE,
        To: SHOP,
        Body: 'Where is No. 9?',
        NumMedia: '0',
        NumSegments: '1',
        AccountSid: ACCOUNT,
      },
    });
    expect(receiver.received[0]?.fields.MessageSid).toBe(receiver.received[0]?.fields.SmsSid);
    expect(receiver.received[0]?.fields).not.toHaveProperty('OptOutType');
  });

  it.each(['STOP', ' stop ', 'Unsubscribe', 'QUIT', 'cancel', 'end', 'stopall', 'revoke', 'optout'])(
    '%s ends texts from that sender until START',
    async (word) => {
      await start();
      await inbound(word);
      expect(await failureOf(send())).toMatchObject({ status: 400, code: 21610 });
      const otherSender = { to: PHONE, from: '+13035550101', body: 'Other shop' };
      await sdkFor(fake.url).messages.create(otherSender);
      expect(receiver.received[0]?.fields.Body).toBe(word);
      await inbound('Start');
      await expect(send()).resolves.toHaveProperty('sid');
    },
  );

  it('a stop word inside a sentence is not one', async () => {
    await start();
    await inbound('Please stop by tomorrow');
    await expect(send()).resolves.toHaveProperty('sid');
  });

  it('name the kind of word where the account is set so', async () => {
    await start({ optOutType: true });
    for (const word of ['stop', 'start', 'help', 'hello']) await inbound(word);
    const kinds = receiver.received.map(({ fields }) => fields.OptOutType);
    expect(kinds).toEqual(['STOP', 'START', 'HELP', undefined]);
  });

  it('are answered by the markup that the webhook returns', async () => {
    await start();
    receiver.answer.status = 200;
    receiver.answer.body =
      '<?xml version="1.0"?><Response><Message>Call 555-0142 &amp; ask</Message></Response>';
    await inbound('HELP');
    const listed = await sdkFor(fake.url).messages.list({ to: PHONE });
    expect(listed[0]).toMatchObject({ body: 'Call 555-0142 & ask', direction: 'outbound-reply', from: SHOP });
  });

  it('say so when nobody answers', async () => {
    await start();
    await receiver.stop();
    expect(await (await inbound('Hello')).json()).toMatchObject({ webhookStatus: null });
  });
});
