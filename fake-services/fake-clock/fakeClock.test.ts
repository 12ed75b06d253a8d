import { afterEach, describe, expect, it } from 'vitest';
import { startFakeClock } from '#fakes/fake-clock/fakeClock';
import type { FakeClock } from '#fakes/fake-clock/fakeClock';
import { sendJson } from '#fakes/lib/testKit';

let fake: FakeClock;
afterEach(() => fake.stop());

async function reading(url: string): Promise<{ offsetMs: number; nowMs: number }> {
  const { offsetMs, now } = (await (await fetch(url)).json()) as { offsetMs: number; now: string };
  return { offsetMs, nowMs: Date.parse(now) };
}

describe('the clock', () => {
  it('shows the time of the machine unless it is told otherwise', async () => {
    fake = await startFakeClock();
    const { offsetMs, nowMs } = await reading(fake.url);
    expect(offsetMs).toBe(0);
    expect(Math.abs(nowMs - Date.now())).toBeLessThan(2000);
  });

  it('flows on from the instant that it was set to', async () => {
    fake = await startFakeClock();
    const answer = await sendJson(fake.url, { now: '2026-12-01T18:40:00Z' }, 'PUT');
    expect(answer.status).toBe(200);
    const first = await reading(fake.url);
    await new Promise((resolve) => setTimeout(resolve, 60));
    const second = await reading(fake.url);
    expect(first.nowMs - Date.parse('2026-12-01T18:40:00Z')).toBeLessThan(2000);
    expect(second.nowMs - first.nowMs).toBeGreaterThanOrEqual(50);
  });

  it('is put forward from where it stands', async () => {
    fake = await startFakeClock();
    await sendJson(fake.url, { offsetMs: 60_000 }, 'PUT');
    await sendJson(fake.url, { advanceMs: 3_600_000 }, 'PUT');
    expect((await reading(fake.url)).offsetMs).toBe(3_660_000);
  });

  it.each([[{}], [{ now: 'noon' }], [{ offsetMs: '5' }], [{ offsetMs: 1, advanceMs: 1 }]])(
    'refuses %j and stays as it is',
    async (body) => {
      fake = await startFakeClock();
      expect((await sendJson(fake.url, body, 'PUT')).status).toBe(400);
      expect((await reading(fake.url)).offsetMs).toBe(0);
    },
  );

  it('starts at a time of day of the zone, today', async () => {
    fake = await startFakeClock({ startAt: '10:00', zone: 'America/Denver' });
    const { nowMs } = await reading(fake.url);
    const format = { timeZone: 'America/Denver', dateStyle: 'short', timeStyle: 'short' } as const;
    const denver = new Intl.DateTimeFormat('en-US', format);
    const today = new Intl.DateTimeFormat('en-US', { timeZone: 'America/Denver', dateStyle: 'short' });
    expect(denver.format(nowMs)).toBe(`${today.format(Date.now())}, 10:00 AM`);
  });

  it('starts at an instant', async () => {
    fake = await startFakeClock({ startAt: '2026-03-08T08:59:00Z' });
    const { nowMs } = await reading(fake.url);
    expect(nowMs - Date.parse('2026-03-08T08:59:00Z')).toBeLessThan(2000);
  });

  it('says what is wrong with a time that it cannot read', async () => {
    fake = await startFakeClock();
    await expect(startFakeClock({ startAt: '25:00' })).rejects.toThrow('"25:00" is not a time');
    await expect(startFakeClock({ startAt: '10:00', zone: 'Mars' })).rejects.toThrow(
      '"Mars" is not a time zone',
    );
  });
});
