'use strict';
const { rowSecurity, inTransaction, dropTables } = require('./support/shopTable.cjs');

// The doors that open before a shop is known go through these few tables without row security. The list is closed:
// a test reads the catalogue and fails on any other table that is not led by shop_id.
const global = ({ appRole }) => `
  create table shops (
    id uuid primary key,
    slug text not null unique check (slug ~ '^[a-z0-9](-?[a-z0-9]){1,39}$'),
    name text not null,
    zone text not null,
    suspended_at timestamptz
  );
  grant select on shops to "${appRole}";

  create table link_directory (
    token_hash text primary key,
    shop_id uuid not null references shops (id)
  );
  grant select, insert, delete on link_directory to "${appRole}";

  create table sender_numbers (
    phone text primary key check (phone ~ '^[+][1-9][0-9]{6,14}$'),
    shop_id uuid not null unique references shops (id)
  );
  grant select on sender_numbers to "${appRole}";

  create table session (
    sid text primary key,
    sess json not null,
    expire timestamptz not null
  );
  create index session_expire on session (expire);
  create index session_person on session ((sess #>> '{passport,user,shopId}'), (sess #>> '{passport,user,personId}'));
  grant select, insert, update, delete on session to "${appRole}";

  create table rate_limits (
    key text primary key,
    points integer not null default 0,
    expire bigint
  );
  create index rate_limits_expire on rate_limits (expire);
  grant select, insert, update, delete on rate_limits to "${appRole}";

  create table worker_heartbeats (
    worker_id text primary key,
    pool_id text not null,
    started_at timestamptz not null,
    beat_at timestamptz not null
  );
  grant select, insert, update, delete on worker_heartbeats to "${appRole}";

  create function refuse_change() returns trigger language plpgsql as $$
  begin
    raise exception '% is append-only', tg_table_name using errcode = 'restrict_violation';
  end $$;
`;

const ofShops = (roles) => `
  create table shop_settings (
    shop_id uuid not null references shops (id),
    id uuid not null,
    phone text not null,
    email text not null,
    address text not null,
    gate_note_en text not null default '',
    gate_note_es text not null default '',
    about_en text not null default '',
    about_es text not null default '',
    -- Short enough that every text stays in one segment.
    text_name text not null check (length(text_name) between 1 and 20),
    hours jsonb not null,
    arrival_times text[] not null,
    places_per_half_day integer not null check (places_per_half_day between 0 and 200),
    pegs jsonb not null default '{}',
    grace_seconds integer not null default 60 check (grace_seconds between 0 and 3600),
    quiet_from text not null default '20:00',
    quiet_to text not null default '08:00',
    unpaid_limit_cents integer not null default 20000 check (unpaid_limit_cents >= 0),
    codes_per_day integer not null default 200 check (codes_per_day >= 0),
    -- Off after a restore, until a person switches it on; off for ever in nothing but a copy.
    sending boolean not null default true,
    primary key (shop_id, id),
    unique (shop_id)
  );
  ${rowSecurity('shop_settings', roles, 'select, update, insert')}

  create table closures (
    shop_id uuid not null references shops (id),
    id uuid not null,
    from_date date not null,
    to_date date not null check (to_date >= from_date),
    reason text not null default '',
    primary key (shop_id, id)
  );
  ${rowSecurity('closures', roles)}

  create table complaint_kinds (
    shop_id uuid not null references shops (id),
    id uuid not null,
    key text not null check (key ~ '^[a-z][a-z0-9_]*$'),
    label_en text not null,
    label_es text not null,
    position integer not null default 0,
    active boolean not null default true,
    primary key (shop_id, id),
    unique (shop_id, key)
  );
  ${rowSecurity('complaint_kinds', roles)}
`;

module.exports = {
  up: (params) => inTransaction(params, global(params.context) + ofShops(params.context)),
  down: (params) =>
    inTransaction(
      params,
      `${dropTables(['shops', 'link_directory', 'sender_numbers', 'session', 'rate_limits', 'worker_heartbeats', 'shop_settings', 'closures', 'complaint_kinds'])}
       drop function refuse_change();`,
    ),
};
