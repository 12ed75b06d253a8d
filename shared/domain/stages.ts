/**
 * The one table of stages, moves and guards. The server's rule, the client's choice of next stages,
 * the public progress line and the tests all read it; nothing else says what may follow what.
 */
import type { StaffRole } from './roles';

export const STAGES = [
  'booked',
  'checked_in',
  'diagnosis',
  'awaiting_approval',
  'awaiting_parts',
  'repair',
  'test_run',
  'ready',
  'collected',
  'no_show',
  'cancelled',
  'disposed',
] as const;
export type Stage = (typeof STAGES)[number];

/** The public progress line, in order. A stage that a job skipped is left out of its own line. */
export const PROGRESS = STAGES.slice(0, 9);

/** A job in one of these has ended; it leaves the Rail, and when all jobs of a visit have, the visit is closed. */
export const ENDED: readonly Stage[] = ['collected', 'cancelled', 'no_show', 'disposed'];

/** The stages of a machine that stands in the shop. */
export const IN_SHOP: readonly Stage[] = PROGRESS.slice(1, 8);

export const OUTCOMES = [
  'repaired',
  'partly_repaired',
  'no_fault_found',
  'declined',
  'given_back',
  'no_answer',
  'not_worth_repairing',
  'cannot_be_repaired',
] as const;
export type Outcome = (typeof OUTCOMES)[number];

export const PARTS_REASONS = ['part', 'outside_work', 'makers_answer'] as const;
export type PartsReason = (typeof PARTS_REASONS)[number];

export const GUARD_KEYS = [
  'walk_round',
  'approval',
  'new_finding',
  'parts_in_hand',
  'passing_run',
  'what_is_left',
  'asked_to_stop',
  'answer_attempts',
  'hand_over',
  'who_may_collect',
  'paid',
  'disposal_letters',
] as const;
export type GuardKey = (typeof GUARD_KEYS)[number];

export interface Guard {
  /** Who may sign that it is met. */
  met: readonly StaffRole[];
  /** Who may go on without it; empty where nobody may. */
  without: readonly StaffRole[];
  /** Whether the line carries a sum in minor units: on 'met', on 'without', on both or never. */
  sum: 'never' | 'met' | 'without' | 'both';
}

const bench: readonly StaffRole[] = ['mechanic', 'counter', 'owner'];
const desk: readonly StaffRole[] = ['counter', 'owner'];

export const GUARDS: Record<GuardKey, Guard> = {
  walk_round: { met: bench, without: ['counter', 'mechanic'], sum: 'never' },
  approval: { met: desk, without: [], sum: 'never' },
  new_finding: { met: bench, without: [], sum: 'never' },
  parts_in_hand: { met: bench, without: ['mechanic'], sum: 'never' },
  passing_run: { met: bench, without: ['mechanic', 'owner'], sum: 'never' },
  what_is_left: { met: bench, without: [], sum: 'never' },
  asked_to_stop: { met: bench, without: [], sum: 'never' },
  answer_attempts: { met: desk, without: [], sum: 'both' },
  hand_over: { met: desk, without: [], sum: 'never' },
  who_may_collect: { met: desk, without: ['counter'], sum: 'never' },
  paid: { met: desk, without: desk, sum: 'both' },
  disposal_letters: { met: ['owner'], without: [], sum: 'never' },
};

export interface Move {
  from: Stage;
  to: Stage;
  roles: readonly StaffRole[];
  guards: readonly GuardKey[];
  /** For a move to ready: each outcome it may carry, with the guards which that outcome adds. */
  outcomes?: Partial<Record<Outcome, readonly GuardKey[]>>;
  /** A move to awaiting parts says what is waited for. */
  asksPartsReason?: boolean;
}

const move = (from: Stage, to: Stage, more: Partial<Move> = {}): Move => ({
  from,
  to,
  roles: bench,
  guards: [],
  ...more,
});
const toParts = (from: Stage, guards: readonly GuardKey[] = []): Move =>
  move(from, 'awaiting_parts', { guards, asksPartsReason: true });

