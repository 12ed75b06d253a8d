import { fileURLToPath } from 'node:url';
import { Sequelize } from 'sequelize';
import { SequelizeStorage, Umzug } from 'umzug';
import { asRole } from './db';

export interface MigrationTarget {
  databaseUrl: string;
  appRole: string;
  ownerRole: string;
}

const glob = fileURLToPath(new URL('../../migrations/*.cjs', import.meta.url));

async function withUmzug<T>(target: MigrationTarget, act: (umzug: Umzug<object>) => Promise<T>): Promise<T> {
  const ownerUrl = asRole(target.databaseUrl, target.ownerRole);
  const sequelize = new Sequelize(ownerUrl, { dialect: 'postgres', logging: false, pool: { max: 2 } });
  const context = { sequelize, ownerUrl, appRole: target.appRole, ownerRole: target.ownerRole };
  const umzug = new Umzug<object>({
    migrations: { glob },
    context,
    storage: new SequelizeStorage({ sequelize, tableName: 'migrations' }),
    logger: undefined,
  });
  try {
    return await act(umzug);
  } finally {
    await sequelize.close();
  }
}

/** Applies what is pending. @returns the names of the migrations applied now */
export function migrateUp(target: MigrationTarget): Promise<string[]> {
  return withUmzug(target, async (umzug) => (await umzug.up()).map((migration) => migration.name));
}

/** Takes back the newest `steps` migrations, or all of them. @returns their names */
export function migrateDown(target: MigrationTarget, steps: number | 'all' = 1): Promise<string[]> {
  const options = steps === 'all' ? { to: 0 as const } : { step: steps };
  return withUmzug(target, async (umzug) => (await umzug.down(options)).map((migration) => migration.name));
}
