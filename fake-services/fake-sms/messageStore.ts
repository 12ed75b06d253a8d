import { randomBytes } from 'node:crypto';
import { isFinal, newMessage } from '#fakes/fake-sms/message';
import type { MessageStatus, SmsMessage } from '#fakes/fake-sms/message';
import { openJournal } from '#fakes/lib/journal';
import type { Journal } from '#fakes/lib/journal';

/** One line of sms-log.jsonl. */
export type SmsLogEntry =
  | { event: 'accepted' | 'inbound'; at: string; message: SmsMessage }
  | { event: 'status'; at: string; sid: string; status: MessageStatus; errorCode: number | null };

type Draft = Omit<Parameters<typeof newMessage>[0], 'sid' | 'accountSid'>;

// The provider's default words on long numbers; a word counts only when it is the whole text.
const STOP_WORDS = ['STOP', 'STOPALL', 'UNSUBSCRIBE', 'END', 'QUIT', 'CANCEL', 'REVOKE', 'OPTOUT'];
const START_WORDS = ['START', 'YES', 'UNSTOP'];
const HELP_WORDS = ['HELP', 'INFO'];

export type Keyword = 'STOP' | 'START' | 'HELP';

/** What the provider takes an inbound text for, if it is one of its words. */
export function keywordOf(body: string): Keyword | undefined {
  const word = body.trim().toUpperCase();
  if (STOP_WORDS.includes(word)) return 'STOP';
  if (START_WORDS.includes(word)) return 'START';
  return HELP_WORDS.includes(word) ? 'HELP' : undefined;
}

/** All texts, oldest first, with the log on disk behind them. */
export class MessageStore {
  #messages: SmsMessage[] = [];
  #bySid = new Map<string, SmsMessage>();
  #optOuts = new Set<string>();
  #journal: Journal<SmsLogEntry>;

  constructor(
    readonly accountSid: string,
    private readonly now: () => Date,
    logPath?: string,
  ) {
    this.#journal = openJournal<SmsLogEntry>(logPath);
    for (const entry of this.#journal.entries()) this.#replay(entry);
  }

  /** Accepts an outbound text: on disk before this returns. */
  accept(draft: Draft): SmsMessage {
    return this.#add(draft, 'accepted');
  }

  /** Takes a text that a person sent, and its STOP or START to heart. */
  receive(from: string, to: string, body: string): SmsMessage {
    return this.#add({ direction: 'inbound', from, to, body }, 'inbound');
  }

  setStatus(message: SmsMessage, status: MessageStatus, errorCode: number | null): void {
    const at = this.now().toISOString();
    this.#applyStatus(message, status, errorCode, at);
    this.#journal.append({ event: 'status', at, sid: message.sid, status, errorCode });
  }

  find(sid: string): SmsMessage | undefined {
    return this.#bySid.get(sid);
  }

  all(): readonly SmsMessage[] {
    return this.#messages;
  }

  /** What a restart left between queued and its end. */
  unfinished(): SmsMessage[] {
    return this.#messages.filter((message) => !isFinal(message));
  }

  isOptedOut(phone: string, sender: string): boolean {
    return this.#optOuts.has(`${sender} ${phone}`);
  }

  close(): void {
    this.#journal.close();
  }

  #add(draft: Draft, event: 'accepted' | 'inbound'): SmsMessage {
    const at = this.now();
    const sid = `SM${randomBytes(16).toString('hex')}`;
    const message = newMessage({ ...draft, sid, accountSid: this.accountSid }, at);
    this.#journal.append({ event, at: at.toISOString(), message }, true);
    this.#keep(message);
    return message;
  }

  #keep(message: SmsMessage): void {
    this.#messages.push(message);
    this.#bySid.set(message.sid, message);
    if (message.direction === 'inbound') this.#heed(message);
  }

  #heed({ from, to, body }: SmsMessage): void {
    const keyword = keywordOf(body);
    if (keyword === 'STOP') this.#optOuts.add(`${to} ${from}`);
    if (keyword === 'START') this.#optOuts.delete(`${to} ${from}`);
  }

  #replay(entry: SmsLogEntry): void {
    if (entry.event !== 'status') return this.#keep(entry.message);
    const message = this.#bySid.get(entry.sid);
    if (message) this.#applyStatus(message, entry.status, entry.errorCode, entry.at);
  }

  #applyStatus(message: SmsMessage, status: MessageStatus, errorCode: number | null, at: string): void {
    Object.assign(message, { status, errorCode, updatedAt: at });
    if (status === 'sent') message.sentAt = at;
  }
}
