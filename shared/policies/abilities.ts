/**
 * Who may do what. Pure functions over loaded rows, used by the server to decide and by the client to hide.
 * A missing row means no.
 */
import { holds, type Actor, type Role, type StaffRole } from '#shared/domain/roles';
import { earlierStages, findMove, hasEnded, movesFrom, type Stage } from '#shared/domain/stages';

/** Coarse abilities, sent along with the session and with rows; the client shows or hides by them. */
export const ABILITIES = [
  'gate.view',
  'rail.view',
  'job.view',
  'job.move',
  'job.correct',
  'job.note',
  'person.stop_texts',
  'fleet.view',
  'book',
] as const;
export type Ability = (typeof ABILITIES)[number];

const shopFloor: readonly Role[] = ['counter', 'mechanic', 'owner'];
const bookers: readonly Role[] = ['manager', 'crew_lead'];

const WHO: Record<Ability, readonly Role[]> = {
  'gate.view': shopFloor,
  'rail.view': shopFloor,
  'job.view': shopFloor,
  'job.move': shopFloor,
  'job.correct': shopFloor,
  'job.note': shopFloor,
  'person.stop_texts': ['counter', 'owner'],
  'fleet.view': bookers,
  book: bookers,
};

/** Whether the actor's roles carry the ability. */
export function may(actor: Pick<Actor, 'roles'> | null, ability: Ability): boolean {
  return actor !== null && holds(actor, WHO[ability]);
}

/** The roles that carry an ability: for the route table and for telling who could. */
export function rolesWith(ability: Ability): readonly Role[] {
  return WHO[ability];
}

/** All abilities of an actor. */
export function abilitiesOf(actor: Pick<Actor, 'roles'>): Ability[] {
  return ABILITIES.filter((ability) => may(actor, ability));
}

interface MachineRow {
  accountId: string;
  crewId: string | null;
}

/** A manager books every machine of the account, a crew lead those of the crew. */
export function mayBookMachine(actor: Actor | null, machine: MachineRow | null): boolean {
  if (!actor || !machine || machine.accountId !== actor.accountId) return false;
  if (actor.roles.includes('manager')) return true;
  return actor.roles.includes('crew_lead') && machine.crewId !== null && machine.crewId === actor.crewId;
}

/** Undo is for whoever may make that move. */
export function mayUndo(actor: Pick<Actor, 'roles'>, from: Stage, to: Stage): boolean {
  const move = findMove(from, to);
  return move !== undefined && holds(actor, move.roles);
}

const correctors: readonly StaffRole[] = ['owner', 'counter', 'mechanic'];

/**
 * The stages that the actor may correct a job back to. An end is taken back by the counter on the same day of
 * the shop's calendar, by the owner later.
 */
export function correctableTo(actor: Pick<Actor, 'roles'>, stage: Stage, endedToday: boolean): Stage[] {
  if (!holds(actor, correctors)) return [];
  if (hasEnded(stage) && !holds(actor, endedToday ? ['counter', 'owner'] : ['owner'])) return [];
  return earlierStages(stage);
}

/** What the actor may do with a job as it stands now; sent with the row, so that the client keeps no copy of the rule. */
export function abilitiesOnJob(actor: Pick<Actor, 'roles'>, stage: Stage, endedToday: boolean): Ability[] {
  const onJob: Ability[] = ['job.view', 'job.move', 'job.correct', 'job.note'];
  return onJob.filter((ability) => {
    if (!may(actor, ability)) return false;
    if (ability === 'job.move') return movesFrom(stage).some((move) => holds(actor, move.roles));
    return ability !== 'job.correct' || correctableTo(actor, stage, endedToday).length > 0;
  });
}
