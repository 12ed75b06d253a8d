/** Seeds the demo where the database has no shop yet; prints the shops and the demo's sign-ins as one JSON line. */
import { createHmac } from 'node:crypto';
import { parseEnv } from '#server/env';
import { startClock } from '#server/lib/clock';
import { asRole, openDb, POOLS, refuseStrongRole } from '#server/lib/db';
import { createLogger } from '#server/lib/logger';
import { Shop } from '#server/models/index';
import { Sequelize } from 'sequelize';
import { seedShop } from '../../seeders/demo';
import type { DemoShop } from '../../seeders/scenario';
import { demoShops } from '../../seeders/shops';
import { formatPhone } from '#shared/domain/phone';

const env = parseEnv(process.env);
if (env.NODE_ENV === 'production') {
  throw new Error('The demo is not for production. Use npm run shop:create.');
}

/** Each installation has its own demo password, made from its secrets. */
const password = `demo-${createHmac('sha256', env.CODE_KEY).update('demo password').digest('hex').slice(0, 12)}`;

async function seed(): Promise<void> {
  const owner = new Sequelize(asRole(env.DATABASE_URL, env.DB_OWNER_ROLE), {
    dialect: 'postgres',
    logging: false,
  });
  const services = { env, clock: await startClock(env.CLOCK_URL), log: createLogger(env, 'seed') };
  for (const demo of demoShops) {
    console.log(`seeding ${demo.name}`);
    await seedShop(services, owner, demo, password);
  }
  services.clock.stop();
  await owner.close();
}

function signIns(shops: DemoShop[]) {
  return shops.flatMap((demo) => [
    ...demo.staff.map(({ name, email, roles }) => ({
      role: `${roles.join(', ')} (${name})`,
      where: `/s/${demo.slug}/sign-in`,
      how: `${email}, password ${password}`,
    })),
    ...demo.accounts
      .flatMap(({ name: account, people }) => people.map((person) => ({ account, ...person })))
      .filter(({ phone, roles }) => phone && !roles.includes('bookkeeper'))
      .slice(0, 2)
      .map(({ account, name, phone = '', roles }) => ({
        role: `${roles.join(', ')} of ${account} (${name})`,
        where: `/s/${demo.slug}/sign-in`,
        how: `code by text to ${formatPhone(phone)}, read it on the phones page`,
      })),
  ]);
}

const db = openDb({
  url: env.DATABASE_URL,
  role: env.DB_APP_ROLE,
  pool: POOLS.tool,
  applicationName: 'benchbell seed',
});
await refuseStrongRole(db);
if ((await Shop.count()) === 0) await seed();
const open = await Shop.findAll({ order: ['name'] });
await db.close();
const seeded = demoShops.filter(({ slug }) => open.some((shop) => shop.slug === slug));
console.log(
  JSON.stringify({ shops: open.map(({ name, slug }) => ({ name, slug })), signIns: signIns(seeded) }),
);
