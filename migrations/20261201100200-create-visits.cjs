'use strict';
const { rowSecurity, appendOnly, inTransaction, dropTables } = require('./support/shopTable.cjs');

const stages = `'booked', 'checked_in', 'diagnosis', 'awaiting_approval', 'awaiting_parts', 'repair', 'test_run', 'ready', 'collected', 'no_show', 'cancelled', 'disposed'`;
const ended = `'collected', 'no_show', 'cancelled', 'disposed'`;
const outcomes = `'repaired', 'partly_repaired', 'no_fault_found', 'declined', 'given_back', 'no_answer', 'not_worth_repairing', 'cannot_be_repaired'`;

const up = (roles) => `
  -- Room for machines in one half-day. The check stands behind the guarded update that takes places.
  create table half_days (
    shop_id uuid not null references shops (id),
    id uuid not null,
    day date not null,
    half text not null check (half in ('am', 'pm')),
    places integer not null check (places >= 0),
    over integer not null default 0 check (over >= 0),
    taken integer not null default 0,
    primary key (shop_id, id),
    unique (shop_id, day, half),
    constraint half_days_no_overbooking check (taken between 0 and places + over)
  );
  ${rowSecurity('half_days', roles)}

  create table visits (
    shop_id uuid not null references shops (id),
    id uuid not null,
    account_id uuid not null,
    booked_by_person_id uuid not null,
    inbound text not null check (inbound in ('drop_off')),
    arrives_at timestamptz not null,
    stub_code text not null,
    note text not null default '',
    created_at timestamptz not null,
    primary key (shop_id, id),
    unique (shop_id, stub_code),
    foreign key (shop_id, account_id) references accounts (shop_id, id),
    foreign key (shop_id, booked_by_person_id) references people (shop_id, id)
  );
  create index visits_arrives on visits (shop_id, arrives_at);
  ${rowSecurity('visits', roles)}

  -- Whose machine it is, who is billed and who brought it are three different facts.
  create table jobs (
    shop_id uuid not null references shops (id),
    id uuid not null,
    visit_id uuid not null,
    machine_id uuid not null,
    owner_account_id uuid not null,
    billed_account_id uuid not null,
    brought_by_person_id uuid,
    brought_by_name text not null default '',
    complaint_kind_id uuid not null,
    words text not null default '',
    left_with_it text not null default '',
    half_day_id uuid,
    stage text not null check (stage in (${stages})),
    stage_since timestamptz not null,
    outcome text check (outcome in (${outcomes})),
    parts_reason text check (parts_reason in ('part', 'outside_work', 'makers_answer')),
    rush boolean not null default false,
    version integer not null default 1,
    created_at timestamptz not null,
    primary key (shop_id, id),
    foreign key (shop_id, visit_id) references visits (shop_id, id),
    foreign key (shop_id, machine_id) references machines (shop_id, id),
    foreign key (shop_id, owner_account_id) references accounts (shop_id, id),
    foreign key (shop_id, billed_account_id) references accounts (shop_id, id),
    foreign key (shop_id, brought_by_person_id) references people (shop_id, id),
    foreign key (shop_id, complaint_kind_id) references complaint_kinds (shop_id, id),
    foreign key (shop_id, half_day_id) references half_days (shop_id, id),
    constraint jobs_outcome_when_done check (outcome is null or stage in ('ready', 'collected', 'disposed')),
    constraint jobs_ready_has_outcome check (outcome is not null or stage not in ('ready', 'collected', 'disposed')),
    constraint jobs_parts_reason check ((parts_reason is not null) = (stage = 'awaiting_parts'))
  );
  create index jobs_visit on jobs (shop_id, visit_id);
  create index jobs_stage on jobs (shop_id, stage, stage_since);
  create index jobs_machine on jobs (shop_id, machine_id);
  -- A machine is in one place: it has at most one open job.
  create unique index jobs_one_open_per_machine on jobs (shop_id, machine_id) where stage not in (${ended});
  ${rowSecurity('jobs', roles)}

  -- Every code a job ever had finds it. A blank printed ahead has no job yet.
  create table tags (
    shop_id uuid not null references shops (id),
    id uuid not null,
    code text not null,
    job_id uuid,
    from_at timestamptz not null,
    to_at timestamptz,
    primary key (shop_id, id),
    unique (shop_id, code),
    foreign key (shop_id, job_id) references jobs (shop_id, id)
  );
  create unique index tags_one_current on tags (shop_id, job_id) where to_at is null and job_id is not null;
  ${rowSecurity('tags', roles)}

  create table links (
    shop_id uuid not null references shops (id),
    id uuid not null,
    visit_id uuid not null,
    person_id uuid,
    purpose text not null check (purpose in ('text', 'email', 'screen', 'found', 'paper')),
    token_hash text not null,
    created_at timestamptz not null,
    revoked_at timestamptz,
    primary key (shop_id, id),
    unique (shop_id, token_hash),
    foreign key (shop_id, visit_id) references visits (shop_id, id),
    foreign key (shop_id, person_id) references people (shop_id, id)
  );
  create index links_visit on links (shop_id, visit_id);
  ${rowSecurity('links', roles)}

  create table job_events (
    shop_id uuid not null references shops (id),
    id uuid not null,
    job_id uuid not null,
    -- Order within the job: two events may carry the same instant.
    seq integer not null,
    kind text not null check (kind in ('booked', 'moved', 'undone', 'corrected', 'tag_replaced')),
    from_stage text check (from_stage in (${stages})),
    to_stage text check (to_stage in (${stages})),
    outcome text check (outcome in (${outcomes})),
    parts_reason text,
    at timestamptz not null,
    -- The public reads an event from here on; staff at once.
    visible_at timestamptz not null,
    person_id uuid,
    by_name text not null,
    undoes_event_id uuid,
    reason text not null default '',
    details jsonb not null default '{}',
    primary key (shop_id, id),
    unique (shop_id, job_id, seq),
    unique (shop_id, undoes_event_id),
    foreign key (shop_id, job_id) references jobs (shop_id, id),
    foreign key (shop_id, person_id) references people (shop_id, id),
    foreign key (shop_id, undoes_event_id) references job_events (shop_id, id)
  );
  ${appendOnly('job_events', roles)}

  create table visit_events (
    shop_id uuid not null references shops (id),
    id uuid not null,
    visit_id uuid not null,
    kind text not null check (kind in ('booked', 'moved', 'cancelled')),
    at timestamptz not null,
    visible_at timestamptz not null,
    person_id uuid,
    by_name text not null,
    -- Of a cancelled machine: the stage event that says so.
    job_event_id uuid,
    details jsonb not null default '{}',
    primary key (shop_id, id),
    foreign key (shop_id, visit_id) references visits (shop_id, id),
    foreign key (shop_id, person_id) references people (shop_id, id),
    foreign key (shop_id, job_event_id) references job_events (shop_id, id)
  );
  create index visit_events_visit on visit_events (shop_id, visit_id, at);
  ${appendOnly('visit_events', roles)}

  create table half_day_events (
    shop_id uuid not null references shops (id),
    id uuid not null,
    half_day_id uuid not null,
    kind text not null check (kind in ('over_raised')),
    at timestamptz not null,
    person_id uuid,
    by_name text not null,
    reason text not null,
    places integer not null,
    primary key (shop_id, id),
    foreign key (shop_id, half_day_id) references half_days (shop_id, id)
  );
  ${appendOnly('half_day_events', roles)}

  -- A signed line meets a guard, or says who went on without it and why. Undone or corrected moves void theirs,
  -- which is worked out from the events.
  create table signed_lines (
    shop_id uuid not null references shops (id),
    id uuid not null,
    job_id uuid not null,
    event_id uuid not null,
    guard text not null,
    mode text not null check (mode in ('met', 'without')),
    how text not null default '',
    left_out text not null default '',
    why text not null default '',
    amount_cents integer check (amount_cents >= 0),
    at timestamptz not null,
    person_id uuid not null,
    by_name text not null,
    primary key (shop_id, id),
    foreign key (shop_id, job_id) references jobs (shop_id, id),
    foreign key (shop_id, event_id) references job_events (shop_id, id),
    foreign key (shop_id, person_id) references people (shop_id, id),
    constraint signed_lines_not_blank check (
      case mode when 'met' then btrim(how) <> '' else btrim(left_out) <> '' and btrim(why) <> '' end
    )
  );
  create index signed_lines_job on signed_lines (shop_id, job_id);
  ${appendOnly('signed_lines', roles)}

  create table job_notes (
    shop_id uuid not null references shops (id),
    id uuid not null,
    job_id uuid not null,
    body text not null check (btrim(body) <> ''),
    at timestamptz not null,
    person_id uuid not null,
    by_name text not null,
    primary key (shop_id, id),
    foreign key (shop_id, job_id) references jobs (shop_id, id),
    foreign key (shop_id, person_id) references people (shop_id, id)
  );
  create index job_notes_job on job_notes (shop_id, job_id);
  ${appendOnly('job_notes', roles)}

  create table idempotency_keys (
    shop_id uuid not null references shops (id),
    id uuid not null,
    key text not null check (length(key) between 8 and 255),
    body_hash text not null,
    answer jsonb,
    created_at timestamptz not null,
    primary key (shop_id, id),
    unique (shop_id, key)
  );
  create index idempotency_keys_created on idempotency_keys (shop_id, created_at);
  ${rowSecurity('idempotency_keys', roles)}
`;

const tables = [
  'half_days',
  'visits',
  'jobs',
  'tags',
  'links',
  'job_events',
  'visit_events',
  'half_day_events',
  'signed_lines',
  'job_notes',
  'idempotency_keys',
];

module.exports = {
  up: (params) => inTransaction(params, up(params.context)),
  down: (params) => inTransaction(params, dropTables(tables)),
};
