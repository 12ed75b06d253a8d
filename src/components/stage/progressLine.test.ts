import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import Punches from './Punches.vue';
import { progressLine } from './progressLine';
import { PUNCH_SHAPES } from './punchShapes';
import { STAGES, type Stage } from '#shared/domain/stages';

const inWords = (current: Stage, history: Stage[]) =>
  progressLine(current, history).map((punch) => `${punch.stage} ${punch.state}`);

describe('the row of punches', () => {
  it('shows what was, where it is, and what is to come', () => {
    expect(inWords('repair', ['booked', 'checked_in', 'diagnosis', 'awaiting_approval', 'repair'])).toEqual([
      'booked done',
      'checked_in done',
      'diagnosis done',
      'awaiting_approval done',
      'repair now',
      'test_run todo',
      'ready todo',
      'collected todo',
    ]);
  });

  it('leaves out a stage that was skipped', () => {
    const row = inWords('ready', ['booked', 'checked_in', 'diagnosis', 'ready']);
    expect(row).toEqual(['booked done', 'checked_in done', 'diagnosis done', 'ready now', 'collected todo']);
  });

  it('counts a stage that the job was taken back from as still to come', () => {
    const row = inWords('diagnosis', ['booked', 'checked_in', 'diagnosis', 'repair', 'diagnosis']);
    expect(row).toContain('repair todo');
    expect(row.filter((punch) => punch.startsWith('diagnosis'))).toEqual(['diagnosis now']);
  });

  it('promises neither approval nor parts to a job that may need neither', () => {
    const toCome = inWords('booked', ['booked']);
    expect(toCome).not.toContain('awaiting_approval todo');
    expect(toCome).not.toContain('awaiting_parts todo');
  });

  it('ends with how it ended', () => {
    expect(inWords('cancelled', ['booked', 'cancelled'])).toEqual(['booked done', 'cancelled now']);
  });
});

describe('the drawing', () => {
  it('has a shape of its own for every stage', () => {
    expect(new Set(STAGES.map((stage) => PUNCH_SHAPES[stage])).size).toBe(STAGES.length);
  });

  it('is one picture with its words, and rings the present stage only', () => {
    const row = mount(Punches, {
      props: { current: 'test_run', history: ['booked', 'test_run'], label: 'On its test run' },
    });
    expect(row.attributes()).toMatchObject({ role: 'img', 'aria-label': 'On its test run' });
    expect(row.findAll('.punches-hole--now')).toHaveLength(1);
    expect(row.find('.punches-hole--now path').attributes('d')).toBe(PUNCH_SHAPES.test_run);
    expect(row.findAll('svg').every((svg) => svg.attributes('aria-hidden') === 'true')).toBe(true);
  });
});
