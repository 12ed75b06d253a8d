'use strict';
const { rowSecurity, appendOnly, inTransaction, dropTables } = require('./support/shopTable.cjs');

const up = (roles) => `
  create table accounts (
    shop_id uuid not null references shops (id),
    id uuid not null,
    name text not null,
    zone text,
    created_at timestamptz not null,
    primary key (shop_id, id)
  );
  ${rowSecurity('accounts', roles)}

  create table crews (
    shop_id uuid not null references shops (id),
    id uuid not null,
    account_id uuid not null,
    name text not null,
    primary key (shop_id, id),
    foreign key (shop_id, account_id) references accounts (shop_id, id)
  );
  create index crews_account on crews (shop_id, account_id);
  ${rowSecurity('crews', roles)}

  -- Staff have no account; a customer's person has one.
  create table people (
    shop_id uuid not null references shops (id),
    id uuid not null,
    account_id uuid,
    crew_id uuid,
    name text not null,
    phone text check (phone ~ '^[+][1-9][0-9]{6,14}$'),
    phone_proved_at timestamptz,
    email text check (email = lower(email)),
    email_stopped_at timestamptz,
    password_hash text,
    roles text[] not null check (
      roles <@ array['counter', 'mechanic', 'driver', 'owner', 'manager', 'crew_lead', 'bookkeeper']
      and cardinality(roles) > 0
      and (account_id is null) = (roles <@ array['counter', 'mechanic', 'driver', 'owner'])
    ),
    language text not null default 'en' check (language in ('en', 'es')),
    zone text,
    approval_limit_cents integer check (approval_limit_cents >= 0),
    last_acted_at timestamptz,
    left_at timestamptz,
    created_at timestamptz not null,
    primary key (shop_id, id),
    foreign key (shop_id, account_id) references accounts (shop_id, id),
    foreign key (shop_id, crew_id) references crews (shop_id, id)
  );
  create index people_account on people (shop_id, account_id);
  create index people_phone on people (shop_id, phone);
  -- One sign-in per address among the staff.
  create unique index people_staff_email on people (shop_id, email) where account_id is null and left_at is null;
  ${rowSecurity('people', roles)}

  alter table crews add column lead_person_id uuid,
    add foreign key (shop_id, lead_person_id) references people (shop_id, id);

  create table machines (
    shop_id uuid not null references shops (id),
    id uuid not null,
    account_id uuid not null,
    crew_id uuid,
    kind text not null,
    maker text not null default '',
    model text not null default '',
    serial text not null default '',
    fleet_number text not null default '',
    engine_class text not null default '',
    -- SI inside, shown as the shop likes.
    tank_litres numeric(8, 2) check (tank_litres > 0),
    unload_kpa numeric(8, 2) check (unload_kpa > 0),
    reload_kpa numeric(8, 2) check (reload_kpa > 0),
    created_at timestamptz not null,
    primary key (shop_id, id),
    foreign key (shop_id, account_id) references accounts (shop_id, id),
    foreign key (shop_id, crew_id) references crews (shop_id, id)
  );
  create index machines_account on machines (shop_id, account_id);
  ${rowSecurity('machines', roles)}

  -- What a person agreed to, in which words, when and from where. A withdrawal is a row of its own.
  create table consents (
    shop_id uuid not null references shops (id),
    id uuid not null,
    person_id uuid not null,
    phone text not null,
    kind text not null check (kind in ('given', 'withdrawn')),
    wording text not null,
    language text not null check (language in ('en', 'es')),
    source text not null,
    ip text not null default '',
    at timestamptz not null,
    primary key (shop_id, id),
    foreign key (shop_id, person_id) references people (shop_id, id)
  );
  create index consents_person on consents (shop_id, person_id, at);
  ${appendOnly('consents', roles)}

  -- Phones that said STOP. The shop's own list is the master, whatever the carrier does.
  create table opt_outs (
    shop_id uuid not null references shops (id),
    id uuid not null,
    phone text not null,
    opted_out boolean not null,
    source text not null,
    at timestamptz not null,
    primary key (shop_id, id),
    unique (shop_id, phone)
  );
  ${rowSecurity('opt_outs', roles)}

  create table login_codes (
    shop_id uuid not null references shops (id),
    id uuid not null,
    phone text not null,
    purpose text not null check (purpose in ('book', 'sign_in')),
    code_hmac text not null,
    consent boolean not null default false,
    language text not null,
    ip text not null default '',
    created_at timestamptz not null,
    expires_at timestamptz not null,
    checks integer not null default 0 check (checks between 0 and 5),
    used_at timestamptz,
    primary key (shop_id, id)
  );
  create index login_codes_phone on login_codes (shop_id, phone, created_at);
  ${rowSecurity('login_codes', roles)}

  create table password_links (
    shop_id uuid not null references shops (id),
    id uuid not null,
    person_id uuid not null,
    token_hash text not null,
    created_at timestamptz not null,
    expires_at timestamptz not null,
    used_at timestamptz,
    primary key (shop_id, id),
    unique (shop_id, token_hash),
    foreign key (shop_id, person_id) references people (shop_id, id)
  );
  ${rowSecurity('password_links', roles)}

  -- Sign-ins, refusals, opt-outs and whatever else matters and is no change of a job or visit.
  create table audit_events (
    shop_id uuid not null references shops (id),
    id uuid not null,
    kind text not null,
    at timestamptz not null,
    person_id uuid,
    ip text not null default '',
    details jsonb not null default '{}',
    primary key (shop_id, id)
  );
  create index audit_events_at on audit_events (shop_id, at);
  ${appendOnly('audit_events', roles)}
`;

const tables = [
  'accounts',
  'crews',
  'people',
  'machines',
  'consents',
  'opt_outs',
  'login_codes',
  'password_links',
  'audit_events',
];

module.exports = {
  up: (params) => inTransaction(params, up(params.context)),
  down: (params) =>
    inTransaction(params, `alter table crews drop column lead_person_id; ${dropTables(tables)}`),
};
