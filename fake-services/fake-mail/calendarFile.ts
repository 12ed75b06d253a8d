import { DateTime } from 'luxon';

/** What a person wants to know of a calendar file. */
export interface CalendarEvent {
  method: string;
  summary: string;
  location: string;
  description: string;
  status: string;
  start: string;
  end: string;
  uid: string;
  sequence: string;
}

interface Property {
  name: string;
  zone: string | undefined;
  value: string;
}

/** Reads the first event of an iCalendar file: unfolded, unescaped, its times in the zone that it names (RFC 5545). */
export function readCalendarFile(text: string): CalendarEvent {
  const properties = text
    .replace(/\r?\n[ \t]/g, '')
    .split(/\r?\n/)
    .map(parseProperty);
  const begin = properties.findIndex(({ name, value }) => name === 'BEGIN' && value === 'VEVENT');
  const end = properties.findIndex(({ name, value }) => name === 'END' && value === 'VEVENT');
  const event = properties.slice(begin + 1, end);
  const find = (name: string): Property | undefined => event.find((property) => property.name === name);
  const textOf = (name: string): string => unescapeText(find(name)?.value ?? '');
  return {
    method: properties.find(({ name }) => name === 'METHOD')?.value ?? '',
    summary: textOf('SUMMARY'),
    location: textOf('LOCATION'),
    description: textOf('DESCRIPTION'),
    status: textOf('STATUS'),
    start: showTime(find('DTSTART')),
    end: showTime(find('DTEND')),
    uid: textOf('UID'),
    sequence: textOf('SEQUENCE'),
  };
}

/** NAME;PARAM=value;PARAM="va:lue":the rest */
function parseProperty(line: string): Property {
  const match = /^([A-Za-z0-9-]+)((?:;[^=:;]+=(?:"[^"]*"|[^:;"]*))*):(.*)$/.exec(line);
  const [, name = '', parameters = '', value = ''] = match ?? [];
  const zone = /;TZID=(?:"([^"]*)"|([^:;"]*))/i.exec(parameters);
  return { name: name.toUpperCase(), zone: zone?.[1] ?? zone?.[2], value };
}

function unescapeText(value: string): string {
  return value.replace(/\\([\\;,nN])/g, (_whole, sign: string) => (sign.toLowerCase() === 'n' ? '\n' : sign));
}

function showTime(property: Property | undefined): string {
  if (!property) return '';
  const { value, zone } = property;
  if (/^\d{8}$/.test(value)) return DateTime.fromFormat(value, 'yyyyMMdd').toFormat('cccc d LLLL yyyy');
  const utc = value.endsWith('Z');
  const at = DateTime.fromFormat(value.replace('Z', ''), "yyyyMMdd'T'HHmmss", { zone: utc ? 'utc' : zone });
  if (!at.isValid) return value;
  const shown = at.toFormat('cccc d LLLL yyyy, HH:mm');
  if (!utc && !zone) return `${shown} (no zone given)`;
  return `${shown} ${at.toFormat('ZZZZ')} (${utc ? 'UTC' : zone})`;
}
