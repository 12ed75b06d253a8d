/**
 * A random id. `crypto.randomUUID` is missing where the page came over plain http from another machine
 * (a phone on the shop's network), so it is drawn from bytes.
 */
export function randomId(): string {
  const bytes = crypto.getRandomValues(new Uint8Array(16));
  return Array.from(bytes, (byte) => byte.toString(16).padStart(2, '0')).join('');
}
