import { PasswordLink } from '#server/models/index';
import { hashToken, newId, newToken } from './ids';

/** How long a one-time link to set a password works. */
export const PASSWORD_LINK_HOURS = 48;

/** Makes a person's one-time link to set a password, inside a unit of work. @returns its token, kept nowhere */
export async function createPasswordLink(shopId: string, personId: string, now: Date): Promise<string> {
  const token = newToken();
  await PasswordLink.create({
    shopId,
    id: newId(),
    personId,
    tokenHash: hashToken(token),
    createdAt: now,
    expiresAt: new Date(now.getTime() + PASSWORD_LINK_HOURS * 60 * 60_000),
  });
  return token;
}
