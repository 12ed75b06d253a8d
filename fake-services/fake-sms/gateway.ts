import { setTimeout as wait } from 'node:timers/promises';
import { Delivery } from '#fakes/fake-sms/delivery';
import type { BadEnd } from '#fakes/fake-sms/delivery';
import { DEFAULT_CALLBACKS } from '#fakes/fake-sms/faults';
import type { CallbackPlan, SmsFault, SmsFaultSettings } from '#fakes/fake-sms/faults';
import type { SmsMessage } from '#fakes/fake-sms/message';
import { keywordOf, MessageStore } from '#fakes/fake-sms/messageStore';
import { postSigned } from '#fakes/fake-sms/webhooks';
import type { WebhookFields } from '#fakes/fake-sms/webhooks';
import { drawFrom, seededChance } from '#fakes/lib/chance';
import type { Range } from '#fakes/lib/chance';
import { FaultBook } from '#fakes/lib/faultBook';

export interface GatewayOptions {
  accountSid: string;
  authToken: string;
  /** Where texts from people go. Without it they are only kept. */
  inboundUrl?: string;
  /** Adds OptOutType to inbound texts, as the provider does with its advanced opt-out. Default false. */
  optOutType?: boolean;
  now: () => Date;
  logPath?: string;
  settings: SmsFaultSettings;
}

const HOOK_TIMEOUT_MS = 5_000;

/** Everything behind the wire: the texts, the faults that are set, the way to the phones and back. */
export class Gateway {
  readonly store: MessageStore;
  readonly faults = new FaultBook<SmsFault>();
  hookUrl: string | undefined;
  #chance = seededChance(1);
  #delivery: Delivery;
  #callbacks: CallbackPlan;
  #optedOut = new Set<string>();
  #notMobile = new Set<string>();
  #listLagMs: Range = 0;
  #hiddenUntil = new Map<string, number>();

  constructor(readonly options: GatewayOptions) {
    this.store = new MessageStore(options.accountSid, options.now, options.logPath);
    this.#callbacks = { ...DEFAULT_CALLBACKS, ...options.settings.callbacks };
    const plan = (): CallbackPlan => this.#callbacks;
    this.#delivery = new Delivery(this.store, options.authToken, plan, () => this.#chance());
    this.set(options.settings);
    for (const message of this.store.unfinished()) this.#delivery.carry(message);
  }

  set(settings: SmsFaultSettings): void {
    if (settings.seed !== undefined) {
      this.#chance = seededChance(settings.seed);
      this.faults.reseed(settings.seed);
    }
    if (settings.faults) this.faults.add(settings.faults);
    if (settings.slowMs !== undefined) this.faults.add([{ kind: 'slow', ms: settings.slowMs }]);
    if (settings.optedOut) this.#optedOut = new Set(settings.optedOut);
    if (settings.notMobile) this.#notMobile = new Set(settings.notMobile);
    if (settings.listLagMs !== undefined) this.#listLagMs = settings.listLagMs;
    this.#callbacks = { ...this.#callbacks, ...settings.callbacks };
  }

  /** Healthy again; callbacks as they were given at start. What people said by STOP stays said. */
  clear(): void {
    this.faults.clear();
    this.#optedOut.clear();
    this.#notMobile.clear();
    this.#listLagMs = 0;
    this.#hiddenUntil.clear();
    this.#callbacks = { ...DEFAULT_CALLBACKS, ...this.options.settings.callbacks };
  }

