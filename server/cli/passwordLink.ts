/** Prints a one-time link by which a person of a shop sets a new password: for whoever forgot it. */
import { parseArgs } from 'node:util';
import { parseEnv } from '#server/env';
import { startClock } from '#server/lib/clock';
import { openDb, POOLS, refuseStrongRole, withShop } from '#server/lib/db';
import { createPasswordLink, PASSWORD_LINK_HOURS } from '#server/lib/passwordLinks';
import { Person, Shop } from '#server/models/index';

const USAGE = 'usage: npm run shop:password-link -- --slug SHOP --email ADDRESS';
const env = parseEnv(process.env);

function readOptions(): { slug: string; email: string } {
  const options = { slug: { type: 'string' }, email: { type: 'string' } } as const;
  const { slug, email } = parseArgs({ args: process.argv.slice(2), options, strict: true }).values;
  if (!slug || !email) throw new Error('--slug and --email are needed');
  return { slug, email: email.trim().toLowerCase() };
}

/** @returns the path of the link */
async function linkFor({ slug, email }: { slug: string; email: string }, now: Date): Promise<string> {
  const shop = await Shop.findOne({ where: { slug } });
  if (!shop) throw new Error(`there is no shop ${slug}`);
  const token = await withShop(shop.id, async () => {
    const person = await Person.findOne({ where: { email, accountId: null, leftAt: null } });
    if (!person) throw new Error(`nobody at ${shop.name} signs in as ${email}`);
    return createPasswordLink(shop.id, person.id, now);
  });
  return `/s/${slug}/password/${token}`;
}

async function main(): Promise<void> {
  const options = readOptions();
  const db = openDb({ url: env.DATABASE_URL, role: env.DB_APP_ROLE, pool: POOLS.tool });
  const clock = await startClock(env.CLOCK_URL);
  try {
    await refuseStrongRole(db);
    const path = await linkFor(options, clock.now());
    console.log(`Good once, within ${PASSWORD_LINK_HOURS} hours:\n${env.PUBLIC_URL}${path}`);
  } finally {
    clock.stop();
    await db.close();
  }
}

await main().catch((error: unknown) => {
  console.error(`No link was made: ${error instanceof Error ? error.message : String(error)}\n${USAGE}`);
  process.exitCode = 1;
});
