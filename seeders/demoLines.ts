import { findMove, guardsOf, type GuardKey, type Stage } from '#shared/domain/stages';
import type { MoveBody } from '#shared/schemas/job';
import type { DemoStep } from './scenario';

/** The usual words of a shop for each guard. */
const USUAL: Record<GuardKey, string> = {
  walk_round: 'Walked round it, guard and wheels sound',
  approval: 'Said yes by telephone',
  new_finding: 'Something new turned up',
  parts_in_hand: 'Parts on the bench',
  passing_run: 'Ran two cycles',
  what_is_left: 'One item left for later',
  asked_to_stop: 'The office asked for it back',
  answer_attempts: 'Called twice, no answer',
  hand_over: 'Loaded by their own crew',
  who_may_collect: 'Known at the counter',
  paid: 'On account',
  disposal_letters: 'Letters sent',
};

/** The signed lines that a step needs, in the shop's usual words or in those the scenario gives. */
export function linesOf(from: Stage, step: DemoStep): MoveBody['lines'] {
  const move = findMove(from, step.to);
  const guards = move ? guardsOf(move, step.outcome ?? null) : [];
  return guards.map((guard) => {
    const how = step.says && guard !== 'walk_round' ? step.says : USUAL[guard];
    return {
      guard,
      mode: 'met' as const,
      how,
      leftOut: '',
      why: '',
      ...(guard === 'paid' ? { amountCents: 0 } : {}),
    };
  });
}
