/** What anybody may read of a shop, and the times it can take machines in. */
import { z } from 'zod';
import type { Closure, Half, WeekHours } from '#shared/domain/hours';

export interface ComplaintKindView {
  id: string;
  key: string;
  label: { en: string; es: string };
}

/** GET /api/shops/:slug */
export interface ShopView {
  now: string;
  slug: string;
  name: string;
  zone: string;
  /** E.164. */
  phone: string;
  email: string;
  address: string;
  gateNote: { en: string; es: string };
  about: { en: string; es: string };
  hours: WeekHours;
  closures: Closure[];
  complaintKinds: ComplaintKindView[];
  machineKinds: readonly string[];
  consent: { version: string };
}

export const TimesQuery = z.strictObject({ machines: z.coerce.number().int().min(1).max(12).default(1) });

/** One time at which machines can be dropped off. */
export interface FreeTime {
  /** The arrival instant, ISO with offset. */
  at: string;
  /** Whether the half-day has fewer places left than this visit needs. How many are left is never said. */
  full: boolean;
}
export interface FreeDay {
  /** 'YYYY-MM-DD' in the shop's zone. */
  date: string;
  times: FreeTime[];
}
/** GET /api/shops/:slug/times: working days of four weeks; a time already past is left out. */
export interface TimesView {
  now: string;
  zone: string;
  days: FreeDay[];
}

/** Details of the error `times_full`. */
export interface TimesFullDetails {
  half: Half;
  /** The next free times for this number of machines, at most six. */
  next: string[];
}
