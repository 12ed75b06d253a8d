import { describe, expect, it } from 'vitest';
import { countGroups, droppedOffAt, orderCoupons } from './stubOrder';
import type { Outcome, Stage } from '#shared/domain/stages';
import type { StubMachine } from '#shared/schemas/stub';

function machine(fleetNumber: string, stage: Stage, outcome: Outcome | null = null): StubMachine {
  return {
    tag: '7K4QM2',
    fleetNumber,
    kind: 'wheelbarrow_compressor',
    maker: 'Ironvale',
    model: 'TW-8',
    complaint: { en: 'Leaks', es: 'Tiene fuga' },
    words: '',
    stage,
    outcome,
    history: [{ stage, at: '2026-12-01T15:00:00Z', outcome }],
  };
}

describe('the order of coupons', () => {
  it('puts what needs the reader first, then work, then what can be collected, whatever its outcome', () => {
    const machines = [
      machine('1', 'collected', 'repaired'),
      machine('2', 'ready', 'declined'),
      machine('3', 'ready', 'repaired'),
      machine('4', 'repair'),
      machine('5', 'booked'),
      machine('6', 'awaiting_approval'),
    ];
    expect(orderCoupons(machines).map((one) => one.fleetNumber)).toEqual(['6', '4', '3', '2', '5', '1']);
  });

  it('hangs equals by the number painted on them, as people count', () => {
    const machines = [
      machine('17', 'repair'),
      machine('3', 'diagnosis'),
      machine('A-10', 'repair'),
      machine('A-9', 'repair'),
    ];
    expect(orderCoupons(machines).map((one) => one.fleetNumber)).toEqual(['3', '17', 'A-9', 'A-10']);
  });
});

describe('what the heading counts', () => {
  it('calls a machine ready only when it is repaired', () => {
    const machines = [
      machine('1', 'ready', 'repaired'),
      machine('2', 'ready', 'partly_repaired'),
      machine('3', 'ready', 'no_fault_found'),
      machine('4', 'ready', 'cannot_be_repaired'),
      machine('5', 'ready', 'no_answer'),
    ];
    expect(countGroups(machines)).toEqual([
      { group: 'ready', count: 1 },
      { group: 'ready_partly', count: 1 },
      { group: 'ready_unfaulted', count: 1 },
      { group: 'ready_other', count: 2 },
    ]);
  });
});

describe('when the visit came in', () => {
  it('is the first check-in of all machines', () => {
    const late = machine('1', 'checked_in');
    const early = machine('2', 'repair');
    early.history.unshift({ stage: 'checked_in', at: '2026-11-30T14:40:00Z', outcome: null });
    expect(droppedOffAt([late, early])).toBe('2026-11-30T14:40:00Z');
  });

  it('is not known while all are still expected', () => {
    expect(droppedOffAt([machine('1', 'booked')])).toBeNull();
  });
});
