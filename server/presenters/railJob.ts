import type { JobRow } from '#server/queries/railJobs';
import type { Actor } from '#shared/domain/roles';
import { isSameDay } from '#shared/domain/hours';
import { abilitiesOnJob, mayUndo, type Ability } from '#shared/policies/abilities';
import type { MachineView, RailJob } from '#shared/schemas/job';

/** A tag as staff see it. */
export function presentRailJob(row: JobRow, actor: Actor | null, now: Date): RailJob {
  return {
    id: row.id,
    tag: row.tag,
    version: row.version,
    stage: row.stage,
    stageSince: row.stage_since.toISOString(),
    outcome: row.outcome,
    partsReason: row.parts_reason,
    machine: presentMachine(row),
    account: { id: row.account_id, name: row.account_name },
    complaint: row.complaint,
    words: row.words,
    arrivesAt: row.arrives_at.toISOString(),
    rush: row.rush,
    undo: presentUndo(row, actor, now),
    abilities: presentAbilities(row, actor, now),
  };
}

/** The machine of a job's row. */
export function presentMachine(row: JobRow): MachineView {
  const { machine_id: id, kind, maker, model, fleet_number: fleetNumber, serial } = row;
  return { id, kind, maker, model, fleetNumber, serial };
}

/** The move that the actor may still take back, while its grace lasts. */
export function presentUndo(row: JobRow, actor: Actor | null, now: Date): RailJob['undo'] {
  const { event_kind: kind, event_from: from, event_to: to, event_visible_at: until } = row;
  if (kind !== 'moved' || !from || now >= until || !actor || !mayUndo(actor, from, to)) return null;
  return { eventId: row.event_id, until: until.toISOString() };
}

/** What the reader may do with the job as it stands. */
export function presentAbilities(
  { stage, stage_since, zone }: JobRow,
  actor: Actor | null,
  now: Date,
): Ability[] {
  return actor ? abilitiesOnJob(actor, stage, isSameDay(stage_since, now, zone)) : [];
}
