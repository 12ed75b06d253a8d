/** The text provider, behind an interface of our own: what was taken, what was refused, and what nobody knows. */
import twilio from 'twilio';
import type { Env } from '#server/env';
import { refuseInUnit } from './db';

export interface OutgoingText {
  from: string;
  to: string;
  body: string;
  statusCallback: string;
  /** Seconds after which a text that still waits at the provider is dropped: a stale one is worse than none. */
  validitySeconds: number;
}

export type SendResult =
  | { kind: 'accepted'; providerId: string }
  /** Not taken, and never will be. */
  | { kind: 'refused'; code: string }
  /** Not taken, because of the hour and not of the text: to be tried again. */
  | { kind: 'later'; reason: string }
  /** It may have been taken: no blind second try. */
  | { kind: 'unknown'; reason: string };

export interface SentText {
  providerId: string;
  body: string;
  createdAt: Date;
}

export interface SmsGateway {
  send(text: OutgoingText): Promise<SendResult>;
  /** The newest texts that the provider took from us for that phone, newest first. */
  findSent(to: string): Promise<SentText[]>;
}

const TIMEOUT_MS = 10_000;
const NEWEST = 20;

const { RequestClient } = twilio;
type Request = Parameters<InstanceType<typeof RequestClient>['request']>[0];

/** Sends every request to another base address: the documented way to have a stand-in answer for the provider. */
class RebasedClient extends RequestClient {
  readonly #base: URL;

  constructor(base: string) {
    super({ timeout: TIMEOUT_MS, autoRetry: false });
    this.#base = new URL(base);
  }

  override request<T>(request: Request) {
    const uri = new URL(request.uri);
    uri.protocol = this.#base.protocol;
    uri.host = this.#base.host;
    return super.request<T>({ ...request, uri: uri.href } as Parameters<
      typeof RequestClient.prototype.request<T>
    >[0]);
  }
}

/** The provider of this process. */
export function openSmsGateway(
  env: Pick<Env, 'TWILIO_ACCOUNT_SID' | 'TWILIO_AUTH_TOKEN' | 'TWILIO_API_BASE'>,
): SmsGateway {
  const { TWILIO_ACCOUNT_SID: sid, TWILIO_AUTH_TOKEN: token, TWILIO_API_BASE: base } = env;
  const httpClient = base
    ? new RebasedClient(base)
    : new RequestClient({ timeout: TIMEOUT_MS, autoRetry: false });
  const client = twilio(sid, token, { httpClient });
  return {
    async send({ from, to, body, statusCallback, validitySeconds }) {
      refuseInUnit('a text');
      try {
        const options = { from, to, body, statusCallback, validityPeriod: validitySeconds };
        const { sid: providerId } = await client.messages.create(options);
        return { kind: 'accepted', providerId };
      } catch (error) {
        return resultOfError(error);
      }
    },
    async findSent(to) {
      refuseInUnit('a look-up');
      const found = await client.messages.list({ to, limit: NEWEST, pageSize: NEWEST });
      return found.map(({ sid: providerId, body, dateCreated }) => ({
        providerId,
        body,
        createdAt: dateCreated,
      }));
    },
  };
}

/** Our credentials or the account are at fault, or there is a rush: nothing was taken, and the text is not to blame. */
const NOT_THE_TEXT = [401, 403, 404, 429];
/** The connection never came to be, so nothing was taken. */
const NEVER_CONNECTED = ['ECONNREFUSED', 'ENOTFOUND', 'EAI_AGAIN', 'EHOSTUNREACH', 'ENETUNREACH'];

/** What an error of the provider's client means for the text. */
export function resultOfError(error: unknown): SendResult {
  const { status, code, message } = error as { status?: number; code?: number | string; message?: string };
  if (typeof status === 'number' && status >= 400 && status < 500) {
    const reason = String(code ?? status);
    return NOT_THE_TEXT.includes(status) ? { kind: 'later', reason } : { kind: 'refused', code: reason };
  }
  const reason = String(code ?? status ?? message);
  return NEVER_CONNECTED.includes(reason) ? { kind: 'later', reason } : { kind: 'unknown', reason };
}
