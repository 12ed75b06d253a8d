import { describe, expect, it } from 'vitest';
import {
  earlierStages,
  ENDED,
  findMove,
  GUARD_KEYS,
  GUARDS,
  guardsOf,
  hasEnded,
  MOVES,
  movesFrom,
  OUTCOMES,
  PROGRESS,
  STAGES,
  STOP_WORK_OUTCOMES,
  type GuardKey,
  type Outcome,
  type Stage,
} from './stages';
import { STAFF_ROLES, type StaffRole } from './roles';

// Written out by hand from the page that says what the shop does, on purpose not read from the table under test.
const MAY_GO_TO: Record<Stage, Stage[]> = {
  booked: ['checked_in', 'cancelled', 'no_show'],
  no_show: ['checked_in'],
  checked_in: ['diagnosis', 'ready'],
  diagnosis: ['awaiting_approval', 'awaiting_parts', 'repair', 'test_run', 'ready'],
  awaiting_approval: ['repair', 'awaiting_parts', 'diagnosis', 'ready'],
  awaiting_parts: ['repair', 'awaiting_approval', 'diagnosis', 'ready'],
  // Ready from here is only by stopping the work.
  repair: ['test_run', 'awaiting_approval', 'awaiting_parts', 'ready'],
  test_run: ['ready', 'repair', 'awaiting_approval', 'awaiting_parts'],
  ready: ['collected', 'diagnosis', 'repair', 'disposed'],
  collected: [],
  cancelled: [],
  disposed: [],
};

const ASKED: [Stage, Stage, GuardKey[]][] = [
  ['checked_in', 'diagnosis', ['walk_round']],
  ['diagnosis', 'repair', ['approval']],
  ['awaiting_approval', 'repair', ['approval']],
  ['awaiting_approval', 'awaiting_parts', ['approval']],
  ['awaiting_parts', 'repair', ['parts_in_hand']],
  ['repair', 'awaiting_approval', ['new_finding']],
  ['ready', 'collected', ['hand_over', 'who_may_collect', 'paid']],
  ['ready', 'disposed', ['disposal_letters']],
];

const STOPS_AFTER_DIAGNOSIS: Outcome[] = [
  'declined',
  'given_back',
  'not_worth_repairing',
  'cannot_be_repaired',
];
const OUTCOMES_FROM: Partial<Record<Stage, Outcome[]>> = {
  checked_in: ['declined', 'given_back'],
  diagnosis: ['no_fault_found', ...STOPS_AFTER_DIAGNOSIS],
  awaiting_approval: ['no_answer', ...STOPS_AFTER_DIAGNOSIS],
  awaiting_parts: STOPS_AFTER_DIAGNOSIS,
  repair: STOPS_AFTER_DIAGNOSIS,
  test_run: ['repaired', 'partly_repaired', 'no_fault_found', ...STOPS_AFTER_DIAGNOSIS],
};

const MECHANIC_COUNTER_OWNER: StaffRole[] = ['mechanic', 'counter', 'owner'];
const COUNTER_OWNER: StaffRole[] = ['counter', 'owner'];
const SIGNERS: Partial<Record<GuardKey, [met: StaffRole[], without: StaffRole[]]>> = {
  walk_round: [MECHANIC_COUNTER_OWNER, ['counter', 'mechanic']],
  parts_in_hand: [MECHANIC_COUNTER_OWNER, ['mechanic']],
  passing_run: [MECHANIC_COUNTER_OWNER, ['mechanic', 'owner']],
  approval: [COUNTER_OWNER, []],
  hand_over: [COUNTER_OWNER, []],
  who_may_collect: [COUNTER_OWNER, ['counter']],
  paid: [COUNTER_OWNER, COUNTER_OWNER],
  disposal_letters: [['owner'], []],
};

const ADDED_BY_OUTCOME: Partial<Record<Outcome, GuardKey>> = {
  repaired: 'passing_run',
  partly_repaired: 'what_is_left',
  no_answer: 'answer_attempts',
  declined: 'asked_to_stop',
  given_back: 'asked_to_stop',
  not_worth_repairing: 'asked_to_stop',
  cannot_be_repaired: 'asked_to_stop',
};

const sorted = <T extends string>(values: readonly T[]) => [...values].sort();

