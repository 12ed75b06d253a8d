/** The public page of a visit, read in one statement: it is what customers open all day long. */
import { rows } from '#server/lib/db';
import { ENDED_LIST } from './endedStages';
import { EVER_PUBLIC } from './publicEvents';
import type { StubView } from '#shared/schemas/stub';

interface StubRow {
  ended: boolean;
  view: Omit<StubView, 'now'>;
}

// The public reads an event only when it is visible and not taken back before. The present stage is the latest such event's.
const STUB = `
  with link as (
    select l.visit_id, l.revoked_at, coalesce(p.language, 'en') as language
    from links l left join people p on p.shop_id = l.shop_id and p.id = l.person_id
    where l.token_hash = $1
  ), open_events as (
    select e.*, e.visible_at <= $2 as visible from job_events e
    join jobs j on j.shop_id = e.shop_id and j.id = e.job_id
    join link on link.visit_id = j.visit_id
    where ${EVER_PUBLIC}
  ), machines_of_visit as (
    select j.id, last.at as last_at, last.to_stage as stage,
      json_build_object(
        'tag', t.code, 'fleetNumber', m.fleet_number, 'kind', m.kind, 'maker', m.maker, 'model', m.model,
        'complaint', json_build_object('en', k.label_en, 'es', k.label_es), 'words', j.words,
        'stage', last.to_stage, 'outcome', last.outcome,
        'history', (
          select json_agg(json_build_object('stage', e.to_stage, 'at', e.at, 'outcome', e.outcome) order by e.seq)
          from open_events e where e.job_id = j.id and e.visible
        )
      ) as machine
    from jobs j
    join link on link.visit_id = j.visit_id
    join machines m on m.shop_id = j.shop_id and m.id = j.machine_id
    join complaint_kinds k on k.shop_id = j.shop_id and k.id = j.complaint_kind_id
    join tags t on t.shop_id = j.shop_id and t.job_id = j.id and t.to_at is null
    join lateral (
      select e.at, e.to_stage, e.outcome from open_events e where e.job_id = j.id and e.visible order by e.seq desc limit 1
    ) last on true
  )
  select
    link.revoked_at is not null
      or (select bool_and(stage in (${ENDED_LIST})) and max(last_at) < $3
          from machines_of_visit) as ended,
    json_build_object(
      'nextChangeAt', (select min(visible_at) from open_events where not visible),
      'language', link.language, 'stubCode', v.stub_code, 'arrivesAt', v.arrives_at, 'account', a.name,
      'shop', json_build_object(
        'slug', s.slug, 'name', s.name, 'zone', s.zone, 'phone', g.phone, 'address', g.address,
        'gateNote', json_build_object('en', g.gate_note_en, 'es', g.gate_note_es), 'hours', g.hours
      ),
      'machines', (select json_agg(machine order by machine ->> 'fleetNumber', id) from machines_of_visit)
    ) as view
  from link
  join visits v on v.id = link.visit_id
  join accounts a on a.shop_id = v.shop_id and a.id = v.account_id
  join shops s on s.id = v.shop_id and s.suspended_at is null
  join shop_settings g on g.shop_id = v.shop_id`;

const DAY_MS = 24 * 60 * 60 * 1000;
const KEPT_DAYS = 90;

/** The row of a link by its token's hash, or null. Inside a unit of work. */
export async function readStub(tokenHash: string, now: Date): Promise<StubRow | null> {
  const endedBefore = new Date(now.getTime() - KEPT_DAYS * DAY_MS);
  const [found] = await rows<StubRow>(STUB, [tokenHash, now, endedBefore]);
  return found ?? null;
}
