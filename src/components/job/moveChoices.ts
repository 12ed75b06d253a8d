/**
 * What a reader may do with a tag, and why the rest is not offered. Pure: reads the one table of moves through
 * `problemsOfMove`, so that the screen never says more or less than the server will do.
 */
import { problemsOfMove, type MoveProblem } from '#shared/domain/moves';
import { holds, type Role } from '#shared/domain/roles';
import {
  findMove,
  movesFrom,
  PROGRESS,
  STAGES,
  STOP_WORK_OUTCOMES,
  type Move,
  type Outcome,
  type Stage,
} from '#shared/domain/stages';
import { anyOf, whoOf } from './staffWords';

export interface Choice {
  /** `stop` ends the work early and gives the machine back as it is. */
  kind: 'move' | 'stop';
  from: Stage;
  to: Stage;
  /** The outcomes it may carry; empty where it carries none. */
  outcomes: Outcome[];
  /** Whether it asks for anything before it can be sent. */
  asks: boolean;
}

/** Rails that are shut for one and the same reason. */
export interface Barred {
  stages: Stage[];
  why: string;
}

type Words = (stage: Stage) => string;

/** The moves that a reader may make from a stage, likeliest first; stopping work comes last. */
export function choicesFrom(from: Stage, roles: readonly Role[]): Choice[] {
  const allowed = movesFrom(from).filter((move) => holds({ roles }, move.roles));
  const choices = allowed.flatMap(choicesOf);
  return [
    ...choices.filter((choice) => choice.kind === 'move'),
    ...choices.filter((choice) => choice.kind === 'stop'),
  ];
}

function choicesOf(move: Move): Choice[] {
  const base = { from: move.from, to: move.to };
  if (!move.outcomes) return [{ ...base, kind: 'move', outcomes: [], asks: asksAnything(move) }];
  const outcomes = Object.keys(move.outcomes) as Outcome[];
  const parts: Choice[] = [
    {
      ...base,
      kind: 'move',
      outcomes: outcomes.filter((one) => !STOP_WORK_OUTCOMES.includes(one)),
      asks: true,
    },
    {
      ...base,
      kind: 'stop',
      outcomes: outcomes.filter((one) => STOP_WORK_OUTCOMES.includes(one)),
      asks: true,
    },
  ];
  return parts.filter((part) => part.outcomes.length > 0);
}

function asksAnything(move: Move): boolean {
  return move.guards.length > 0 || move.asksPartsReason === true || move.to === 'checked_in';
}

/** Every other rail, with why the tag may not go there and what would allow it; one line for one reason. */
export function barredFrom(from: Stage, roles: readonly Role[], words: Words): Barred[] {
  const open = choicesFrom(from, roles).filter((choice) => choice.kind === 'move');
  const shut = STAGES.filter((to) => to !== from && !open.some((choice) => choice.to === to));
  const byReason = new Map<string, Stage[]>();
  for (const to of shut) {
    const why = whyBarred(from, to, roles, words);
    byReason.set(why, [...(byReason.get(why) ?? []), to]);
  }
  return [...byReason].map(([why, stages]) => ({ stages, why }));
}

function whyBarred(from: Stage, to: Stage, roles: readonly Role[], words: Words): string {
  const [problem] = problemsOfMove({ from, to, roles, lines: [], unpaidLimitCents: 0 });
  if (problem?.code === 'role') return `Only ${whoOf(problem.needs)} may do this.`;
  if (problem?.code === 'no_such_move') return noWay(problem, words);
  return `From ${words(from)} a machine gets there only with Stop work, given back as it is. ${words(to)} as repaired comes after ${words('test_run')}.`;
}

function noWay(problem: Extract<MoveProblem, { code: 'no_such_move' }>, words: Words): string {
  const { from, to } = problem;
  const correct = `if ${words(from)} was a mistake, correct it on the job sheet.`;
  if (isBack(from, to)) return `That lies behind: ${correct}`;
  if (problem.allowed.length === 0) return `${words(from)} is an end: ${correct}`;
  if (UNLESS_IT_CAME.includes(to)) {
    return `Only for a machine that has not come. To end the work, use Stop work, give back as it is.`;
  }
  const onward = problem.allowed.filter((stage) => !UNLESS_IT_CAME.includes(stage));
  return `From ${words(from)} a machine goes to ${anyOf(onward.map(words))} first.`;
}

/** How a booking ends that no machine came to. */
const UNLESS_IT_CAME: readonly Stage[] = ['cancelled', 'no_show'];

/** Earlier on the line and out of reach by any move. */
function isBack(from: Stage, to: Stage): boolean {
  const at = PROGRESS.indexOf(from);
  return PROGRESS.includes(to) && at > PROGRESS.indexOf(to) && !findMove(from, to);
}
