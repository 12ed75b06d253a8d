import { afterEach, describe, expect, it, vi } from 'vitest';
import {
  buildGate,
  buildMoveAnswer,
  buildRailJob,
  buildVisit,
  mountFloor,
  refusal,
  type Answers,
  type Floor,
} from '#tests/support/shopFloor';
import type { StaffRole } from '#shared/domain/roles';
import type { GateView } from '#shared/schemas/job';
import Gate from './Gate.vue';

const MOVES = 'POST /api/shop/jobs/7K4QM2/moves';
/** Well-formed: 10·32 + 11·16 + 12·8 + 13·4 + 14·2 + 32·1 is 1 modulo 37, as MOD 37-2 asks. */
const BLANK = 'ABC-DEW';
let floor: Floor;

async function open(view: Partial<GateView>, roles: StaffRole[], answers: Answers = {}): Promise<void> {
  floor = await mountFloor(Gate, { roles, answers: { 'GET /api/shop/gate': buildGate(view), ...answers } });
}
const expected = () => buildRailJob({ stage: 'booked', version: 1 });
const checkIn = () => floor.press('Check in Ironvale TW-8, No. 14');

afterEach(() => {
  floor.unmount();
  vi.unstubAllGlobals();
});

describe('the day', () => {
  it('has nobody booked', async () => {
    await open({}, ['counter']);
    expect(floor.text()).toContain('No one booked. Walk-ins welcome.');
    expect(floor.text()).toContain('No text waits for an answer.');
  });

  it('stands in order of time, with the now-line between what was due and what is to come', async () => {
    const later = buildVisit(expected(), { id: 'later', arrivesAt: '2026-12-01T20:00:00.000Z' });
    const due = buildVisit(expected(), {
      id: 'due',
      arrivesAt: '2026-12-01T17:00:00.000Z',
      account: { id: 'a2', name: 'Larkmoor Exteriors' },
    });
    await open({ visits: [later, due] }, ['counter']);
    const words = floor.text();
    const line = document.querySelector('[aria-label="Now, 11:40 am"]');
    expect(words.indexOf('Larkmoor Exteriors')).toBeLessThan(words.indexOf('High Course Roofing'));
    const past = document.querySelector('ol.due');
    expect(past?.textContent).toContain('Larkmoor Exteriors');
    expect(
      line && past && past.compareDocumentPosition(line) & Node.DOCUMENT_POSITION_FOLLOWING,
    ).toBeTruthy();
  });

  it('lists texts that nobody answered, with who wrote and the job they are shown on', async () => {
    const text = {
      id: 't1',
      at: '2026-12-01T18:00:00.000Z',
      from: '+13035550142',
      personName: 'Ray Ortiz',
      accountName: 'High Course Roofing',
      body: 'Can you look at the tire too?',
      kind: 'other' as const,
      tag: 'W3F8JH',
    };
    await open({ unanswered: [text] }, ['counter']);
    expect(floor.text()).toContain('Ray Ortiz, High Course Roofing');
    expect(floor.text()).toContain('“Can you look at the tire too?”');
    expect(document.querySelector('a[href="/shop/jobs/W3F8JH"]')).not.toBeNull();
  });
});

