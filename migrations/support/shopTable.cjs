'use strict';

/**
 * Row security for a table that belongs to shops: the app role sees the rows of the shop set for the present unit
 * of work, and gets an error outside one; the owner (migrations, backup) sees all, or it could not even add a
 * foreign key. `grants` is what the app role may do.
 */
function rowSecurity(table, { appRole, ownerRole }, grants = 'select, insert, update, delete') {
  return `
    alter table ${table} enable row level security;
    alter table ${table} force row level security;
    create policy app_own_shop on ${table} to "${appRole}" using (shop_id = current_setting('app.shop')::uuid);
    create policy owner_all on ${table} to "${ownerRole}" using (true);
    grant ${grants} on ${table} to "${appRole}";
  `;
}

/** An append-only table: the app may read and add; nobody, the owner included, changes, deletes or truncates. */
function appendOnly(table, roles) {
  return `
    ${rowSecurity(table, roles, 'select, insert')}
    create trigger append_only_rows before update or delete on ${table}
      for each row execute function refuse_change();
    create trigger append_only_table before truncate on ${table}
      for each statement execute function refuse_change();
  `;
}

/** Runs the statements of a migration in one transaction, so that a failure leaves nothing behind. */
async function inTransaction({ context }, statements) {
  const { sequelize } = context;
  const transaction = await sequelize.transaction();
  try {
    await sequelize.query(statements, { transaction });
    await transaction.commit();
  } catch (error) {
    await transaction.rollback();
    throw error;
  }
}

/** Drops tables, newest first; the order of creation is given. */
function dropTables(tables) {
  return [...tables]
    .reverse()
    .map((table) => `drop table ${table};`)
    .join('\n');
}

module.exports = { rowSecurity, appendOnly, inTransaction, dropTables };
