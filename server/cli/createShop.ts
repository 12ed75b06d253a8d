/** Starts a real shop, without a demo: settings with sensible hours, complaint kinds, and the owner's one-time link. */
import { Sequelize } from 'sequelize';
import { parseEnv } from '#server/env';
import { startClock } from '#server/lib/clock';
import { asRole, openDb, POOLS, refuseStrongRole, rows, withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { openNewShop } from '#server/lib/newShop';
import { createPasswordLink, PASSWORD_LINK_HOURS } from '#server/lib/passwordLinks';
import { Person, Shop } from '#server/models/index';
import { askForRest, checkForm, givenOnCommandLine, USAGE, type ShopForm } from './shopForm';

const env = parseEnv(process.env);

async function readForm(): Promise<ShopForm> {
  const given = givenOnCommandLine(process.argv.slice(2));
  return checkForm(process.stdin.isTTY ? await askForRest(given) : given);
}

async function refuseTaken({ slug, sender }: ShopForm): Promise<void> {
  const faults: string[] = [];
  if (await Shop.findOne({ where: { slug } })) faults.push(`  --slug: another shop has ${slug}`);
  if ((await rows('select 1 from sender_numbers where phone = $1', [sender])).length > 0) {
    faults.push(`  --sender: another shop texts from ${sender}`);
  }
  if (faults.length > 0) throw new Error(faults.join('\n'));
}

async function createShop(form: ShopForm): Promise<string> {
  const owner = new Sequelize(asRole(env.DATABASE_URL, env.DB_OWNER_ROLE), {
    dialect: 'postgres',
    logging: false,
    pool: { max: 1 },
  });
  try {
    const { name, slug, zone, hours, phone, sender, email, address, 'text-name': textName } = form;
    return await openNewShop(owner, { name, slug, zone, hours, phone, sender, email, address, textName });
  } finally {
    await owner.close();
  }
}

/** @returns the path of the owner's one-time link */
async function inviteOwner(shopId: string, form: ShopForm, now: Date): Promise<string> {
  const token = await withShop(shopId, async () => {
    const owner = await Person.create({
      shopId,
      id: newId(),
      name: form['owner-name'],
      email: form['owner-email'],
      roles: ['owner', 'counter', 'mechanic'],
      createdAt: now,
    });
    return createPasswordLink(shopId, owner.id, now);
  });
  return `/s/${form.slug}/password/${token}`;
}

async function main(): Promise<void> {
  if (process.argv.includes('--help')) {
    console.log(USAGE);
    return;
  }
  const form = await readForm();
  const db = openDb({
    url: env.DATABASE_URL,
    role: env.DB_APP_ROLE,
    pool: POOLS.tool,
    applicationName: 'benchbell create shop',
  });
  const clock = await startClock(env.CLOCK_URL);
  try {
    await refuseStrongRole(db);
    await refuseTaken(form);
    const shopId = await createShop(form);
    const path = await inviteOwner(shopId, form, clock.now());
    console.log(`${form.name} is open at ${env.PUBLIC_URL}/s/${form.slug}`);
    console.log(`${form['owner-name']} sets a password here, once, within ${PASSWORD_LINK_HOURS} hours:`);
    console.log(`${env.PUBLIC_URL}${path}`);
  } finally {
    clock.stop();
    await db.close();
  }
}

await main().catch((error: unknown) => {
  console.error(
    `The shop was not created:\n${error instanceof Error ? error.message : String(error)}\n${USAGE}`,
  );
  process.exitCode = 1;
});
