import express from 'express';
import twilio from 'twilio';
import { listenHttp } from '#fakes/lib/httpListener';

export const ACCOUNT = `AC${'a1'.repeat(16)}`;
export const TOKEN = 'a-token-for-tests-only';
export const SHOP = '+13035550100';
export const PHONE = '+13035550142';

/** The provider's own SDK, pointed at another host as the application does it. */
export class RebasedClient extends twilio.RequestClient {
  #base: URL;

  constructor(base: string, timeout = 2000) {
    super({ timeout });
    this.#base = new URL(base);
  }

  override request<Data>(
    options: Parameters<typeof twilio.RequestClient.prototype.request<Data>>[0],
  ): ReturnType<typeof twilio.RequestClient.prototype.request<Data>> {
    const address = new URL(options.uri);
    address.protocol = this.#base.protocol;
    address.host = this.#base.host;
    return super.request<Data>({ ...options, uri: address.href });
  }
}

/** An SDK client for the fake at this address. */
export function sdkFor(base: string, token = TOKEN, timeout?: number): twilio.Twilio {
  return twilio(ACCOUNT, token, { httpClient: new RebasedClient(base, timeout) });
}

export interface ReceivedForm {
  path: string;
  fields: Record<string, string>;
  signature: string;
}

export interface FormReceiver {
  url: string;
  received: ReceivedForm[];
  /** What the next requests are answered with. */
  answer: { status: number; body: string };
  stop(): Promise<void>;
}

/** A server that keeps every form or JSON body posted to it. */
export async function startReceiver(): Promise<FormReceiver> {
  const received: ReceivedForm[] = [];
  const answer = { status: 204, body: '' };
  const app = express();
  app.use(express.urlencoded({ extended: false }), express.json());
  app.post('/{*path}', (request, response) => {
    received.push({
      path: request.originalUrl,
      fields: request.body as Record<string, string>,
      signature: request.get('X-Twilio-Signature') ?? '',
    });
    response.status(answer.status).type('xml').send(answer.body);
  });
  const listener = await listenHttp(app);
  return { url: listener.url, received, answer, stop: () => listener.stop() };
}

/** POST or PUT of JSON, as a harness does it. */
export function sendJson(url: string, body: unknown, method = 'POST'): Promise<Response> {
  return fetch(url, { method, headers: { 'Content-Type': 'application/json' }, body: JSON.stringify(body) });
}

/** What an action failed with; fails itself when the action did not. */
export async function failureOf(action: Promise<unknown>): Promise<Record<string, unknown>> {
  const outcome = await action.then(
    () => undefined,
    (error: unknown) => error as Record<string, unknown>,
  );
  if (!outcome) throw new Error('It was expected to fail, and went through.');
  return outcome;
}
