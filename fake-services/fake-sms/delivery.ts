import type { CallbackPlan } from '#fakes/fake-sms/faults';
import type { MessageStatus, SmsMessage } from '#fakes/fake-sms/message';
import type { MessageStore } from '#fakes/fake-sms/messageStore';
import { postSigned } from '#fakes/fake-sms/webhooks';
import type { WebhookFields } from '#fakes/fake-sms/webhooks';
import { drawFrom } from '#fakes/lib/chance';
import type { Range } from '#fakes/lib/chance';

/** How a message ends when it does not arrive. */
export interface BadEnd {
  status: 'undelivered' | 'failed';
  errorCode: number;
}

/** Carries accepted texts on to their end and reports each status after the first. */
export class Delivery {
  #timers = new Set<NodeJS.Timeout>();
  #stopped = false;
  #reports = new Map<string, Promise<unknown>>();

  constructor(
    private readonly store: MessageStore,
    private readonly authToken: string,
    private readonly plan: () => CallbackPlan,
    private readonly chance: () => number,
  ) {}

  /** Starts the way from queued (or sent, after a restart) to delivered or to the bad end. */
  carry(message: SmsMessage, badEnd?: BadEnd): void {
    const steps: MessageStatus[] = badEnd?.status === 'failed' ? [] : ['sent'];
    steps.push(badEnd?.status ?? 'delivered');
    this.#step(message, message.status === 'sent' ? steps.slice(1) : steps, badEnd?.errorCode ?? null);
  }

  stop(): void {
    this.#stopped = true;
    for (const timer of this.#timers) clearTimeout(timer);
    this.#timers.clear();
  }

  #step(message: SmsMessage, [status, ...rest]: MessageStatus[], errorCode: number | null): void {
    if (!status) return;
    this.#after(this.#draw(this.plan().delayMs), () => {
      this.store.setStatus(message, status, rest.length === 0 ? errorCode : null);
      this.#report(message);
      this.#step(message, rest, errorCode);
    });
  }

  #report(message: SmsMessage): void {
    const { off, drop, double, shuffle, delayMs } = this.plan();
    if (off || !message.statusCallback) return;
    if (this.chance() < drop) return;
    const fields = callbackFields(message);
    const times = this.chance() < double ? 2 : 1;
    for (let time = 0; time < times; time += 1) {
      if (shuffle) {
        this.#after(3 * this.#draw(delayMs) * this.chance(), () => void this.#post(message, fields));
      } else this.#postInOrder(message, fields);
    }
  }

  /** Unshuffled, the next status is reported once the receiver has answered the last one. */
  #postInOrder(message: SmsMessage, fields: WebhookFields): void {
    const before = this.#reports.get(message.sid) ?? Promise.resolve();
    const report = before.then(() => this.#post(message, fields));
    this.#reports.set(message.sid, report);
    void report.then(() => {
      if (this.#reports.get(message.sid) === report) this.#reports.delete(message.sid);
    });
  }

  #post(message: SmsMessage, fields: WebhookFields): Promise<unknown> {
    return postSigned(message.statusCallback ?? '', fields, this.authToken);
  }

  #draw(range: Range): number {
    return drawFrom(range, this.chance);
  }

  #after(ms: number, act: () => void): void {
    if (this.#stopped) return;
    const timer = setTimeout(() => {
      this.#timers.delete(timer);
      act();
    }, ms);
    this.#timers.add(timer);
  }
}

function callbackFields(message: SmsMessage): WebhookFields {
  const fields: WebhookFields = {
    AccountSid: message.accountSid,
    ApiVersion: '2010-04-01',
    From: message.from,
    MessageSid: message.sid,
    MessageStatus: message.status,
    SmsSid: message.sid,
    SmsStatus: message.status,
    To: message.to,
  };
  return message.errorCode === null ? fields : { ...fields, ErrorCode: String(message.errorCode) };
}
