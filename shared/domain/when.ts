/**
 * Dates and times as a reader sees them: in the shop's zone, in the reader's language, by Intl alone
 * (the stub carries no date library).
 */
export const LANGUAGES = ['en', 'es'] as const;
export type Language = (typeof LANGUAGES)[number];

const LOCALE: Record<Language, string> = { en: 'en-US', es: 'es-US' };

type Instant = string | Date;

function format(
  instant: Instant,
  zone: string,
  language: Language,
  options: Intl.DateTimeFormatOptions,
): string {
  const formatter = new Intl.DateTimeFormat(LOCALE[language], { timeZone: zone, ...options });
  return formatter.format(new Date(instant)).replace(/[\u202f\u00a0]/g, ' ');
}

/** "Thu 3 Dec" / "jue 3 dic". */
export function formatDay(instant: Instant, zone: string, language: Language): string {
  const part = (options: Intl.DateTimeFormatOptions) =>
    format(instant, zone, language, options).replace('.', '');
  return `${part({ weekday: 'short' })} ${part({ day: 'numeric' })} ${part({ month: 'short' })}`;
}

/** "Thursday 3 December" / "jueves 3 de diciembre". */
export function formatLongDay(instant: Instant, zone: string, language: Language): string {
  const part = (options: Intl.DateTimeFormatOptions) => format(instant, zone, language, options);
  const of = language === 'es' ? ' de ' : ' ';
  return `${part({ weekday: 'long' })} ${part({ day: 'numeric' })}${of}${part({ month: 'long' })}`;
}

/** "9:00 am" / "9:00 am". Noon and midnight are 12:00 pm and 12:00 am. */
export function formatTime(instant: Instant, zone: string, language: Language): string {
  return format(instant, zone, language === 'es' ? 'en' : language, {
    hour: 'numeric',
    minute: '2-digit',
  }).toLowerCase();
}

/** The zone's abbreviation at that instant: "MST", "MDT". */
export function formatZone(instant: Instant, zone: string): string {
  const formatter = new Intl.DateTimeFormat('en-US', { timeZone: zone, timeZoneName: 'short' });
  return (
    formatter.formatToParts(new Date(instant)).find((part) => part.type === 'timeZoneName')?.value ?? zone
  );
}

/** "Thu 3 Dec, 9:00 am MST". */
export function formatWhen(instant: Instant, zone: string, language: Language): string {
  return `${formatDay(instant, zone, language)}, ${formatTime(instant, zone, language)} ${formatZone(instant, zone)}`;
}
