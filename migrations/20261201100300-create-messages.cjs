'use strict';
const { rowSecurity, inTransaction, dropTables } = require('./support/shopTable.cjs');

const up = (roles) => `
  -- What is sent. The row is the truth; a task of the queue is only a hint to look at it.
  create table messages (
    shop_id uuid not null references shops (id),
    id uuid not null,
    kind text not null check (kind in ('notices', 'code', 'reply', 'invite')),
    channel text not null check (channel in ('text', 'email')),
    person_id uuid,
    visit_id uuid,
    to_address text not null,
    language text not null check (language in ('en', 'es')),
    -- Only notices of the shop's own changes are merged; what a customer did himself goes at once and alone.
    mergeable boolean not null default false,
    status text not null check (status in ('pending', 'sending', 'unknown', 'accepted', 'failed', 'withdrawn', 'overtaken', 'demo')),
    created_at timestamptz not null,
    not_before timestamptz not null,
    -- Why it waits, for the reader of the job sheet.
    held_for text not null default 'grace' check (held_for in ('nothing', 'grace', 'quiet_hours')),
    queued_at timestamptz,
    subject text,
    body text,
    html text,
    calendar text,
    attempt integer not null default 0,
    claim uuid,
    claimed_at timestamptz,
    claimed_by text,
    first_claimed_at timestamptz,
    look_after timestamptz,
    looks_without_find integer not null default 0,
    provider_id text,
    delivery text check (delivery in ('queued', 'sending', 'sent', 'delivered', 'undelivered', 'failed')),
    error_code text,
    problem text,
    settled_at timestamptz,
    primary key (shop_id, id),
    foreign key (shop_id, person_id) references people (shop_id, id),
    foreign key (shop_id, visit_id) references visits (shop_id, id)
  );
  create index messages_due on messages (not_before) where status in ('pending', 'sending', 'unknown');
  create index messages_of_person on messages (shop_id, person_id, visit_id, created_at);
  -- Whether a phone was texted before, and what waits for a phone that says STOP.
  create index messages_to on messages (shop_id, to_address);
  create unique index messages_provider on messages (shop_id, provider_id) where provider_id is not null;
  ${rowSecurity('messages', roles)}

  -- One notice to one person about one event by one channel; a message carries one or more.
  create table notices (
    shop_id uuid not null references shops (id),
    id uuid not null,
    -- The visit event or the job event that it is about.
    event_id uuid not null,
    visit_event_id uuid,
    job_event_id uuid,
    job_id uuid,
    visit_id uuid not null,
    person_id uuid not null,
    channel text not null check (channel in ('text', 'email')),
    kind text not null check (kind in ('booked', 'cancelled', 'checked_in', 'ready', 'ready_other', 'collected', 'corrected')),
    state text not null default 'standing' check (state in ('standing', 'withdrawn', 'overtaken')),
    message_id uuid not null,
    created_at timestamptz not null,
    release_at timestamptz not null,
    primary key (shop_id, id),
    unique (shop_id, event_id, person_id, channel),
    foreign key (shop_id, visit_event_id) references visit_events (shop_id, id),
    foreign key (shop_id, job_event_id) references job_events (shop_id, id),
    foreign key (shop_id, job_id) references jobs (shop_id, id),
    foreign key (shop_id, visit_id) references visits (shop_id, id),
    foreign key (shop_id, person_id) references people (shop_id, id),
    foreign key (shop_id, message_id) references messages (shop_id, id)
  );
  create index notices_message on notices (shop_id, message_id);
  create index notices_visit on notices (shop_id, visit_id);
  create index notices_job on notices (shop_id, job_id);
  ${rowSecurity('notices', roles)}

  -- Status callbacks, each kept once. One may come before our own commit.
  create table text_statuses (
    shop_id uuid not null references shops (id),
    id uuid not null,
    provider_id text not null,
    status text not null,
    error_code text,
    message_id uuid,
    at timestamptz not null,
    primary key (shop_id, id),
    unique (shop_id, provider_id, status)
  );
  ${rowSecurity('text_statuses', roles, 'select, insert')}

  create table inbound_texts (
    shop_id uuid not null references shops (id),
    id uuid not null,
    provider_id text not null,
    from_phone text not null,
    to_phone text not null,
    body text not null,
    kind text not null check (kind in ('stop', 'start', 'help', 'maybe_stop', 'answer', 'other')),
    person_id uuid,
    visit_id uuid,
    job_id uuid,
    at timestamptz not null,
    answered_at timestamptz,
    primary key (shop_id, id),
    unique (shop_id, provider_id),
    foreign key (shop_id, person_id) references people (shop_id, id),
    foreign key (shop_id, visit_id) references visits (shop_id, id),
    foreign key (shop_id, job_id) references jobs (shop_id, id)
  );
  create index inbound_texts_open on inbound_texts (shop_id, at) where answered_at is null;
  create index inbound_texts_visit on inbound_texts (shop_id, visit_id);
  ${rowSecurity('inbound_texts', roles)}
`;

const tables = ['messages', 'notices', 'text_statuses', 'inbound_texts'];

module.exports = {
  up: (params) => inTransaction(params, up(params.context)),
  down: (params) => inTransaction(params, dropTables(tables)),
};
