import { migrateDown, migrateUp } from '#server/lib/migrator';

const {
  DATABASE_URL: databaseUrl = '',
  DB_APP_ROLE: appRole = '',
  DB_OWNER_ROLE: ownerRole = '',
} = process.env;
const isDown = process.argv.includes('--down');
const target = { databaseUrl, appRole, ownerRole };
const names = isDown ? await migrateDown(target) : await migrateUp(target);
const word = isDown ? 'took back' : 'applied';
console.log(names.length > 0 ? `${word}: ${names.join(', ')}` : 'the database is up to date');
