'use strict';
const { runMigrations } = require('graphile-worker');
const { inTransaction } = require('./support/shopTable.cjs');

// The queue's own tables have row security without policies: only their owner may work on them. The app enqueues
// through this one function, which knows the tasks and refuses to speak for another shop.
const enqueue = ({ appRole }) => `
  create function enqueue(task text, payload json, run_at timestamptz default null) returns void
  language plpgsql security definer set search_path = pg_catalog, pg_temp as $$
  begin
    if task <> 'send_message' then
      raise exception 'unknown task %', task using errcode = 'invalid_parameter_value';
    end if;
    if payload ->> 'shopId' is distinct from current_setting('app.shop') then
      raise exception 'a task names the shop of its unit of work' using errcode = 'insufficient_privilege';
    end if;
    perform graphile_worker.add_job(task, payload, run_at := run_at, max_attempts := 25);
  end $$;
  revoke all on function enqueue(text, json, timestamptz) from public;
  grant execute on function enqueue(text, json, timestamptz) to "${appRole}";
`;

module.exports = {
  async up(params) {
    await runMigrations({ connectionString: params.context.ownerUrl, schema: 'graphile_worker' });
    await inTransaction(params, enqueue(params.context));
  },
  down: (params) =>
    inTransaction(
      params,
      'drop function enqueue(text, json, timestamptz); drop schema graphile_worker cascade;',
    ),
};
