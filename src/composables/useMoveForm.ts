/**
 * One intended move as it is filled in: outcome, reason, signed lines, check-in. Holds what was typed, says what is
 * missing in the words of the table, and places the server's field errors beside their fields.
 */
import { computed, reactive, ref, toValue, type MaybeRefOrGetter } from 'vue';
import { formatCents, parseCents } from '#shared/domain/money';
import { problemsOfMove, type LineInput, type MoveProblem } from '#shared/domain/moves';
import { holds, type Role } from '#shared/domain/roles';
import {
  findMove,
  GUARDS,
  guardsOf,
  type GuardKey,
  type Outcome,
  type PartsReason,
} from '#shared/domain/stages';
import type { FieldProblem } from '#shared/errors';
import { MoveBody } from '#shared/schemas/job';
import type { z } from 'zod';
import type { Choice } from '@/components/job/moveChoices';
import { sentence, whoOf } from '@/components/job/staffWords';

export type MoveDraft = z.input<typeof MoveBody>;

export interface LineDraft {
  mode: 'met' | 'without' | null;
  how: string;
  leftOut: string;
  why: string;
  sum: string;
}

export interface CheckInDraft {
  useNewTag: boolean;
  newTag: string;
  broughtByPersonId: string | null;
  broughtByName: string;
  tankBled: boolean;
  fuelOff: boolean;
  leftWithIt: string;
}

/** What a form holds, to be kept and put back. */
export interface TypedMove {
  outcome: Outcome | null;
  partsReason: PartsReason | null;
  note: string;
  lines: Partial<Record<GuardKey, LineDraft>>;
  checkIn: CheckInDraft;
}

export interface MoveFormOptions {
  choice: MaybeRefOrGetter<Choice>;
  version: MaybeRefOrGetter<number>;
  roles: MaybeRefOrGetter<readonly Role[]>;
  unpaidLimitCents: MaybeRefOrGetter<number>;
  /** Turns a key of the catalogues into words. */
  words: (key: string, params?: Record<string, unknown>) => string;
}

/** Whether the draft's line carries a sum. */
export function wantsSum(guard: GuardKey, mode: LineDraft['mode']): boolean {
  const { sum } = GUARDS[guard];
  return mode !== null && (sum === 'both' || sum === mode);
}

/** The draft of a move: its fields, its faults by field path, and the body to send once there is none. */
export function useMoveForm(options: MoveFormOptions) {
  const choice = computed(() => toValue(options.choice));
  const only = choice.value.outcomes.length === 1 ? choice.value.outcomes[0] : undefined;
  const outcome = ref<Outcome | null>(only ?? null);
  const partsReason = ref<PartsReason | null>(null);
  const note = ref('');
  const lines = reactive<Partial<Record<GuardKey, LineDraft>>>({});
  const checkIn = reactive<CheckInDraft>({
    useNewTag: false,
    newTag: '',
    broughtByPersonId: null,
    broughtByName: '',
    tankBled: false,
    fuelOff: false,
    leftWithIt: '',
  });
  /** What is wrong, by field path; filled by `check` and by the server's answer. */
  const faults = ref<Record<string, string>>({});

  const guards = computed(() => {
    const move = findMove(choice.value.from, choice.value.to);
    return move ? guardsOf(move, outcome.value) : [];
  });
  const isCheckIn = computed(() => choice.value.to === 'checked_in');
  const asksReason = computed(() => findMove(choice.value.from, choice.value.to)?.asksPartsReason === true);
  const notDone = computed(() => isCheckIn.value && !(checkIn.tankBled && checkIn.fuelOff));

  /** The line of a guard, made when it is first asked for. What was typed stays when the outcome changes and back. */
  function lineOf(guard: GuardKey): LineDraft {
    lines[guard] ??= {
      mode: firstMode(guard, toValue(options.roles)),
      how: '',
      leftOut: '',
      why: '',
      sum: '',
    };
    return lines[guard];
  }

  function body(): MoveDraft {
    return {
      version: toValue(options.version),
      to: choice.value.to,
      outcome: outcome.value,
      partsReason: asksReason.value ? partsReason.value : null,
      lines: guards.value.flatMap((guard) => lineInput(guard, lineOf(guard))),
      note: note.value,
      ...(isCheckIn.value ? { checkIn: checkInInput(checkIn) } : {}),
    };
  }

  /** Looks for faults before anything is sent. @returns whether there is none */
  function check(): boolean {
    const draft = body();
    const found: Record<string, string> = {};
    const problems = problemsOfMove({
      from: choice.value.from,
      to: choice.value.to,
      roles: toValue(options.roles),
      outcome: outcome.value,
      partsReason: partsReason.value,
      lines: draft.lines as LineInput[],
      unpaidLimitCents: toValue(options.unpaidLimitCents),
    });
    for (const problem of problems) place(found, problem);
    for (const guard of guards.value) placeSum(found, guard, lineOf(guard));
    if (notDone.value && !note.value.trim()) {
      found.note = 'Say what could not be done, and why.';
    }
    for (const issue of MoveBody.safeParse(draft).error?.issues ?? []) {
      const path = pathOf(issue.path, guards.value);
      found[path] ??= issue.message.startsWith('errors.')
        ? options.words(issue.message, paramsOf(issue))
        : issue.message;
    }
    if (checkIn.useNewTag && !checkIn.newTag.trim() && isCheckIn.value) {
      found['checkIn.newTag'] = 'Type the code on the blank tag.';
    }
    faults.value = found;
    return Object.keys(found).length === 0;
  }

  /** Everything typed, as plain values. */
  function typed(): TypedMove {
    return {
      outcome: outcome.value,
      partsReason: partsReason.value,
      note: note.value,
      lines: copyOf(lines),
      checkIn: { ...checkIn },
    };
  }

  /** Puts back what was typed before. */
  function retype(before: TypedMove): void {
    outcome.value = before.outcome;
    partsReason.value = before.partsReason;
    note.value = before.note;
    Object.assign(lines, copyOf(before.lines));
    Object.assign(checkIn, before.checkIn);
  }

  /** Places the faults that the server found beside their fields. */
  function showServerFaults(fields: readonly FieldProblem[]): void {
    faults.value = Object.fromEntries(
      fields.map((field) => [pathOf(field.path.split('.'), guards.value), field.message]),
    );
  }

  return {
    outcome,
    partsReason,
    note,
    checkIn,
    faults,
    guards,
    isCheckIn,
    asksReason,
    notDone,
    lineOf,
    body,
    check,
    typed,
    retype,
    showServerFaults,
  };
}

