import { PROGRESS, type Stage } from '#shared/domain/stages';

export interface Punch {
  stage: Stage;
  state: 'done' | 'now' | 'todo';
}

/** Stages that not every job goes through: they show once they were, never as still to come. */
const DETOURS: readonly Stage[] = ['awaiting_approval', 'awaiting_parts'];

/**
 * The row of punches of a job: what it went through in the order of the line, where it is, what is to come.
 * A stage that the job skipped is left out; one that it was taken back from counts as to come again.
 * @param history every stage it has stood in, the present one among them or not
 */
export function progressLine(current: Stage, history: readonly Stage[]): Punch[] {
  const at = PROGRESS.indexOf(current);
  if (at < 0) return [...passed(PROGRESS.length, history), { stage: current, state: 'now' }];
  const toCome = PROGRESS.slice(at + 1).filter((stage) => !DETOURS.includes(stage));
  return [
    ...passed(at, history),
    { stage: current, state: 'now' },
    ...toCome.map((stage): Punch => ({ stage, state: 'todo' })),
  ];
}

function passed(before: number, history: readonly Stage[]): Punch[] {
  const stages = PROGRESS.slice(0, before).filter((stage) => history.includes(stage));
  return stages.map((stage) => ({ stage, state: 'done' }));
}