describe('checking a machine in', () => {
  it('asks who brought it, and that the tank is bled and the fuel off', async () => {
    await open({ visits: [buildVisit(expected())] }, ['mechanic']);
    await checkIn();
    expect(floor.text()).toContain('A gauge at zero is not proof: open the drain.');
    await floor.submit();
    expect(floor.text()).toContain('Say who brought it.');
    expect(floor.text()).toContain('Say what could not be done, and why.');
    expect(floor.sent()).toHaveLength(0);
  });

  it('sends who brought it, both ticks and what was left', async () => {
    const job = expected();
    await open({ visits: [buildVisit(job)] }, ['counter'], {
      [MOVES]: buildMoveAnswer({ ...job, stage: 'checked_in' }),
    });
    await checkIn();
    await floor.fill('Dana Ruiz', 'x');
    await floor.fill('Tank bled to zero, drain open', 'x');
    await floor.fill('Fuel off', 'x');
    await floor.fill('What was left with it', '50 ft hose');
    await floor.submit();
    expect(floor.sent()[0]?.body).toMatchObject({
      version: 1,
      to: 'checked_in',
      checkIn: {
        broughtByPersonId: '00000000-0000-4000-8000-00000000cccc',
        tankBled: true,
        fuelOff: true,
        leftWithIt: '50 ft hose',
      },
    });
    expect(floor.text()).toContain('Moved to Checked in.');
  });

  it('keeps "Someone else" chosen while the name is still to be typed', async () => {
    await open({ visits: [buildVisit(expected())] }, ['counter']);
    await checkIn();
    await floor.fill('Dana Ruiz', 'x');
    await floor.fill('Someone else', 'x');
    expect(floor.field('Someone else').checked).toBe(true);
    expect(floor.field('Dana Ruiz').checked).toBe(false);
    expect(floor.field('Name, if someone else').value).toBe('');
  });

  it('takes a name in place of a person, and a tick left open with a note', async () => {
    const job = expected();
    await open({ visits: [buildVisit(job)] }, ['counter'], {
      [MOVES]: buildMoveAnswer({ ...job, stage: 'checked_in' }),
    });
    await checkIn();
    await floor.fill('Name, if someone else', 'Neighbour with a truck');
    await floor.fill('Fuel off', 'x');
    await floor.fill('Note for the shop', 'Drain is seized, tank still at 30 psi');
    await floor.submit();
    expect(floor.sent()[0]?.body).toMatchObject({
      note: 'Drain is seized, tank still at 30 psi',
      checkIn: { broughtByName: 'Neighbour with a truck', tankBled: false, fuelOff: true },
    });
  });

  it('refuses a mistyped code for a blank tag before it is sent', async () => {
    await open({ visits: [buildVisit(expected())] }, ['counter']);
    await checkIn();
    await floor.fill('Hang a blank tag instead', 'x');
    await floor.fill('Dana Ruiz', 'x');
    await floor.fill('Code on the blank tag', '7K4-QM3');
    await floor.submit();
    expect(floor.field('Code on the blank tag').getAttribute('aria-invalid')).toBe('true');
    expect(floor.sent()).toHaveLength(0);
  });

  it('shows a tag that is not blank beside its field', async () => {
    const fields = [
      { path: 'checkIn.newTag', key: 'errors.field.tag_not_blank', message: 'That tag hangs on a machine.' },
    ];
    await open({ visits: [buildVisit(expected())] }, ['counter'], {
      [MOVES]: refusal(400, 'invalid', { fields }),
    });
    await checkIn();
    await floor.fill('Hang a blank tag instead', 'x');
    await floor.fill('Code on the blank tag', BLANK);
    await floor.fill('Dana Ruiz', 'x');
    await floor.fill('Tank bled to zero, drain open', 'x');
    await floor.fill('Fuel off', 'x');
    await floor.submit();
    expect(floor.text()).toContain('That tag hangs on a machine.');
    expect(floor.field('Code on the blank tag').value).toBe(BLANK);
  });
});

describe('what else may happen to an expected machine', () => {
  it('is a no-show or a cancel, by the counter', async () => {
    const job = expected();
    await open({ visits: [buildVisit(job)] }, ['counter'], {
      [MOVES]: buildMoveAnswer({ ...job, stage: 'no_show' }),
    });
    await floor.press('More for Ironvale TW-8, No. 14');
    expect(floor.buttons()).toContain('Cancel this machine');
    await floor.press('Mark as no-show');
    expect(floor.sent()[0]?.body).toMatchObject({ to: 'no_show' });
  });

  it('is nothing for the mechanic', async () => {
    await open({ visits: [buildVisit(expected())] }, ['mechanic']);
    expect(() => floor.button('More for Ironvale TW-8, No. 14')).toThrow();
  });
});