describe('the table of stages', () => {
  it.each(STAGES)('says where a job may go from %s', (stage) => {
    expect(sorted(movesFrom(stage).map((move) => move.to))).toEqual(sorted(MAY_GO_TO[stage]));
  });

  it('has one row per pair of stages', () => {
    expect(new Set(MOVES.map(({ from, to }) => `${from} ${to}`)).size).toBe(MOVES.length);
  });

  it('asks first what the page says, and of no other move anything', () => {
    const asking = MOVES.filter((move) => move.guards.length > 0);
    const table = asking.map(({ from, to, guards }) => [from, to, sorted(guards)]);
    expect(table.sort()).toEqual(ASKED.map(([from, to, guards]) => [from, to, sorted(guards)]).sort());
  });

  it.each(STAGES)('knows with which outcomes a job goes from %s to ready', (stage) => {
    const outcomes = Object.keys(findMove(stage, 'ready')?.outcomes ?? {});
    expect(sorted(outcomes)).toEqual(sorted(OUTCOMES_FROM[stage] ?? []));
  });

  it('carries an outcome on moves to ready alone', () => {
    expect(MOVES.filter((move) => move.outcomes && move.to !== 'ready')).toEqual([]);
    expect(MOVES.filter((move) => move.to === 'ready' && !move.outcomes)).toEqual([]);
  });

  it('adds to each outcome its own line', () => {
    for (const move of MOVES.filter(({ to }) => to === 'ready')) {
      for (const outcome of Object.keys(move.outcomes ?? {}) as Outcome[]) {
        const added = ADDED_BY_OUTCOME[outcome];
        expect(guardsOf(move, outcome), `${move.from} ${outcome}`).toEqual(added ? [added] : []);
      }
    }
  });

  it.each(Object.entries(SIGNERS))(
    'knows who signs %s and who may go on without it',
    (guard, [met, without]) => {
      const found = GUARDS[guard as GuardKey];
      expect(sorted(found.met)).toEqual(sorted(met));
      expect(sorted(found.without)).toEqual(sorted(without));
    },
  );

  it('asks what is waited for on every way to awaiting parts', () => {
    expect(MOVES.filter((move) => Boolean(move.asksPartsReason) !== (move.to === 'awaiting_parts'))).toEqual(
      [],
    );
  });

  it('lets nobody but the owner dispose, and no driver or mechanic cancel', () => {
    expect(findMove('ready', 'disposed')?.roles).toEqual(['owner']);
    for (const to of ['cancelled', 'no_show'] as const) {
      expect(sorted(findMove('booked', to)?.roles ?? [])).toEqual(COUNTER_OWNER);
    }
    expect(MOVES.filter((move) => move.roles.includes('driver'))).toEqual([]);
  });

  it('uses every guard, and lets some staff meet each', () => {
    const used = MOVES.flatMap((move) => [...move.guards, ...Object.values(move.outcomes ?? {}).flat()]);
    expect(sorted([...new Set(used)])).toEqual(sorted(GUARD_KEYS));
    for (const guard of GUARD_KEYS) {
      expect(GUARDS[guard].met.filter((role) => STAFF_ROLES.includes(role))).not.toEqual([]);
    }
  });
});

describe('ends', () => {
  it('are the four that a job cannot leave but for a late arrival', () => {
    expect(sorted(ENDED)).toEqual(['cancelled', 'collected', 'disposed', 'no_show']);
    expect(STAGES.filter(hasEnded)).toHaveLength(4);
  });

  it('can be reached from the shop only through ready', () => {
    const intoEnd = MOVES.filter((move) => hasEnded(move.to) && move.from !== 'booked');
    expect(intoEnd.map((move) => move.from)).toEqual(['ready', 'ready']);
  });

  it('leave out repaired, partly repaired and no fault found when work is stopped', () => {
    const finished: Outcome[] = ['repaired', 'partly_repaired', 'no_fault_found'];
    expect(sorted(STOP_WORK_OUTCOMES)).toEqual(sorted(OUTCOMES.filter((one) => !finished.includes(one))));
  });
});

describe('earlierStages', () => {
  const line: Stage[] = [
    'booked',
    'checked_in',
    'diagnosis',
    'awaiting_approval',
    'awaiting_parts',
    'repair',
    'test_run',
    'ready',
    'collected',
  ];

  it('gives any earlier stage of the line', () => {
    expect(PROGRESS).toEqual(line);
    line.forEach((stage, index) => expect(earlierStages(stage)).toEqual(line.slice(0, index)));
  });

  it('gives those before its fork for the other ends', () => {
    expect(earlierStages('disposed')).toEqual(line.slice(0, 8));
    expect(earlierStages('cancelled')).toEqual(['booked']);
    expect(earlierStages('no_show')).toEqual(['booked']);
  });
});
