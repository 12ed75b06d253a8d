/** Opening hours as people read them: days with the same hours together, in the reader's language, by Intl alone. */
import { formatTime, type Language } from './when';

export type Spans = readonly { from: string; to: string }[];
export interface HoursLine {
  /** First and last weekday of the line in short words; equal for a single day. */
  from: string;
  to: string;
  spans: { from: string; to: string }[];
}

/** 1 January 2024 was a Monday: its week names the weekdays. */
function nameOfWeekday(weekday: number, language: Language): string {
  const day = new Date(Date.UTC(2024, 0, weekday));
  const locale = language === 'es' ? 'es-US' : 'en-US';
  return new Intl.DateTimeFormat(locale, { weekday: 'short', timeZone: 'UTC' }).format(day).replace('.', '');
}

const clock = (time: string, language: Language): string =>
  formatTime(`2024-01-01T${time}:00Z`, 'UTC', language);

/** The open days of the week, consecutive ones with equal hours as one line; closed days are left out. */
export function openingHours(hours: Readonly<Record<string, Spans>>, language: Language): HoursLine[] {
  const lines: { first: number; last: number; spans: Spans }[] = [];
  for (let weekday = 1; weekday <= 7; weekday += 1) {
    const spans = hours[String(weekday)] ?? [];
    if (spans.length === 0) continue;
    const before = lines.at(-1);
    const joins = before?.last === weekday - 1 && JSON.stringify(before.spans) === JSON.stringify(spans);
    if (before && joins) before.last = weekday;
    else lines.push({ first: weekday, last: weekday, spans });
  }
  return lines.map(({ first, last, spans }) => ({
    from: nameOfWeekday(first, language),
    to: nameOfWeekday(last, language),
    spans: spans.map((span) => ({ from: clock(span.from, language), to: clock(span.to, language) })),
  }));
}
