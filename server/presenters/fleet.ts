import type { Ctx } from '#server/lib/context';
import { rows } from '#server/lib/db';
import { ENDED_LIST } from '#server/queries/endedStages';
import { EVER_PUBLIC } from '#server/queries/publicEvents';
import { mayBookMachine } from '#shared/policies/abilities';
import type { FleetView } from '#shared/schemas/booking';

type FleetRow = FleetView['machines'][number] & { accountId: string; crewId: string | null };

/**
 * The machines that the signed-in customer may book: a manager's whole fleet, a crew lead's own. Where each is, is said
 * as the public may know it: moves still in their grace, or undone, are left out. Inside a unit of work.
 */
export async function presentFleet(ctx: Ctx): Promise<FleetView> {
  const machines = await rows<FleetRow>(
    `select m.id, m.kind, m.maker, m.model, m.fleet_number as "fleetNumber", m.serial,
       m.account_id as "accountId", m.crew_id as "crewId",
       (select last.to_stage from jobs j
        join lateral (
          select e.to_stage from job_events e
          where e.shop_id = j.shop_id and e.job_id = j.id and e.visible_at <= $2 and ${EVER_PUBLIC}
          order by e.seq desc limit 1
        ) last on last.to_stage not in (${ENDED_LIST})
        where j.shop_id = m.shop_id and j.machine_id = m.id
        order by j.created_at desc, j.id limit 1) as "openStage"
     from machines m where m.account_id = $1
     order by length(m.fleet_number), m.fleet_number, m.created_at, m.id`,
    [ctx.actor?.accountId ?? null, ctx.now],
  );
  const own = machines.filter((machine) => mayBookMachine(ctx.actor, machine));
  return { machines: own.map(({ accountId: _account, crewId: _crew, ...machine }) => machine) };
}
