import type { Ctx } from '#server/lib/context';
import { rows } from '#server/lib/db';
import { mayBookMachine } from '#shared/policies/abilities';
import type { FleetView } from '#shared/schemas/booking';

type FleetRow = FleetView['machines'][number] & { accountId: string; crewId: string | null };

/** The machines that the signed-in customer may book: a manager's whole fleet, a crew lead's own. Inside a unit of work. */
export async function presentFleet(ctx: Ctx): Promise<FleetView> {
  const machines = await rows<FleetRow>(
    `select m.id, m.kind, m.maker, m.model, m.fleet_number as "fleetNumber", m.serial,
       m.account_id as "accountId", m.crew_id as "crewId",
       (select j.stage from jobs j where j.shop_id = m.shop_id and j.machine_id = m.id
        and j.stage not in ('collected', 'no_show', 'cancelled', 'disposed')) as "openStage"
     from machines m where m.account_id = $1
     order by length(m.fleet_number), m.fleet_number, m.created_at, m.id`,
    [ctx.actor?.accountId ?? null],
  );
  const own = machines.filter((machine) => mayBookMachine(ctx.actor, machine));
  return { machines: own.map(({ accountId: _account, crewId: _crew, ...machine }) => machine) };
}
