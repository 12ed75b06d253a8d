/** Words of the staff screens that are built from the table rather than looked up. Staff screens are in English. */
import type { StaffRole } from '#shared/domain/roles';
import type { GuardKey, Stage } from '#shared/domain/stages';

/** "a, b or c". */
export function anyOf(words: readonly string[]): string {
  if (words.length < 2) return words[0] ?? '';
  return `${words.slice(0, -1).join(', ')} or ${words[words.length - 1]}`;
}

/** "the counter or the owner". */
export function whoOf(roles: readonly StaffRole[]): string {
  return anyOf(roles.map((role) => `the ${role}`));
}

/** A sentence begins with a capital. */
export function sentence(words: string): string {
  return words.charAt(0).toUpperCase() + words.slice(1);
}

/** Who holds the machine while it is in a stage. */
export const HOLDER: Partial<Record<Stage, string>> = {
  booked: 'not here yet',
  checked_in: 'ours to do',
  diagnosis: 'ours to do',
  awaiting_approval: 'with the customer',
  awaiting_parts: 'with the supplier',
  repair: 'ours to do',
  test_run: 'ours to do',
  ready: 'with the customer',
  collected: 'gone today',
};

interface GuardQuestion {
  /** What has to be so. */
  title: string;
  /** What to write when it is met, by way of an example. */
  how: string;
  /** What to write when going on without it. */
  leftOut: string;
}

/** What a guard asks, in the shop's words. */
export const GUARD_QUESTION: Record<GuardKey, GuardQuestion> = {
  walk_round: {
    title: 'Walk-round',
    how: 'Walked round with the driver, dent in the tank noted',
    leftOut: 'Customer not present, tyres not looked at',
  },
  approval: { title: 'Approval', how: 'Dana said yes by telephone', leftOut: '' },
  new_finding: { title: 'Something new was found', how: 'Crank bearing is worn as well', leftOut: '' },
  parts_in_hand: {
    title: 'Every part in hand',
    how: 'Reed set and gasket on the bench',
    leftOut: 'Belt guard bolts still to come',
  },
  passing_run: {
    title: 'A passing test run since the last repair',
    how: 'Ran two cycles, 0 to 125 psi in 4:10',
    leftOut: 'Low idle not measured',
  },
  what_is_left: { title: 'What is left undone', how: 'Tyre not replaced, part is discontinued', leftOut: '' },
  asked_to_stop: { title: 'Who asked to stop', how: 'Dana, by telephone at 10:20', leftOut: '' },
  answer_attempts: {
    title: 'Two attempts to get an answer, and the fee due',
    how: 'Called Mon 9:10 and Tue 14:00, no answer',
    leftOut: '',
  },
  hand_over: { title: 'Hand-over done', how: 'Shown running, hose and wheel returned', leftOut: '' },
  who_may_collect: {
    title: 'Who collects, and may they',
    how: 'Ray Ortiz, crew lead of the account',
    leftOut: 'Name, plate, whom you called',
  },
  paid: {
    title: 'Paid, or on terms',
    how: 'Card at the counter',
    leftOut: 'What stays unpaid, and who vouched',
  },
  disposal_letters: {
    title: 'Letters sent, by date',
    how: 'Letters of 3 Aug and 7 Sep, local law checked',
    leftOut: '',
  },
};
