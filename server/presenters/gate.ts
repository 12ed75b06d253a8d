import { DateTime } from 'luxon';
import type { Ctx } from '#server/lib/context';
import { rows } from '#server/lib/db';
import { unitShopOf } from '#server/lib/shops';
import { unansweredTexts } from '#server/messages/presentTexts';
import { jobsArriving, type JobRow } from '#server/queries/railJobs';
import type { GateJob, GateView, GateVisit } from '#shared/schemas/job';
import { presentAbilities, presentMachine, presentUndo } from './railJob';

interface VisitRow {
  id: string;
  stub_code: string;
  arrives_at: Date;
  note: string;
  account_id: string;
  account_name: string;
  booker_id: string;
  booker_name: string;
  booker_phone: string | null;
  people: { id: string; name: string }[];
}

/** Today at the gate: the visits expected, machine by machine, and texts not answered. Inside a unit of work. */
export async function presentGate(ctx: Ctx): Promise<GateView> {
  const shop = await unitShopOf(ctx.shopId);
  const today = DateTime.fromJSDate(ctx.now, { zone: shop.zone }).startOf('day');
  const jobs = await jobsArriving(today.toJSDate(), today.plus({ days: 1 }).toJSDate());
  const visits = await readVisits([...new Set(jobs.map((job) => job.visit_id))]);
  return {
    now: ctx.now.toISOString(),
    zone: shop.zone,
    date: today.toISODate() ?? '',
    visits: visits.map((visit) =>
      presentVisit(
        ctx,
        visit,
        jobs.filter((job) => job.visit_id === visit.id),
      ),
    ),
    unanswered: await unansweredTexts(),
  };
}

function readVisits(ids: string[]): Promise<VisitRow[]> {
  return rows<VisitRow>(
    `select v.id, v.stub_code, v.arrives_at, v.note, a.id as account_id, a.name as account_name,
       b.id as booker_id, b.name as booker_name, b.phone as booker_phone,
       (select coalesce(json_agg(json_build_object('id', p.id, 'name', p.name) order by p.name), '[]')
        from people p where p.shop_id = v.shop_id and p.account_id = v.account_id and p.left_at is null) as people
     from visits v
     join accounts a on a.shop_id = v.shop_id and a.id = v.account_id
     join people b on b.shop_id = v.shop_id and b.id = v.booked_by_person_id
     where v.id = any($1::uuid[])
     order by v.arrives_at, v.id`,
    [ids],
  );
}

function presentVisit(ctx: Ctx, visit: VisitRow, jobs: JobRow[]): GateVisit {
  return {
    id: visit.id,
    stubCode: visit.stub_code,
    arrivesAt: visit.arrives_at.toISOString(),
    account: { id: visit.account_id, name: visit.account_name },
    bookedBy: { id: visit.booker_id, name: visit.booker_name, phone: visit.booker_phone },
    people: visit.people,
    note: visit.note,
    jobs: jobs.map((job) => presentGateJob(ctx, job)),
  };
}

function presentGateJob(ctx: Ctx, row: JobRow): GateJob {
  const isIn = row.stage !== 'booked' && row.stage !== 'no_show';
  const { id, tag, version, stage, complaint, words } = row;
  const checkedInAt = isIn && row.event_to === 'checked_in' ? row.stage_since.toISOString() : null;
  return {
    id,
    tag,
    version,
    stage,
    complaint,
    words,
    machine: presentMachine(row),
    checkedInAt,
    undo: presentUndo(row, ctx.actor, ctx.now),
    abilities: presentAbilities(row, ctx.actor, ctx.now),
  };
}
