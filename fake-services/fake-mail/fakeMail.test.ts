import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import nodemailer from 'nodemailer';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { startFakeMail } from '#fakes/fake-mail/fakeMail';
import type { FakeMail } from '#fakes/fake-mail/fakeMail';
import type { StoredMail } from '#fakes/fake-mail/mailStore';
import { failureOf, sendJson } from '#fakes/lib/testKit';

const CALENDAR = [
  'BEGIN:VCALENDAR',
  'METHOD:REQUEST',
  'BEGIN:VTIMEZONE',
  'TZID:America/Denver',
  'BEGIN:STANDARD',
  'DTSTART:20071104T020000',
  'END:STANDARD',
  'END:VTIMEZONE',
  'BEGIN:VEVENT',
  'UID:visit-1@example.com',
  'SEQUENCE:0',
  'SUMMARY:Drop off 3 machines\\, Cinder',
  '  Flat',
  'DTSTART;TZID=America/Denver:20260701T080000',
  'DTEND;TZID="America/Denver":20260701T120000',
  'LOCATION:418 Flatiron Rd',
  'END:VEVENT',
  'END:VCALENDAR',
].join('\r\n');

let folder: string;
let fake: FakeMail;
beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'fake-mail-'));
  fake = await startFakeMail({ stateDir: folder });
});
afterEach(async () => {
  await fake.stop();
  rmSync(folder, { recursive: true });
});

function send(to = 'rosa@example.com', timeout = 2000): Promise<unknown> {
  const port = Number(new URL(fake.smtpUrl).port);
  const transport = nodemailer.createTransport({
    host: '127.0.0.1',
    port,
    ignoreTLS: true,
    socketTimeout: timeout,
  });
  return transport.sendMail({
    from: 'Cinder Flat <shop@example.com>',
    to,
    subject: 'Visita confirmada, señor',
    text: 'Your stub: http://127.0.0.1:3000/t/aB3',
    html: '<p>Your <a href="http://127.0.0.1:3000/t/aB3">stub</a></p><script>alert(1)</script>',
    messageId: '<visit-1@example.com>',
    list: { unsubscribe: 'http://127.0.0.1:3000/u/1' },
    attachments: [{ filename: 'visit.ics', content: CALENDAR, contentType: 'text/calendar; method=REQUEST' }],
  });
}

async function messages(query = ''): Promise<StoredMail[]> {
  const answer = await fetch(`${fake.url}/_control/messages${query}`);
  return ((await answer.json()) as { messages: StoredMail[] }).messages;
}

function setFaults(faults: unknown[]): Promise<Response> {
  return sendJson(`${fake.url}/_control/faults`, { faults });
}

describe('the mail sink', () => {
  it('keeps a mail with its parts as they were meant', async () => {
    await send();
    const [mail] = (await messages('?to=Rosa@example.com')) as [StoredMail];
    expect(mail).toMatchObject({
      to: ['rosa@example.com'],
      subject: 'Visita confirmada, señor',
      messageId: '<visit-1@example.com>',
      envelope: { from: 'shop@example.com', to: ['rosa@example.com'] },
    });
    expect(mail.from).toContain('Cinder Flat');
    expect(mail.text.trim()).toBe('Your stub: http://127.0.0.1:3000/t/aB3');
    expect(mail.html).toContain('>stub</a>');
    expect(mail.headers['list-unsubscribe']).toBe('<http://127.0.0.1:3000/u/1>');
    expect(mail.attachments).toMatchObject([
      { filename: 'visit.ics', contentType: 'text/calendar', content: CALENDAR, encoding: 'utf8' },
    ]);
    expect(await messages('?to=nobody@example.com')).toEqual([]);
  });

  it('keeps it over an end of the fake', async () => {
    await send();
    await fake.stop();
    fake = await startFakeMail({ stateDir: folder });
    await send('ann@example.com');
    expect((await messages()).map((mail) => mail.envelope.to[0])).toEqual([
      'rosa@example.com',
      'ann@example.com',
    ]);
    expect(new Set((await messages()).map((mail) => mail.id)).size).toBe(2);
  });

  it.each([451, 550])('refuses one address with %i and takes another', async (code) => {
    await setFaults([{ kind: 'refuse', code, to: 'rosa@example.com' }]);
    expect(await failureOf(send())).toMatchObject({ responseCode: code });
    await send('ann@example.com');
    expect(await messages()).toHaveLength(1);
  });

  it('drops the connection before or after it took the mail', async () => {
    await setFaults([{ kind: 'drop', next: 1 }]);
    await failureOf(send());
    expect(await messages()).toHaveLength(0);
    await setFaults([{ kind: 'dropAfterAccept', next: 1 }]);
    await failureOf(send());
    expect(await messages()).toHaveLength(1);
    await setFaults([{ kind: 'hangAfterAccept', ms: 1000, next: 1 }]);
    await failureOf(send('rosa@example.com', 200));
    expect(await messages()).toHaveLength(2);
  });

  it('is slow on demand, and healed by clearing', async () => {
    await setFaults([{ kind: 'slow', ms: 200 }]);
    const before = performance.now();
    await send();
    expect(performance.now() - before).toBeGreaterThan(195);
    await setFaults([{ kind: 'refuse' }]);
    await fetch(`${fake.url}/_control/faults`, { method: 'DELETE' });
    await send();
    expect((await setFaults([{ kind: 'explode' }])).status).toBe(400);
  });
});

describe('the inbox', () => {
  async function page(path: string): Promise<string> {
    return (await fetch(`${fake.url}${path}`)).text();
  }

  it('lists newest first and by address', async () => {
    await send();
    await send('ann@example.com');
    const all = await page('/');
    expect(all.indexOf('to ann@example.com')).toBeLessThan(all.indexOf('to rosa@example.com'));
    expect(all).toContain('no real mail is sent');
    expect(await page('/live/mails?to=ann@example.com')).not.toContain('to rosa@example.com');
  });

  it('shows text, calendar entry in its own zone, headers, and hands out the file', async () => {
    await send();
    const html = await page('/mail/1');
    expect(html).toContain('<a href="http://127.0.0.1:3000/t/aB3" rel="noreferrer">');
    expect(html).toContain('Drop off 3 machines, Cinder Flat');
    // 8:00 on 1 July 2026 in Denver is 14:00 UTC, so Mountain Daylight Time holds.
    expect(html).toContain('Wednesday 1 July 2026, 08:00 MDT (America/Denver)');
    expect(html).toContain('Wednesday 1 July 2026, 12:00 MDT (America/Denver)');
    expect(html).toContain('<dd data-calendar-method>REQUEST</dd>');
    expect(html).toContain('<dt>list-unsubscribe</dt>');
    const file = await fetch(`${fake.url}/mail/1/attachments/0`);
    expect(file.headers.get('content-type')).toContain('text/calendar');
    expect(file.headers.get('content-disposition')).toContain('visit.ics');
    expect(await file.text()).toBe(CALENDAR);
    expect((await fetch(`${fake.url}/mail/99`)).status).toBe(404);
  });

  it("runs nothing of a mail's own HTML", async () => {
    await send();
    const framed = await fetch(`${fake.url}/mail/1/html`);
    expect(framed.headers.get('content-security-policy')).toMatch(/^sandbox (?!.*allow-scripts)/);
    expect(await page('/mail/1')).toContain('sandbox="allow-top-navigation-by-user-activation"');
  });
});
