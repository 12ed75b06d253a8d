/** Opening hours as typed by a person: "mon-fri 07:00-17:00, sat 08:00-12:00". */
import type { Weekday, WeekHours } from '#shared/domain/hours';

const DAYS = ['mon', 'tue', 'wed', 'thu', 'fri', 'sat', 'sun'];
const ENTRY = /^([a-z]{3})(?:-([a-z]{3}))?\s+(\d{1,2}:\d{2})\s*-\s*(\d{1,2}:\d{2})$/;
const CLOCK = /^([01]\d|2[0-3]):[0-5]\d$/;

/**
 * Reads hours as typed.
 * @returns hours by ISO weekday, or null where they cannot be read: an unknown day, a closing before the opening,
 * spans of one day that overlap
 */
export function parseHours(typed: string): WeekHours | null {
  const hours: WeekHours = { 1: [], 2: [], 3: [], 4: [], 5: [], 6: [], 7: [] };
  for (const entry of typed.toLowerCase().split(',')) {
    const match = ENTRY.exec(entry.trim());
    if (!match) return null;
    const [, firstDay = '', lastDay = firstDay, opens = '', closes = ''] = match;
    const [first, last] = [DAYS.indexOf(firstDay), DAYS.indexOf(lastDay)];
    const span = { from: opens.padStart(5, '0'), to: closes.padStart(5, '0') };
    if (first < 0 || last < first || !isSpan(span)) return null;
    for (let day = first; day <= last; day += 1) hours[String(day + 1) as Weekday].push(span);
  }
  return Object.values(hours).every(isInOrder) ? hours : null;
}

interface Span {
  from: string;
  to: string;
}

function isSpan({ from, to }: Span): boolean {
  const isEnd = CLOCK.test(to) || to === '24:00';
  return CLOCK.test(from) && isEnd && from < to;
}

function isInOrder(spans: Span[]): boolean {
  return spans.every((span, index) => index === 0 || (spans[index - 1]?.to ?? '') <= span.from);
}
