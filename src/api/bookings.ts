import { call } from './client';
import type { BookAnswer, BookBody, FleetView } from '#shared/schemas/booking';

/** @param key one per intent to book, the same on every retry */
export const book = (slug: string, body: BookBody, key: string) =>
  call<BookAnswer>('POST', `/api/shops/${encodeURIComponent(slug)}/bookings`, { body, key });

/** The machines that the signed-in customer may book. */
export const getFleet = (signal?: AbortSignal) => call<FleetView>('GET', '/api/fleet', { signal });
