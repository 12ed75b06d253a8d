import { wireMessage } from '#fakes/fake-sms/message';
import type { SmsMessage } from '#fakes/fake-sms/message';

const DEFAULT_SIZE = 50;
const MAX_SIZE = 1000;

/** One page of the provider's list, filtered and cut as its address asks. `messages` come newest first. */
export function listPage(messages: SmsMessage[], address: string): Record<string, unknown> {
  const [path = '', query = ''] = address.split('?');
  const asked = new URLSearchParams(query);
  const size = clamp(Number(asked.get('PageSize') ?? DEFAULT_SIZE));
  const found = messages.filter((message) => matches(message, asked));
  const start = startOf(found, asked, size);
  const shown = found.slice(start, start + size);
  const page = Math.floor(start / size);
  const uriOf = (number: number, token?: string): string => pageUri(path, asked, size, number, token);
  const more = found.length > start + size;
  return {
    end: start + Math.max(0, shown.length - 1),
    first_page_uri: uriOf(0),
    messages: shown.map(wireMessage),
    next_page_uri: more ? uriOf(page + 1, `PA${shown.at(-1)?.sid ?? ''}`) : null,
    page,
    page_size: size,
    previous_page_uri: page > 0 ? uriOf(page - 1) : null,
    start,
    uri: address,
  };
}

function clamp(size: number): number {
  return Number.isInteger(size) && size >= 1 ? Math.min(size, MAX_SIZE) : DEFAULT_SIZE;
}

/** A token holds the last text shown: new texts at the head do not push a reader of later pages back. */
function startOf(found: SmsMessage[], asked: URLSearchParams, size: number): number {
  const last = asked.get('PageToken')?.replace(/^PA/, '');
  const index = found.findIndex((message) => message.sid === last);
  return index >= 0 ? index + 1 : Number(asked.get('Page') ?? 0) * size;
}

function pageUri(path: string, asked: URLSearchParams, size: number, page: number, token?: string): string {
  const query = new URLSearchParams(asked);
  query.delete('PageToken');
  query.set('PageSize', String(size));
  query.set('Page', String(page));
  if (token) query.set('PageToken', token);
  return `${path}?${query.toString()}`;
}

function matches(message: SmsMessage, asked: URLSearchParams): boolean {
  const to = asked.get('To');
  const from = asked.get('From');
  if (to && message.to !== to) return false;
  if (from && message.from !== from) return false;
  return matchesDate(message.sentAt, asked);
}

/** DateSent is a day in UTC; with < or > it is that moment or day and everything before or after it. */
function matchesDate(sentAt: string | null, asked: URLSearchParams): boolean {
  const on = asked.get('DateSent');
  const before = asked.get('DateSent<');
  const after = asked.get('DateSent>');
  if (!on && !before && !after) return true;
  if (!sentAt) return false;
  if (on && sentAt.slice(0, 10) !== on.slice(0, 10)) return false;
  const comparable = (bound: string): string => (bound.length === 10 ? sentAt.slice(0, 10) : sentAt);
  if (before && !atOrBefore(comparable(before), before)) return false;
  return !after || atOrBefore(after, comparable(after));
}

function atOrBefore(earlier: string, later: string): boolean {
  return Date.parse(earlier) <= Date.parse(later);
}
