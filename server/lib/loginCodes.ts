import { createHmac, timingSafeEqual } from 'node:crypto';
import { pick } from './ids';

/** A code lives ten minutes and stands five checks: five guesses of a million. */
export const CODE_LIFE_MS = 10 * 60_000;
export const CODE_CHECKS = 5;

/** Six digits, each equally likely. */
export const drawDigits = (): string => String(pick(1_000_000)).padStart(6, '0');

/** What is kept of a code. It is bound to its request: the same digits of another request do not fit. */
export function codeHmac(key: string, requestId: string, code: string): string {
  return createHmac('sha256', Buffer.from(key, 'hex')).update(`${requestId}:${code}`).digest('hex');
}

/** Of a request whose code was never sent, which is answered like any other and has no code that fits. */
export const NO_CODE = '';

/** Whether a kept code is this one. */
export function fitsCode(kept: string, hmac: string): boolean {
  return kept.length === hmac.length && timingSafeEqual(Buffer.from(kept), Buffer.from(hmac));
}
