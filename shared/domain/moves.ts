/**
 * Checks one intended move against the table of stages. Pure: the server decides with it on the locked row,
 * the client says with it, before anything is sent, what is missing and who could go on without it.
 */
import { holds, type Role, type StaffRole } from './roles';
import {
  findMove,
  GUARDS,
  guardsOf,
  movesFrom,
  type GuardKey,
  type Move,
  type Outcome,
  type PartsReason,
  type Stage,
} from './stages';

/** A signed line as it is handed in: the guard is met (how), or left out (what, and why). */
export interface LineInput {
  guard: GuardKey;
  mode: 'met' | 'without';
  /** met: how it was met. */
  how?: string;
  /** without: what was left out. */
  leftOut?: string;
  /** without: why. */
  why?: string;
  /** A sum in minor units, as typed. */
  amountCents?: number;
}

export interface MoveIntent {
  from: Stage;
  to: Stage;
  roles: readonly Role[];
  outcome?: Outcome | null;
  partsReason?: PartsReason | null;
  lines: readonly LineInput[];
  /** Up to this sum, in minor units, the counter may hand over unpaid; above it the owner. */
  unpaidLimitCents: number;
}

export type MoveProblem =
  | { code: 'no_such_move'; from: Stage; to: Stage; allowed: Stage[] }
  | { code: 'role'; needs: readonly StaffRole[] }
  | { code: 'outcome_missing'; outcomes: Outcome[] }
  | { code: 'outcome_not_from_here'; outcome: Outcome; from: Stage }
  | { code: 'parts_reason_missing' }
  | { code: 'line_missing'; guard: GuardKey }
  | { code: 'line_blank'; guard: GuardKey; field: 'how' | 'leftOut' | 'why' | 'amountCents' }
  | { code: 'line_role'; guard: GuardKey; mode: 'met' | 'without'; needs: readonly StaffRole[] }
  | { code: 'line_not_asked'; guard: GuardKey }
  | { code: 'over_limit'; guard: GuardKey; limitCents: number; needs: readonly StaffRole[] };

/** Everything that stands in the way of a move; empty when it may be made. */
export function problemsOfMove(intent: MoveIntent): MoveProblem[] {
  const found = findMove(intent.from, intent.to);
  if (!found) return [noSuchMove(intent.from, intent.to)];
  if (!holds(intent, found.roles)) return [{ code: 'role', needs: found.roles }];
  const problems = [...outcomeProblems(found, intent), ...partsProblems(found, intent)];
  if (problems.length > 0) return problems;
  const asked = guardsOf(found, intent.outcome ?? null);
  const extra = intent.lines.filter((line) => !asked.includes(line.guard));
  return [
    ...asked.flatMap((guard) => guardProblems(guard, intent)),
    ...extra.map((line): MoveProblem => ({ code: 'line_not_asked', guard: line.guard })),
  ];
}

function noSuchMove(from: Stage, to: Stage): MoveProblem {
  return { code: 'no_such_move', from, to, allowed: movesFrom(from).map((candidate) => candidate.to) };
}

function outcomeProblems(found: Move, intent: MoveIntent): MoveProblem[] {
  if (!found.outcomes) {
    return intent.outcome
      ? [{ code: 'outcome_not_from_here', outcome: intent.outcome, from: intent.from }]
      : [];
  }
  const outcomes = Object.keys(found.outcomes) as Outcome[];
  if (!intent.outcome) return [{ code: 'outcome_missing', outcomes }];
  if (outcomes.includes(intent.outcome)) return [];
  return [{ code: 'outcome_not_from_here', outcome: intent.outcome, from: intent.from }];
}

function partsProblems(found: Move, intent: MoveIntent): MoveProblem[] {
  return found.asksPartsReason && !intent.partsReason ? [{ code: 'parts_reason_missing' }] : [];
}

function guardProblems(guard: GuardKey, intent: MoveIntent): MoveProblem[] {
  const lines = intent.lines.filter((line) => line.guard === guard);
  const line = lines[0];
  if (!line || lines.length > 1) return [{ code: 'line_missing', guard }];
  return [...blankFields(line), ...signerProblems(line, intent)];
}

function blankFields(line: LineInput): MoveProblem[] {
  const asked = line.mode === 'met' ? (['how'] as const) : (['leftOut', 'why'] as const);
  const blank = asked.filter((field) => !line[field]?.trim());
  const problems: MoveProblem[] = blank.map((field) => ({ code: 'line_blank', guard: line.guard, field }));
  const { sum } = GUARDS[line.guard];
  const wantsSum = sum === 'both' || sum === line.mode;
  if (wantsSum && line.amountCents === undefined) {
    problems.push({ code: 'line_blank', guard: line.guard, field: 'amountCents' });
  }
  return problems;
}

function signerProblems(line: LineInput, intent: MoveIntent): MoveProblem[] {
  const needs = GUARDS[line.guard][line.mode];
  if (!holds(intent, needs)) return [{ code: 'line_role', guard: line.guard, mode: line.mode, needs }];
  const unpaid = line.guard === 'paid' && line.mode === 'without' ? (line.amountCents ?? 0) : 0;
  if (unpaid <= intent.unpaidLimitCents || holds(intent, ['owner'])) return [];
  return [{ code: 'over_limit', guard: line.guard, limitCents: intent.unpaidLimitCents, needs: ['owner'] }];
}
