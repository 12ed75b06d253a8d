import { hash, verify } from '@node-rs/argon2';
import { refuseInUnit } from './db';
import { newToken } from './ids';

/** OWASP Password Storage Cheat Sheet: Argon2id (the library's default), 19 MiB, two passes, one lane. */
const ARGON = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

/** Hashes a password for keeping. Outside a unit of work: it takes its time on purpose. */
export function hashPassword(password: string): Promise<string> {
  refuseInUnit('hashing');
  return hash(password, ARGON);
}

let dummy: Promise<string> | undefined;

/** Whether the password fits. Without a hash it takes as long and says no, so that time does not tell who exists. */
export async function fitsPassword(password: string, kept: string | null | undefined): Promise<boolean> {
  refuseInUnit('hashing');
  dummy ??= hash(newToken(), ARGON);
  const fits = await verify(kept ?? (await dummy), password);
  return fits && Boolean(kept);
}
