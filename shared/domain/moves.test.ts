import { describe, expect, it } from 'vitest';
import { problemsOfMove, type LineInput, type MoveIntent } from './moves';
import { STAFF_ROLES, type StaffRole } from './roles';
import { GUARD_KEYS, GUARDS, guardsOf, MOVES, OUTCOMES, STAGES, type GuardKey, type Outcome } from './stages';

const LIMIT = 20_000;

const met = (guard: GuardKey): LineInput => ({
  guard,
  mode: 'met',
  how: 'as agreed by telephone',
  ...(['met', 'both'].includes(GUARDS[guard].sum) ? { amountCents: 0 } : {}),
});
const without = (guard: GuardKey): LineInput => ({
  guard,
  mode: 'without',
  leftOut: 'the last step',
  why: 'nobody was there',
  ...(['without', 'both'].includes(GUARDS[guard].sum) ? { amountCents: LIMIT } : {}),
});

/** Every move with every outcome it may carry, and the lines that it then asks for. */
const cases = MOVES.flatMap((move) => {
  const outcomes = move.outcomes ? (Object.keys(move.outcomes) as Outcome[]) : [null];
  return outcomes.map((outcome) => ({ move, outcome, asked: guardsOf(move, outcome) }));
});

const intent = (
  { move, outcome, asked }: (typeof cases)[number],
  more: Partial<MoveIntent> = {},
): MoveIntent => ({
  from: move.from,
  to: move.to,
  roles: ['owner', 'counter', 'mechanic'],
  outcome,
  partsReason: move.to === 'awaiting_parts' ? 'part' : null,
  lines: asked.map(met),
  unpaidLimitCents: LIMIT,
  ...more,
});

const caseWith = (guard: GuardKey) => {
  const found = cases.find(({ asked }) => asked.includes(guard));
  if (!found) throw new Error(`no move asks for ${guard}`);
  return found;
};
const withLine = (guard: GuardKey, line: LineInput, more: Partial<MoveIntent> = {}) => {
  const found = caseWith(guard);
  const lines = found.asked.map((key) => (key === guard ? line : met(key)));
  return problemsOfMove(intent(found, { lines, ...more }));
};

describe('a move with all it asks for', () => {
  it.each(cases)('$move.from to $move.to as $outcome stands in nobody’s way', (one) => {
    expect(problemsOfMove(intent(one))).toEqual([]);
  });

  it.each(cases)('$move.from to $move.to as $outcome needs each of its lines once', (one) => {
    const missing = one.asked.map((guard) => ({ code: 'line_missing', guard }));
    expect(problemsOfMove(intent(one, { lines: [] }))).toEqual(missing);
    const doubled = one.asked.flatMap((guard) => [met(guard), met(guard)]);
    expect(problemsOfMove(intent(one, { lines: doubled }))).toEqual(missing);
  });

  it.each(cases)('$move.from to $move.to as $outcome is for its roles alone', (one) => {
    for (const role of STAFF_ROLES) {
      const refused = problemsOfMove(intent(one, { roles: [role] })).some(({ code }) => code === 'role');
      expect(refused, role).toBe(!one.move.roles.includes(role));
    }
    for (const role of ['manager', 'crew_lead', 'bookkeeper'] as const) {
      expect(problemsOfMove(intent(one, { roles: [role] }))).toEqual([
        { code: 'role', needs: one.move.roles },
      ]);
    }
  });
});

describe('what is not in the table', () => {
  it('is refused with what may be done instead', () => {
    for (const from of STAGES) {
      const allowed = MOVES.filter((move) => move.from === from).map((move) => move.to);
      for (const to of STAGES.filter((stage) => !allowed.includes(stage))) {
        const given = { from, to, roles: ['owner'] as const, lines: [], unpaidLimitCents: LIMIT };
        expect(problemsOfMove(given)).toEqual([{ code: 'no_such_move', from, to, allowed }]);
      }
    }
  });

  it('includes outcomes that do not come from there', () => {
    for (const one of cases.filter(({ move }) => move.to === 'ready')) {
      const allowed = Object.keys(one.move.outcomes ?? {});
      for (const outcome of OUTCOMES.filter((candidate) => !allowed.includes(candidate))) {
        const problem = { code: 'outcome_not_from_here', outcome, from: one.move.from };
        expect(problemsOfMove(intent(one, { outcome }))).toEqual([problem]);
      }
      const [problem] = problemsOfMove(intent(one, { outcome: null }));
      expect(problem).toEqual({ code: 'outcome_missing', outcomes: allowed });
    }
  });

  it('includes an outcome on the way to any other stage', () => {
    const one = cases.find(({ move }) => move.to === 'repair');
    const given = one && intent(one, { outcome: 'repaired' });
    expect(given && problemsOfMove(given)[0]?.code).toBe('outcome_not_from_here');
  });

  it('includes waiting for parts without saying for what', () => {
    for (const one of cases.filter(({ move }) => move.to === 'awaiting_parts')) {
      expect(problemsOfMove(intent(one, { partsReason: null }))).toEqual([{ code: 'parts_reason_missing' }]);
    }
  });

  it('includes a line that nobody asked for', () => {
    for (const one of cases) {
      const extra = GUARD_KEYS.find((guard) => !one.asked.includes(guard)) ?? 'approval';
      const lines = [...one.asked.map(met), met(extra)];
      expect(problemsOfMove(intent(one, { lines }))).toEqual([{ code: 'line_not_asked', guard: extra }]);
    }
  });
});

describe.each(GUARD_KEYS)('the line for %s', (guard) => {
  const fields = (line: LineInput) =>
    withLine(guard, line).map((problem) => 'field' in problem && problem.field);

  it('is refused when blank', () => {
    const sum = met(guard).amountCents === undefined ? [] : ['amountCents'];
    expect(fields({ guard, mode: 'met', how: ' \n' })).toEqual(['how', ...sum]);
    if (GUARDS[guard].without.length === 0) return;
    const open = without(guard).amountCents === undefined ? [] : ['amountCents'];
    expect(fields({ guard, mode: 'without', leftOut: '', why: ' ' })).toEqual(['leftOut', 'why', ...open]);
  });

  it.each(STAFF_ROLES)('may be signed by a %s as far as the rule says', (role: StaffRole) => {
    const { roles } = caseWith(guard).move;
    if (!roles.includes(role)) {
      expect(withLine(guard, met(guard), { roles: [role] })[0]?.code).toBe('role');
      return;
    }
    for (const line of [met(guard), without(guard)]) {
      const ofGuard = withLine(guard, line, { roles: [role] }).filter(
        (problem) => 'guard' in problem && problem.guard === guard,
      );
      const needs = GUARDS[guard][line.mode];
      const refusal = { code: 'line_role', guard, mode: line.mode, needs };
      expect(ofGuard).toEqual(needs.includes(role) ? [] : [refusal]);
    }
  });
});

describe('handing over unpaid', () => {
  const unpaid = (amountCents: number, roles: StaffRole[]) =>
    withLine('paid', { ...without('paid'), amountCents }, { roles }).map(({ code }) => code);

  it('is the counter’s up to the set sum, and the owner’s above', () => {
    expect(unpaid(LIMIT, ['counter'])).toEqual([]);
    expect(unpaid(LIMIT + 1, ['counter'])).toEqual(['over_limit']);
    expect(unpaid(LIMIT + 1, ['counter', 'owner'])).toEqual([]);
  });

  it('has no limit when it is paid', () => {
    const line = { ...met('paid'), amountCents: LIMIT * 10 };
    expect(withLine('paid', line, { roles: ['counter'] })).toEqual([]);
  });
});
