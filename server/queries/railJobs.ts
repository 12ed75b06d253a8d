/** Tags of the Rail, each read of any number of jobs being one statement. */
import { rows } from '#server/lib/db';
import { ENDED_LIST } from './endedStages';
import type { MachineKind } from '#shared/domain/machineKinds';
import type { Outcome, PartsReason, Stage } from '#shared/domain/stages';

/** One job as the Rail, the Gate and the job sheet show it. */
export interface JobRow {
  id: string;
  tag: string;
  version: number;
  stage: Stage;
  stage_since: Date;
  outcome: Outcome | null;
  parts_reason: PartsReason | null;
  rush: boolean;
  words: string;
  complaint: string;
  visit_id: string;
  zone: string;
  arrives_at: Date;
  machine_id: string;
  kind: MachineKind;
  maker: string;
  model: string;
  fleet_number: string;
  serial: string;
  account_id: string;
  account_name: string;
  /** The latest standing event: the one that an undo would take back. */
  event_id: string;
  event_kind: string;
  event_from: Stage | null;
  event_to: Stage;
  event_visible_at: Date;
}

const JOBS = `
  select j.id, t.code as tag, j.version, j.stage, j.stage_since, j.outcome, j.parts_reason, j.rush, j.words,
    k.label_en as complaint, j.visit_id, v.arrives_at, z.zone,
    m.id as machine_id, m.kind, m.maker, m.model, m.fleet_number, m.serial,
    a.id as account_id, a.name as account_name,
    e.id as event_id, e.kind as event_kind, e.from_stage as event_from, e.to_stage as event_to,
    e.visible_at as event_visible_at
  from jobs j
  join shops z on z.id = j.shop_id
  join visits v on v.shop_id = j.shop_id and v.id = j.visit_id
  join machines m on m.shop_id = j.shop_id and m.id = j.machine_id
  join accounts a on a.shop_id = j.shop_id and a.id = j.owner_account_id
  join complaint_kinds k on k.shop_id = j.shop_id and k.id = j.complaint_kind_id
  join tags t on t.shop_id = j.shop_id and t.job_id = j.id and t.to_at is null
  join lateral (
    select s.id, s.kind, s.from_stage, s.to_stage, s.visible_at from job_events s
    where s.shop_id = j.shop_id and s.job_id = j.id and s.kind in ('booked', 'moved', 'corrected')
      and not exists (
        select 1 from job_events u where u.shop_id = s.shop_id and u.undoes_event_id = s.id
      )
    order by s.seq desc limit 1
  ) e on true`;

/**
 * Open jobs, booked ones that arrive before `bookedUntil`, and those collected since `collectedSince`; longest in
 * their stage first. Inside a unit of work.
 */
export function railJobs(bookedUntil: Date, collectedSince: Date): Promise<JobRow[]> {
  return rows<JobRow>(
    `${JOBS}
     where j.stage not in ('booked', ${ENDED_LIST})
        or (j.stage = 'booked' and v.arrives_at < $1)
        or (j.stage = 'collected' and j.stage_since >= $2)
     order by case when j.stage = 'booked' then v.arrives_at else j.stage_since end, j.id`,
    [bookedUntil, collectedSince],
  );
}

/** One job. Inside a unit of work. */
export async function railJob(jobId: string): Promise<JobRow | null> {
  const [found] = await rows<JobRow>(`${JOBS} where j.id = $1`, [jobId]);
  return found ?? null;
}

/** The jobs of visits that arrive in [from, to), cancelled ones left out. Inside a unit of work. */
export function jobsArriving(from: Date, to: Date): Promise<JobRow[]> {
  return rows<JobRow>(
    `${JOBS}
     where v.arrives_at >= $1 and v.arrives_at < $2 and j.stage <> 'cancelled'
     order by v.arrives_at, v.id, m.fleet_number, j.id`,
    [from, to],
  );
}