/** Giving back as it is: allowed from every stage in the shop, with who asked for it. */
const stopWork = { declined: ['asked_to_stop'], given_back: ['asked_to_stop'] } as const;
/** From diagnosis on the bench knows enough to say that repair makes no sense. */
const stopWorkKnown = {
  ...stopWork,
  not_worth_repairing: ['asked_to_stop'],
  cannot_be_repaired: ['asked_to_stop'],
} as const;

export const MOVES: readonly Move[] = [
  move('booked', 'checked_in'),
  move('booked', 'cancelled', { roles: desk }),
  move('booked', 'no_show', { roles: desk }),
  move('no_show', 'checked_in', { roles: desk }),
  move('checked_in', 'diagnosis', { guards: ['walk_round'] }),
  move('checked_in', 'ready', { outcomes: stopWork }),
  move('diagnosis', 'awaiting_approval'),
  toParts('diagnosis'),
  move('diagnosis', 'repair', { guards: ['approval'] }),
  move('diagnosis', 'test_run'),
  move('diagnosis', 'ready', { outcomes: { no_fault_found: [], ...stopWorkKnown } }),
  move('awaiting_approval', 'repair', { guards: ['approval'] }),
  toParts('awaiting_approval', ['approval']),
  move('awaiting_approval', 'diagnosis'),
  move('awaiting_approval', 'ready', { outcomes: { no_answer: ['answer_attempts'], ...stopWorkKnown } }),
  move('awaiting_parts', 'repair', { guards: ['parts_in_hand'] }),
  move('awaiting_parts', 'awaiting_approval'),
  move('awaiting_parts', 'diagnosis'),
  move('awaiting_parts', 'ready', { outcomes: stopWorkKnown }),
  move('repair', 'test_run'),
  move('repair', 'awaiting_approval', { guards: ['new_finding'] }),
  toParts('repair'),
  move('repair', 'ready', { outcomes: stopWorkKnown }),
  move('test_run', 'ready', {
    outcomes: {
      repaired: ['passing_run'],
      partly_repaired: ['what_is_left'],
      no_fault_found: [],
      ...stopWorkKnown,
    },
  }),
  move('test_run', 'repair'),
  move('test_run', 'awaiting_approval'),
  toParts('test_run'),
  move('ready', 'collected', { guards: ['hand_over', 'who_may_collect', 'paid'] }),
  move('ready', 'diagnosis'),
  move('ready', 'repair'),
  move('ready', 'disposed', { roles: ['owner'], guards: ['disposal_letters'] }),
];

/** Outcomes that end the work early: offered as "Stop work, give back as it is". */
export const STOP_WORK_OUTCOMES: readonly Outcome[] = [
  'declined',
  'given_back',
  'no_answer',
  'not_worth_repairing',
  'cannot_be_repaired',
];

/** The move from one stage to another, or undefined where the table has none. */
export function findMove(from: Stage, to: Stage): Move | undefined {
  return MOVES.find((candidate) => candidate.from === from && candidate.to === to);
}

/** All moves out of a stage, in the order in which they are offered. */
export function movesFrom(from: Stage): Move[] {
  return MOVES.filter((candidate) => candidate.from === from);
}

/** The guards that a move asks for, given the outcome it carries. */
export function guardsOf(candidate: Move, outcome: Outcome | null): GuardKey[] {
  const added = outcome ? (candidate.outcomes?.[outcome] ?? []) : [];
  return [...candidate.guards, ...added];
}

/** Whether the stage ends the job. */
export function hasEnded(stage: Stage): boolean {
  return ENDED.includes(stage);
}

/** The stages that a correction may put a job back to: any earlier one; from a booking's end, booked. */
export function earlierStages(stage: Stage): Stage[] {
  if (stage === 'cancelled' || stage === 'no_show') return ['booked'];
  if (stage === 'disposed') return earlierStages('collected');
  return PROGRESS.slice(0, PROGRESS.indexOf(stage));
}
