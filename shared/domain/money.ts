import type { Language } from './when';

/**
 * Reads a sum as typed ("236.40", "$1,200") to minor units.
 * @returns whole cents, or null where it is not a sum of at most two decimals, zero or more
 */
export function parseCents(typed: string): number | null {
  const plain = typed
    .trim()
    .replace(/^\$/, '')
    .replace(/,(?=\d{3}(\D|$))/g, '');
  const match = /^(\d{1,7})(?:\.(\d{1,2}))?$/.exec(plain);
  if (!match) return null;
  return Number(match[1]) * 100 + Number((match[2] ?? '').padEnd(2, '0'));
}

/** "$236.40". */
export function formatCents(cents: number, language: Language = 'en'): string {
  const formatter = new Intl.NumberFormat(language === 'es' ? 'es-US' : 'en-US', {
    style: 'currency',
    currency: 'USD',
  });
  return formatter.format(cents / 100).replace(/\u00a0/g, ' ');
}
