import { describe, expect, it } from 'vitest';
import type { StaffRole } from '#shared/domain/roles';
import type { Stage } from '#shared/domain/stages';
import { barredFrom, choicesFrom } from './moveChoices';

const plain = (stage: Stage) => stage.replace('_', ' ');
const to = (from: Stage, ...roles: StaffRole[]) =>
  choicesFrom(from, roles).map((choice) => (choice.kind === 'stop' ? 'stop work' : plain(choice.to)));
const why = (from: Stage, stage: Stage, ...roles: StaffRole[]) =>
  barredFrom(from, roles, plain).find((rail) => rail.stages.includes(stage))?.why;

describe('where a tag may go', () => {
  it.each<[Stage, StaffRole, string[]]>([
    ['booked', 'counter', ['checked in', 'cancelled', 'no show']],
    ['booked', 'mechanic', ['checked in']],
    ['no_show', 'counter', ['checked in']],
    ['no_show', 'mechanic', []],
    ['checked_in', 'mechanic', ['diagnosis', 'stop work']],
    [
      'diagnosis',
      'mechanic',
      ['awaiting approval', 'awaiting parts', 'repair', 'test run', 'ready', 'stop work'],
    ],
    ['awaiting_approval', 'counter', ['repair', 'awaiting parts', 'diagnosis', 'stop work']],
    ['awaiting_parts', 'counter', ['repair', 'awaiting approval', 'diagnosis', 'stop work']],
    ['repair', 'mechanic', ['test run', 'awaiting approval', 'awaiting parts', 'stop work']],
    ['test_run', 'mechanic', ['ready', 'repair', 'awaiting approval', 'awaiting parts', 'stop work']],
    ['ready', 'counter', ['collected', 'diagnosis', 'repair']],
    ['ready', 'owner', ['collected', 'diagnosis', 'repair', 'disposed']],
    ['collected', 'owner', []],
    ['repair', 'driver', []],
  ])('from %s the %s is offered %j', (from, role, expected) => {
    expect(to(from, role)).toEqual(expected);
  });

  it('keeps the outcomes of finished work apart from those that end it early', () => {
    const [ready, stop] = choicesFrom('test_run', ['mechanic']).filter((choice) => choice.to === 'ready');
    expect(ready?.outcomes).toEqual(['repaired', 'partly_repaired', 'no_fault_found']);
    expect(stop?.outcomes).toEqual(['declined', 'given_back', 'not_worth_repairing', 'cannot_be_repaired']);
  });

  it('offers "no answer" only where an estimate waits for one', () => {
    const stop = (from: Stage) => choicesFrom(from, ['counter']).find((choice) => choice.kind === 'stop');
    expect(stop('awaiting_approval')?.outcomes).toContain('no_answer');
    expect(stop('repair')?.outcomes).not.toContain('no_answer');
  });
});

describe('why it may not go elsewhere', () => {
  it('names the stages that come first', () => {
    expect(why('booked', 'repair', 'counter')).toBe('From booked a machine goes to checked in first.');
    expect(why('checked_in', 'collected', 'counter')).toBe(
      'From checked in a machine goes to diagnosis or ready first.',
    );
  });

  it('does not send a machine that stands in the shop on towards a cancelled booking', () => {
    for (const end of ['cancelled', 'no_show'] as const) {
      expect(why('test_run', end, 'counter')).toBe(
        'Only for a machine that has not come. To end the work, use Stop work, give back as it is.',
      );
    }
  });

  it('names who could', () => {
    expect(why('booked', 'cancelled', 'mechanic')).toBe('Only the counter or the owner may do this.');
    expect(why('ready', 'disposed', 'counter')).toBe('Only the owner may do this.');
  });

  it('sends what lies behind, and every end, to a correction', () => {
    expect(why('repair', 'diagnosis', 'mechanic')).toBe(
      'That lies behind: if repair was a mistake, correct it on the job sheet.',
    );
    expect(why('cancelled', 'repair', 'owner')).toContain('correct it on the job sheet');
  });

  it('says that from the bench a machine becomes ready early only as it is', () => {
    expect(why('repair', 'ready', 'mechanic')).toContain('Stop work');
  });

  it('leaves no stage without either a way or a reason', () => {
    const reached = choicesFrom('diagnosis', ['mechanic']).map((choice) => choice.to);
    const barred = barredFrom('diagnosis', ['mechanic'], plain).flatMap((rail) => rail.stages);
    expect(new Set([...reached, ...barred, 'diagnosis']).size).toBe(12);
  });
});
