import { randomBytes } from 'node:crypto';
import { chmodSync, existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { stateDir } from './checkout.mjs';
import { withLock } from './lock.mjs';

const hex = (bytes) => randomBytes(bytes).toString('hex');
const makers = {
  SESSION_SECRET: () => hex(32),
  LINK_KEY: () => hex(32),
  CODE_KEY: () => hex(32),
  TWILIO_ACCOUNT_SID: () => `AC${hex(16)}`,
  TWILIO_AUTH_TOKEN: () => hex(16),
};

/** The secrets a file holds, with those it lacks made anew; nothing that exists is ever changed. */
export function completeSecrets(kept) {
  return Object.fromEntries(Object.entries(makers).map(([name, make]) => [name, kept[name] || make()]));
}

/** Secrets made once per checkout, in an ignored file that only its owner reads; the environment wins. */
export async function ensureSecrets(env = process.env) {
  const path = join(stateDir, 'secrets.json');
  mkdirSync(stateDir, { recursive: true });
  const secrets = await withLock(join(stateDir, 'secrets.lock'), () => keptSecrets(path));
  for (const name of Object.keys(secrets)) if (env[name]) secrets[name] = env[name];
  return secrets;
}

function keptSecrets(path) {
  const kept = existsSync(path) ? JSON.parse(readFileSync(path, 'utf8')) : {};
  const secrets = completeSecrets(kept);
  if (Object.keys(secrets).some((name) => !kept[name])) {
    writeFileSync(`${path}.new`, `${JSON.stringify(secrets, null, 2)}\n`, { mode: 0o600 });
    renameSync(`${path}.new`, path);
  }
  chmodSync(path, 0o600);
  return secrets;
}
