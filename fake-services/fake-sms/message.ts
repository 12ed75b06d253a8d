import { countSegments } from '#fakes/fake-sms/segments';

export type MessageStatus = 'queued' | 'sent' | 'delivered' | 'undelivered' | 'failed' | 'received';

/** A text as the fake keeps it; `wireMessage` makes the provider's resource of it. */
export interface SmsMessage {
  sid: string;
  accountSid: string;
  direction: 'outbound-api' | 'outbound-reply' | 'inbound';
  from: string;
  to: string;
  body: string;
  status: MessageStatus;
  errorCode: number | null;
  numSegments: number;
  statusCallback: string | null;
  /** The text for validityPeriod as it came: kept for the reader of the log only. */
  validityPeriod: string | null;
  /** ISO instants on the fake's clock. */
  createdAt: string;
  updatedAt: string;
  sentAt: string | null;
}

const FINAL: readonly MessageStatus[] = ['delivered', 'undelivered', 'failed', 'received'];

/** Whether the provider will not change this message any more. */
export function isFinal(message: SmsMessage): boolean {
  return FINAL.includes(message.status);
}

type NewMessage = Pick<SmsMessage, 'sid' | 'accountSid' | 'direction' | 'from' | 'to' | 'body'> &
  Partial<Pick<SmsMessage, 'statusCallback' | 'validityPeriod'>>;

/** A message at its first moment: outbound ones are queued, inbound ones received. */
export function newMessage(given: NewMessage, at: Date): SmsMessage {
  const inbound = given.direction === 'inbound';
  const iso = at.toISOString();
  return {
    statusCallback: null,
    validityPeriod: null,
    ...given,
    status: inbound ? 'received' : 'queued',
    errorCode: null,
    numSegments: countSegments(given.body),
    createdAt: iso,
    updatedAt: iso,
    sentAt: inbound ? iso : null,
  };
}

const ERROR_TEXTS: Record<number, string> = {
  30003: 'Unreachable destination handset',
  30005: 'Unknown destination handset',
  30006: 'Landline or unreachable carrier',
  30007: 'Message filtered',
};

/** The provider's message resource: snake case, numbers as strings, dates as RFC 2822 to the second. */
export function wireMessage(message: SmsMessage): Record<string, unknown> {
  const uri = `/2010-04-01/Accounts/${message.accountSid}/Messages/${message.sid}`;
  return {
    account_sid: message.accountSid,
    api_version: '2010-04-01',
    body: message.body,
    date_created: rfc2822(message.createdAt),
    date_sent: message.sentAt && rfc2822(message.sentAt),
    date_updated: rfc2822(message.updatedAt),
    direction: message.direction,
    error_code: message.errorCode,
    error_message: message.errorCode && (ERROR_TEXTS[message.errorCode] ?? 'Unknown error'),
    from: message.from,
    messaging_service_sid: null,
    num_media: '0',
    num_segments: String(message.numSegments),
    price: null,
    price_unit: 'USD',
    sid: message.sid,
    status: message.status,
    subresource_uris: { media: `${uri}/Media.json` },
    to: message.to,
    uri: `${uri}.json`,
  };
}

function rfc2822(iso: string): string {
  return new Date(iso).toUTCString().replace('GMT', '+0000');
}
