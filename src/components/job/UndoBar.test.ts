import { mount, RouterLinkStub } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import type { Made } from '@/composables/useJobActions';
import UndoBar from './UndoBar.vue';

const UNTIL = '2026-12-01T18:41:00.000Z';
const made: Made = {
  job: { id: 'j1', tag: '7K4QM2' },
  said: 'Moved to Ready.',
  held: [
    { personName: 'Dana Ruiz', channel: 'text', releaseAt: UNTIL },
    { personName: 'Ray Ortiz', channel: 'email', releaseAt: UNTIL },
  ],
  undo: { eventId: 'e1', until: UNTIL },
};

function bar(now: string, more: Partial<Made> = {}) {
  return mount(UndoBar, {
    props: { made: { ...made, ...more }, zone: 'America/Denver', now: new Date(now), busy: false },
    global: { stubs: { RouterLink: RouterLinkStub } },
  });
}

describe('the bar after a move', () => {
  it('says what was done, which messages wait and until when, and takes it back', async () => {
    const wrapper = bar('2026-12-01T18:40:10.000Z');
    expect(wrapper.text()).toContain('7K4-QM2');
    expect(wrapper.text()).toContain('Moved to Ready.');
    expect(wrapper.text()).toContain('Text to Dana Ruiz and e-mail to Ray Ortiz go at 11:41 am.');
    await wrapper.get('button').trigger('click');
    expect(wrapper.emitted('undo')).toHaveLength(1);
  });

  it('names the day where a text waits for the morning', () => {
    const night = '2026-12-02T04:01:00.000Z';
    const held = [
      { personName: 'Dana Ruiz', channel: 'text' as const, releaseAt: '2026-12-02T15:00:00.000Z' },
    ];
    const undo = { eventId: 'e1', until: '2026-12-02T04:02:00.000Z' };
    expect(bar(night, { held, undo }).text()).toContain('Text to Dana Ruiz goes at Wed 2 Dec, 8:00 am.');
  });

  it('offers no undo from the moment of release on, and shows the way to a correction', () => {
    const wrapper = bar(UNTIL);
    expect(wrapper.findAll('button').map((button) => button.text())).toEqual(['Close']);
    expect(wrapper.text()).toContain('Too late to undo; correct it on the job sheet.');
    expect(wrapper.getComponent(RouterLinkStub).props('to')).toEqual({
      name: 'job',
      params: { tag: '7K4QM2' },
    });
  });
});
