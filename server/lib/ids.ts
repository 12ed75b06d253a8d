import { createHash, createHmac, randomBytes, randomInt, randomUUID } from 'node:crypto';

/** A new row's id. */
export const newId = (): string => randomUUID();

/** A whole number in [0, n) from the system's random source. */
export const pick = (n: number): number => randomInt(n);

/** What is stored of a secret that is found by itself: a link, a session id, a one-time link. */
export function hashToken(token: string): string {
  return createHash('sha256').update(token).digest('hex');
}

/** A secret that cannot be guessed, for addresses. 192 bits. */
export const newToken = (): string => randomBytes(24).toString('base64url');

/** The token of a stub link: 132 bits that only the key's holder can make from the link's id. */
export function linkToken(linkKey: string, linkId: string): string {
  return createHmac('sha256', Buffer.from(linkKey, 'hex')).update(linkId).digest('base64url').slice(0, 22);
}
