/** E-mail by SMTP, behind an interface of our own. */
import { createTransport } from 'nodemailer';
import type { Env } from '#server/env';
import { refuseInUnit } from './db';

export interface OutgoingMail {
  /** Our own id of the message; the Message-ID is made of it and is the same on each try. */
  id: string;
  fromName: string;
  replyTo: string;
  to: string;
  subject: string;
  text: string;
  html: string;
  calendar: string | null;
  unsubscribeUrl: string;
}

export type MailResult =
  | { kind: 'accepted'; providerId: string }
  | { kind: 'refused'; code: string }
  | { kind: 'later'; reason: string };

export interface MailGateway {
  send(mail: OutgoingMail): Promise<MailResult>;
  close(): void;
}

/** The mail server of this process. */
export function openMailGateway(env: Pick<Env, 'SMTP_URL' | 'MAIL_FROM'>): MailGateway {
  const { host, port, auth, secure } = smtpOptions(env.SMTP_URL);
  const transport = createTransport({
    ...{ host, port, auth, secure },
    pool: true,
    // Left alone, the pool puts a mail back whenever its connection closes, also after the server took it.
    maxRequeues: 0,
    connectionTimeout: 10_000,
    greetingTimeout: 10_000,
    socketTimeout: 30_000,
  });
  return {
    async send(mail) {
      refuseInUnit('an e-mail');
      try {
        const { messageId } = await transport.sendMail(wireMail(env.MAIL_FROM, mail));
        return { kind: 'accepted', providerId: messageId };
      } catch (error) {
        return resultOfMailError(error);
      }
    },
    close: () => transport.close(),
  };
}

function smtpOptions(url: string) {
  const { hostname, port, username, password, protocol } = new URL(url);
  const secure = protocol === 'smtps:';
  const auth = username
    ? { user: decodeURIComponent(username), pass: decodeURIComponent(password) }
    : undefined;
  return { host: hostname, port: Number(port) || (secure ? 465 : 587), secure, auth };
}

function wireMail(from: string, mail: OutgoingMail) {
  const host = from.split('@').at(-1) ?? 'localhost';
  const calendar = mail.calendar && {
    filename: 'visit.ics',
    content: mail.calendar,
    contentType: 'text/calendar; charset=utf-8; method=PUBLISH',
  };
  return {
    messageId: `<${mail.id}@${host}>`,
    from: { name: oneLine(mail.fromName), address: from },
    replyTo: mail.replyTo,
    to: { name: '', address: mail.to },
    subject: oneLine(mail.subject),
    text: mail.text,
    html: mail.html,
    attachments: calendar ? [calendar] : [],
    list: { unsubscribe: { url: mail.unsubscribeUrl, comment: '' } },
    headers: { 'List-Unsubscribe-Post': 'List-Unsubscribe=One-Click' },
  };
}

/** Nothing that people typed may begin a header of its own. */
function oneLine(text: string): string {
  return text.replace(/[\r\n]+/g, ' ');
}

/**
 * A refusal for good is final. Everything else is tried again under the same Message-ID, also where the server may
 * have taken the mail: SMTP has no way to ask, and mail programs fold two copies of one Message-ID.
 */
export function resultOfMailError(error: unknown): MailResult {
  const { responseCode, code, message } = error as {
    responseCode?: number;
    code?: string;
    message?: string;
  };
  if (typeof responseCode === 'number' && responseCode >= 500 && code !== 'EAUTH') {
    return { kind: 'refused', code: String(responseCode) };
  }
  return { kind: 'later', reason: String(responseCode ?? code ?? message) };
}