export type MoveForm = ReturnType<typeof useMoveForm>;

function firstMode(guard: GuardKey, roles: readonly Role[]): LineDraft['mode'] {
  return holds({ roles }, GUARDS[guard].met) ? 'met' : null;
}

function lineInput(guard: GuardKey, line: LineDraft): NonNullable<MoveDraft['lines']> {
  if (line.mode === null) return [];
  const cents = wantsSum(guard, line.mode) ? parseCents(line.sum) : null;
  const sum = cents === null ? {} : { amountCents: cents };
  if (line.mode === 'met') return [{ guard, mode: 'met', how: line.how, ...sum }];
  return [{ guard, mode: 'without', leftOut: line.leftOut, why: line.why, ...sum }];
}

function checkInInput(draft: CheckInDraft): NonNullable<MoveDraft['checkIn']> {
  const newTag = draft.useNewTag ? draft.newTag.trim() : '';
  return {
    ...(newTag ? { newTag } : {}),
    ...(draft.broughtByPersonId ? { broughtByPersonId: draft.broughtByPersonId } : {}),
    broughtByName: draft.broughtByPersonId ? '' : draft.broughtByName,
    tankBled: draft.tankBled,
    fuelOff: draft.fuelOff,
    leftWithIt: draft.leftWithIt,
  };
}

/** Server and schema count lines; the form knows them by guard. */
function pathOf(path: readonly PropertyKey[], guards: readonly GuardKey[]): string {
  const parts = path.map(String);
  const guard = parts[0] === 'lines' ? guards[Number(parts[1])] : undefined;
  return guard ? ['lines', guard, ...parts.slice(2)].join('.') : parts.join('.');
}

function paramsOf(issue: { code?: string; maximum?: unknown; minimum?: unknown }): Record<string, unknown> {
  return { max: issue.maximum, min: issue.minimum };
}

const BLANK: Record<'how' | 'leftOut' | 'why' | 'amountCents', string> = {
  how: 'Write how it is met. A blank line does not count.',
  leftOut: 'Write what is left out.',
  why: 'Write why.',
  amountCents: 'Type the sum, like 236.40.',
};

function place(found: Record<string, string>, problem: MoveProblem): void {
  switch (problem.code) {
    case 'outcome_missing':
      found.outcome = 'Choose how it ends.';
      return;
    case 'parts_reason_missing':
      found.partsReason = 'Choose what is waited for.';
      return;
    case 'line_missing':
      found[`lines.${problem.guard}`] = missingLine(problem.guard);
      return;
    case 'line_blank':
      found[`lines.${problem.guard}.${problem.field}`] = BLANK[problem.field];
      return;
    case 'line_role':
      found[`lines.${problem.guard}`] = `Only ${whoOf(problem.needs)} may sign this.`;
      return;
    case 'over_limit':
      found[`lines.${problem.guard}.amountCents`] =
        `Up to ${formatCents(problem.limitCents)} the counter may hand over unpaid; above it ${whoOf(problem.needs)}.`;
      return;
    case 'role':
      found[''] = `Only ${whoOf(problem.needs)} may do this.`;
      return;
    default:
      found[''] = 'This move is not possible from here.';
  }
}

function missingLine(guard: GuardKey): string {
  const { met, without } = GUARDS[guard];
  const others = without.length > 0 ? ` ${sentence(whoOf(without))} may go on without it.` : '';
  return `${sentence(whoOf(met))} signs that it is met.${others}`;
}

function placeSum(found: Record<string, string>, guard: GuardKey, line: LineDraft): void {
  if (!wantsSum(guard, line.mode) || !line.sum.trim() || parseCents(line.sum) !== null) return;
  found[`lines.${guard}.amountCents`] = 'A sum has digits and at most two decimals, like 236.40.';
}

/** Line by line: a reactive object cannot be cloned as a whole. */
function copyOf(lines: TypedMove['lines']): TypedMove['lines'] {
  return Object.fromEntries(Object.entries(lines).map(([guard, line]) => [guard, { ...line }]));
}
