import { simpleParser } from 'mailparser';
import type { AddressObject, Attachment, ParsedMail } from 'mailparser';
import { openJournal } from '#fakes/lib/journal';
import type { Journal } from '#fakes/lib/journal';

/** One line of mail-log.jsonl: the mail as it came over the wire, in base64. */
export interface MailLogEntry {
  id: string;
  receivedAt: string;
  envelope: { from: string; to: string[] };
  raw: string;
}

export interface MailAttachment {
  filename: string;
  contentType: string;
  size: number;
  /** Decoded text of text/* parts, otherwise base64. */
  content: string;
  encoding: 'utf8' | 'base64';
}

/** A mail as the control API and the inbox show it. */
export interface StoredMail {
  id: string;
  receivedAt: string;
  envelope: { from: string; to: string[] };
  from: string;
  to: string[];
  subject: string;
  messageId: string | null;
  text: string;
  html: string | null;
  /** By lower-case name, unfolded; a repeated one joined by a line break. */
  headers: Record<string, string>;
  attachments: MailAttachment[];
}

/** All mails, oldest first, with the log on disk behind them. */
export class MailStore {
  #mails: StoredMail[] = [];
  #raw = new Map<string, string>();
  #next = 1;

  private constructor(
    private readonly journal: Journal<MailLogEntry>,
    private readonly now: () => Date,
  ) {}

  static async open(now: () => Date, logPath?: string): Promise<MailStore> {
    const journal = openJournal<MailLogEntry>(logPath);
    const store = new MailStore(journal, now);
    for (const entry of journal.entries()) await store.#keep(entry);
    return store;
  }

  /** Takes a mail for good: on disk before this resolves. */
  async accept(envelope: { from: string; to: string[] }, raw: Buffer): Promise<StoredMail> {
    const entry: MailLogEntry = {
      id: String(this.#next),
      receivedAt: this.now().toISOString(),
      envelope,
      raw: raw.toString('base64'),
    };
    this.#next += 1;
    this.journal.append(entry, true);
    return this.#keep(entry);
  }

  all(): readonly StoredMail[] {
    return this.#mails;
  }

  /** Mails whose envelope names this address, in any case. */
  sentTo(address: string): StoredMail[] {
    const wanted = address.toLowerCase();
    return this.#mails.filter((mail) => mail.envelope.to.some((to) => to.toLowerCase() === wanted));
  }

  find(id: string): StoredMail | undefined {
    return this.#mails.find((mail) => mail.id === id);
  }

  /** The mail as it came over the wire. */
  raw(id: string): Buffer {
    return Buffer.from(this.#raw.get(id) ?? '', 'base64');
  }

  close(): void {
    this.journal.close();
  }

  async #keep(entry: MailLogEntry): Promise<StoredMail> {
    this.#next = Math.max(this.#next, Number(entry.id) + 1);
    const mail = describeMail(entry, await simpleParser(Buffer.from(entry.raw, 'base64')));
    this.#raw.set(entry.id, entry.raw);
    this.#mails.push(mail);
    this.#mails.sort((one, other) => Number(one.id) - Number(other.id));
    return mail;
  }
}

function describeMail({ id, receivedAt, envelope }: MailLogEntry, parsed: ParsedMail): StoredMail {
  return {
    id,
    receivedAt,
    envelope,
    from: parsed.from?.text ?? envelope.from,
    to: addressesOf(parsed.to),
    subject: parsed.subject ?? '',
    messageId: parsed.messageId ?? null,
    text: parsed.text ?? '',
    html: typeof parsed.html === 'string' ? parsed.html : null,
    headers: headersOf(parsed),
    attachments: parsed.attachments.map(describeAttachment),
  };
}

function addressesOf(to: AddressObject | AddressObject[] | undefined): string[] {
  const lists = to === undefined ? [] : Array.isArray(to) ? to : [to];
  return lists.flatMap((list) => list.value.map((entry) => entry.address ?? entry.name));
}

function headersOf(parsed: ParsedMail): Record<string, string> {
  const headers: Record<string, string> = {};
  for (const { key, line } of parsed.headerLines) {
    const value = line
      .slice(line.indexOf(':') + 1)
      .replace(/\r?\n(?=[ \t])/g, '')
      .trim();
    headers[key] = key in headers ? `${headers[key]}\n${value}` : value;
  }
  return headers;
}

function describeAttachment(attachment: Attachment, index: number): MailAttachment {
  const encoding = attachment.contentType.startsWith('text/') ? 'utf8' : 'base64';
  return {
    filename: attachment.filename ?? nameFor(attachment.contentType, index),
    contentType: attachment.contentType,
    size: attachment.content.length,
    content: attachment.content.toString(encoding),
    encoding,
  };
}

function nameFor(contentType: string, index: number): string {
  return contentType === 'text/calendar' ? `invite-${index + 1}.ics` : `part-${index + 1}`;
}
