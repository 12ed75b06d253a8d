import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startFakeSms } from '#fakes/fake-sms/fakeSms';
import type { FakeSms } from '#fakes/fake-sms/fakeSms';
import { ACCOUNT, PHONE, sdkFor, sendJson, SHOP, startReceiver, TOKEN } from '#fakes/lib/testKit';
import type { FormReceiver } from '#fakes/lib/testKit';

let fake: FakeSms;
let receiver: FormReceiver;
beforeAll(async () => {
  receiver = await startReceiver();
  fake = await startFakeSms({ accountSid: ACCOUNT, authToken: TOKEN, inboundUrl: `${receiver.url}/in` });
});
afterAll(async () => {
  await fake.stop();
  await receiver.stop();
});

async function page(path: string): Promise<string> {
  return (await fetch(`${fake.url}${path}`)).text();
}

describe('the phones', () => {
  it('show each phone, its texts oldest first, with links that can be followed', async () => {
    const sdk = sdkFor(fake.url);
    await sdk.messages.create({ to: PHONE, from: SHOP, body: 'First <b>text</b>' });
    await sdk.messages.create({ to: PHONE, from: SHOP, body: 'See http://127.0.0.1:3000/t/aB3.' });
    expect(await page('/')).toContain(`href="/phones/${PHONE}"`);
    const html = await page(`/phones/${PHONE}`);
    expect(html).toContain('no real text is sent');
    expect(html.indexOf('First &lt;b&gt;text')).toBeGreaterThan(0);
    expect(html.indexOf('First')).toBeLessThan(html.indexOf('See '));
    expect(html).toContain(
      '<a href="http://127.0.0.1:3000/t/aB3" rel="noreferrer">http://127.0.0.1:3000/t/aB3</a>.',
    );
    expect(html.match(/data-message="SM/g)).toHaveLength(2);
  });

  it('keep two senders to one phone apart', async () => {
    await sdkFor(fake.url).messages.create({ to: PHONE, from: '+13035550101', body: 'Other shop here' });
    expect(await page(`/phones/${PHONE}`)).toContain('Other shop here');
    const first = await page(`/phones/${PHONE}?with=${encodeURIComponent(SHOP)}`);
    expect(first).not.toContain('Other shop here');
    expect(first).toContain('First &lt;b&gt;text');
  });

  it('send an answer to the sender of the thread', async () => {
    const body = new URLSearchParams({ to: SHOP, body: 'Thanks' });
    const answer = await fetch(`${fake.url}/phones/${PHONE}`, { method: 'POST', body, redirect: 'manual' });
    expect(answer.status).toBe(303);
    expect(receiver.received.at(-1)?.fields).toMatchObject({ From: PHONE, To: SHOP, Body: 'Thanks' });
    expect(await page(`/live/phones/${PHONE}?with=${encodeURIComponent(SHOP)}`)).toContain('Thanks');
  });

  it('refuse an empty answer and a number that is none', async () => {
    const body = new URLSearchParams({ to: SHOP, body: '  ' });
    expect((await fetch(`${fake.url}/phones/${PHONE}`, { method: 'POST', body })).status).toBe(400);
    expect((await fetch(`${fake.url}/open?number=abc`)).status).toBe(400);
    expect((await fetch(`${fake.url}/phones/%3Cscript%3E`)).status).toBe(404);
  });

  it('open by a typed number and load nothing from elsewhere', async () => {
    const opened = await fetch(`${fake.url}/open?number=${encodeURIComponent('+1 (303) 555-0199')}`);
    expect(opened.url).toBe(`${fake.url}/phones/+13035550199`);
    expect(await opened.text()).toContain('No texts on this phone yet');
    expect(opened.headers.get('content-security-policy')).toContain("default-src 'none'");
    expect((await sendJson(`${fake.url}/_control/inbound`, { from: PHONE })).status).toBe(400);
  });
});