  settings(): Required<Omit<SmsFaultSettings, 'seed' | 'slowMs'>> {
    return {
      faults: this.faults.list(),
      optedOut: [...this.#optedOut],
      notMobile: [...this.#notMobile],
      listLagMs: this.#listLagMs,
      callbacks: this.#callbacks,
    };
  }

  isOptedOut(phone: string, sender: string): boolean {
    return this.#optedOut.has(phone) || this.store.isOptedOut(phone, sender);
  }

  isNotMobile(phone: string): boolean {
    return this.#notMobile.has(phone);
  }

  draw(range: Range): number {
    return drawFrom(range, this.#chance);
  }

  /** Takes the text for good: on disk, on its way, and shown to the hook before anybody is answered. */
  async accept(draft: Parameters<MessageStore['accept']>[0]): Promise<SmsMessage> {
    const message = this.store.accept(draft);
    const lag = this.draw(this.#listLagMs);
    if (lag > 0) this.#hiddenUntil.set(message.sid, performance.now() + lag);
    this.#delivery.carry(message, this.#badEnd(message.to));
    await this.#callHook(message);
    return message;
  }

  /** The list as the provider shows it: newest first, and late if told so. */
  listed(): SmsMessage[] {
    const shown = (sid: string): boolean => (this.#hiddenUntil.get(sid) ?? 0) <= performance.now();
    return this.store
      .all()
      .filter((message) => shown(message.sid))
      .reverse();
  }

  /** A person sends a text: kept, heeded and passed on. Says what the webhook answered. */
  async receive(
    from: string,
    to: string,
    body: string,
  ): Promise<{ sid: string; webhookStatus: number | null }> {
    const message = this.store.receive(from, to, body);
    const { inboundUrl, authToken } = this.options;
    if (!inboundUrl) return { sid: message.sid, webhookStatus: null };
    const answer = await postSigned(inboundUrl, this.#inboundFields(message), authToken);
    if (answer && answer.status < 300) this.#sendReplies(message, answer.text);
    return { sid: message.sid, webhookStatus: answer?.status ?? null };
  }

  stop(): void {
    this.#delivery.stop();
    this.store.close();
  }

  #badEnd(to: string): BadEnd | undefined {
    const fault = this.faults.strike(['undelivered', 'failed'], [to]);
    return fault && { status: fault.kind, errorCode: fault.errorCode ?? 30003 };
  }

  async #callHook(message: SmsMessage): Promise<void> {
    if (!this.hookUrl) return;
    const call = fetch(this.hookUrl, {
      method: 'POST',
      headers: { 'Content-Type': 'application/json' },
      body: JSON.stringify(message),
    }).catch(() => undefined);
    const limit = new AbortController();
    await Promise.race([
      call,
      wait(HOOK_TIMEOUT_MS, undefined, { signal: limit.signal }).catch(() => undefined),
    ]);
    limit.abort();
  }

  #inboundFields(message: SmsMessage): WebhookFields {
    const fields: WebhookFields = {
      AccountSid: message.accountSid,
      ApiVersion: '2010-04-01',
      Body: message.body,
      From: message.from,
      MessageSid: message.sid,
      NumMedia: '0',
      NumSegments: String(message.numSegments),
      SmsMessageSid: message.sid,
      SmsSid: message.sid,
      SmsStatus: 'received',
      To: message.to,
    };
    const keyword = this.options.optOutType ? keywordOf(message.body) : undefined;
    return keyword ? { ...fields, OptOutType: keyword } : fields;
  }

  /** A webhook may answer with markup that holds the reply; the provider sends it as a text of its own. */
  #sendReplies(inbound: SmsMessage, markup: string): void {
    for (const [, text] of markup.matchAll(/<Message[^>]*>(?:<Body>)?([^<]+)/g)) {
      if (!text?.trim() || this.isOptedOut(inbound.from, inbound.to)) continue;
      const body = decodeMarkup(text.trim());
      const reply = this.store.accept({
        direction: 'outbound-reply',
        from: inbound.to,
        to: inbound.from,
        body,
      });
      this.#delivery.carry(reply);
    }
  }
}

function decodeMarkup(text: string): string {
  const named: Record<string, string> = { lt: '<', gt: '>', quot: '"', apos: "'", amp: '&' };
  return text.replace(/&(#\d+|\w+);/g, (whole, name: string) =>
    name.startsWith('#') ? String.fromCodePoint(Number(name.slice(1))) : (named[name] ?? whole),
  );
}
