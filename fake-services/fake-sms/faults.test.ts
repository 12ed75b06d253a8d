import { mkdtempSync, readFileSync, appendFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { startFakeSms } from '#fakes/fake-sms/fakeSms';
import type { FakeSms } from '#fakes/fake-sms/fakeSms';
import type { SmsFaultSettings } from '#fakes/fake-sms/faults';
import type { SmsLogEntry } from '#fakes/fake-sms/messageStore';
import { ACCOUNT, failureOf, PHONE, sdkFor, sendJson, SHOP, startReceiver, TOKEN } from '#fakes/lib/testKit';

let folder: string;
let fake: FakeSms;
beforeEach(() => void (folder = mkdtempSync(join(tmpdir(), 'fake-sms-'))));
afterEach(async () => {
  await fake.stop();
  rmSync(folder, { recursive: true });
});

async function start(settings: SmsFaultSettings = {}): Promise<void> {
  fake = await startFakeSms({
    accountSid: ACCOUNT,
    authToken: TOKEN,
    stateDir: folder,
    callbacks: { delayMs: 2 },
    ...settings,
  });
}

function send(to = PHONE, timeout?: number): Promise<{ sid: string }> {
  return sdkFor(fake.url, TOKEN, timeout).messages.create({ to, from: SHOP, body: 'Ready' });
}

function setFaults(settings: unknown): Promise<Response> {
  return sendJson(`${fake.url}/_control/faults`, settings);
}

function logged(): SmsLogEntry[] {
  const lines = readFileSync(join(folder, 'sms-log.jsonl'), 'utf8').trim().split('\n');
  return lines.filter(Boolean).map((line) => JSON.parse(line) as SmsLogEntry);
}

const acceptedCount = (): number => logged().filter(({ event }) => event === 'accepted').length;

describe('faults before a text is taken', () => {
  it.each([
    ['429', 429, 20429],
    ['500', 500, 20500],
    ['503', 503, 20503],
  ])('%s takes nothing', async (kind, status, code) => {
    await start();
    await setFaults({ faults: [{ kind, next: 1 }] });
    expect(await failureOf(send())).toMatchObject({ status, code });
    expect(acceptedCount()).toBe(0);
    await send();
    expect(acceptedCount()).toBe(1);
  });

  it('a slow answer comes, late', async () => {
    await start({ slowMs: [150, 200] });
    const before = performance.now();
    await send();
    expect(performance.now() - before).toBeGreaterThan(145);
  });

  it('opted-out and not-mobile numbers have their codes', async () => {
    await start({ optedOut: ['+13035550150'], notMobile: ['+13035550151'] });
    expect(await failureOf(send('+13035550150'))).toMatchObject({ status: 400, code: 21610 });
    expect(await failureOf(send('+13035550151'))).toMatchObject({ status: 400, code: 21614 });
    expect(acceptedCount()).toBe(0);
  });
});

describe('faults after a text is taken', () => {
  it('500, a dropped connection and a hang all leave it in the log and in the list', async () => {
    const faults = [
      { kind: '500AfterAccept', next: 1 } as const,
      { kind: 'dropAfterAccept', next: 1 } as const,
      { kind: 'hangAfterAccept', ms: 5000, next: 1 } as const,
    ];
    await start({ faults });
    expect(await failureOf(send())).toMatchObject({ status: 500 });
    expect(await failureOf(send())).toMatchObject({ code: 'ECONNRESET' });
    expect(await failureOf(send(PHONE, 200))).toMatchObject({ code: 'ECONNABORTED' });
    expect(acceptedCount()).toBe(3);
    expect(await sdkFor(fake.url).messages.list({ to: PHONE })).toHaveLength(3);
  });

  it('a list that lags shows the text later; a fetch by its id does not wait', async () => {
    await start({ listLagMs: 300 });
    const { sid } = await send();
    const sdk = sdkFor(fake.url);
    expect(await sdk.messages.list({ to: PHONE })).toEqual([]);
    expect((await sdk.messages(sid).fetch()).sid).toBe(sid);
    await expect.poll(async () => (await sdk.messages.list({ to: PHONE })).length).toBe(1);
  });

  it('a hook is called and awaited between the taking and the answer', async () => {
    await start();
    const receiver = await startReceiver();
    await sendJson(`${fake.url}/_control/hook`, { url: `${receiver.url}/hook` });
    const { sid } = await send();
    expect(receiver.received.map(({ fields }) => fields.sid)).toEqual([sid]);
    await fetch(`${fake.url}/_control/hook`, { method: 'DELETE' });
    await send();
    expect(receiver.received).toHaveLength(1);
    await receiver.stop();
  });
});

describe('when a fault strikes', () => {
  async function outcomes(seed: number): Promise<string> {
    await start({ seed, faults: [{ kind: '500', share: 0.3 }] });
    let run = '';
    for (let index = 0; index < 40; index += 1) {
      const failed = await send().then(
        () => false,
        () => true,
      );
      run += failed ? 'x' : '.';
    }
    await fake.stop();
    return run;
  }

  it('shares come out the same for the same seed, and otherwise for another', async () => {
    const first = await outcomes(5);
    expect(await outcomes(5)).toBe(first);
    expect(await outcomes(6)).not.toBe(first);
    expect(first.match(/x/g)?.length).toBeGreaterThan(4);
    expect(first.match(/x/g)?.length).toBeLessThan(21);
  });

  it('one number may be picked, and clearing heals', async () => {
    await start();
    await setFaults({ faults: [{ kind: '500', to: '+13035550150' }], optedOut: [PHONE] });
    expect(await failureOf(send('+13035550150'))).toMatchObject({ status: 500 });
    await send('+13035550151');
    expect((await fetch(`${fake.url}/_control/faults`, { method: 'DELETE' })).status).toBe(204);
    await send('+13035550150');
    await send(PHONE);
  });

  it.each([
    [{ faults: [{ kind: 'explode' }] }],
    [{ faults: [{ kind: 'slow' }] }],
    [{ faults: [{ kind: '500', share: 30 }] }],
    [{ optOut: [PHONE] }],
  ])('a mistyped setting is refused: %j', async (settings) => {
    await start();
    expect((await setFaults(settings)).status).toBe(400);
    await send();
  });
});

describe('the log', () => {
  it('survives the end of the fake, with texts, statuses and opt-outs; half a line is cut off', async () => {
    await start();
    const { sid } = await send();
    await expect.poll(() => fake.gateway.store.find(sid)?.status).toBe('delivered');
    await sendJson(`${fake.url}/_control/inbound`, { from: PHONE, to: SHOP, body: 'STOP' });
    await fake.stop();
    appendFileSync(join(folder, 'sms-log.jsonl'), '{"event":"accepted","at":"20');
    await start();
    expect((await sdkFor(fake.url).messages(sid).fetch()).status).toBe('delivered');
    expect(await failureOf(send())).toMatchObject({ code: 21610 });
    await send('+13035550143');
    expect(acceptedCount()).toBe(2);
  });

  it('is read by recipient and time', async () => {
    await start();
    await send('+13035550150');
    await send('+13035550151');
    const read = async (query: string): Promise<{ to: string }[]> => {
      const answer = await fetch(`${fake.url}/_control/messages${query}`);
      return ((await answer.json()) as { messages: { to: string }[] }).messages;
    };
    expect(await read('')).toHaveLength(2);
    expect(await read(`?to=${encodeURIComponent('+13035550151')}`)).toMatchObject([{ to: '+13035550151' }]);
    expect(await read(`?since=${new Date(Date.now() + 60_000).toISOString()}`)).toEqual([]);
  });
});
