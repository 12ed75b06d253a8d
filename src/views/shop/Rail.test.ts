import { flushPromises } from '@vue/test-utils';
import { afterEach, describe, expect, it, vi } from 'vitest';
import {
  buildMoveAnswer,
  buildRail,
  buildRailJob,
  mountFloor,
  refusal,
  type Answers,
  type Floor,
} from '#tests/support/shopFloor';
import type { StaffRole } from '#shared/domain/roles';
import type { RailJob } from '#shared/schemas/job';
import Rail from './Rail.vue';

const RAIL = 'GET /api/shop/rail';
const MOVES = 'POST /api/shop/jobs/7K4QM2/moves';
let floor: Floor;

async function open(jobs: RailJob[], roles: StaffRole[], answers: Answers = {}): Promise<void> {
  floor = await mountFloor(Rail, { roles, answers: { [RAIL]: buildRail(jobs), ...answers } });
}
const tags = () => [...document.querySelectorAll<HTMLButtonElement>('button[data-job]')];
const tray = () => document.querySelector('[aria-label="Tag in hand"]');
const trayWords = () =>
  [...(tray()?.querySelectorAll('.buttons button') ?? [])].map(
    (button) => button.querySelector('span')?.firstChild?.textContent,
  );
async function lift(index = 0): Promise<void> {
  tags()[index]?.click();
  await flushPromises();
}

afterEach(() => {
  floor.unmount();
  vi.unstubAllGlobals();
});

describe('the board', () => {
  it('hangs each tag on its rail, longest there first, and says rush in words', async () => {
    await open(
      [
        buildRailJob({ tag: 'M6E2TR', stageSince: '2026-12-01T17:40:00.000Z', rush: true }),
        buildRailJob({ tag: '7K4QM2', stageSince: '2026-11-28T17:40:00.000Z' }),
      ],
      ['mechanic'],
    );
    const rail = document.querySelector('[data-stage="test_run"]');
    const hung = [...(rail?.querySelectorAll('button[data-job]') ?? [])].map((tag) => tag.textContent);
    expect(hung[0]).toContain('7K4-QM2');
    expect(hung[0]).toContain('3 d');
    expect(hung[1]).toContain('Rush');
    expect(rail?.textContent).toContain('2 up, no free peg');
    expect(document.querySelector('[data-stage="repair"]')?.textContent).toContain('Nothing here.');
  });

  it('shows what went wrong with a first read, and reads again', async () => {
    let isDown = true;
    await open([], ['mechanic'], { [RAIL]: () => (isDown ? refusal(503, 'unavailable') : buildRail([])) });
    expect(floor.text()).toContain('No answer from the shop');
    isDown = false;
    await floor.press('Try again');
    expect(floor.text()).toContain('0 tags up.');
  });
});

describe('a tag in hand', () => {
  it('is offered exactly the moves of the table for the reader, likeliest first', async () => {
    await open([buildRailJob()], ['mechanic']);
    await lift();
    expect(tags()[0]?.getAttribute('aria-pressed')).toBe('true');
    expect(trayWords()).toEqual([
      'Ready',
      'Repair',
      'Awaiting approval',
      'Awaiting parts',
      'Stop work',
      'Other rail',
      'Put back',
    ]);
    expect(tray()?.querySelectorAll('.bell')).toHaveLength(1);
  });

  it('leaves out what the role may not do, and says who may', async () => {
    await open([buildRailJob({ stage: 'booked' })], ['mechanic']);
    await lift();
    expect(trayWords()).toEqual(['Checked in', 'Other rail', 'Put back']);
    await floor.press('Other rail');
    expect(floor.text()).toContain('No-show, Cancelled. Only the counter or the owner may do this.');
    expect(floor.text()).toContain('From Booked a machine goes to Checked in first.');
  });

  it('goes back to its rail with Escape, and the keyboard with it', async () => {
    await open([buildRailJob()], ['mechanic']);
    await lift();
    expect(tray()?.contains(document.activeElement)).toBe(true);
    document.activeElement?.dispatchEvent(new KeyboardEvent('keydown', { key: 'Escape', bubbles: true }));
    await flushPromises();
    expect(tray()).toBeNull();
    expect(document.activeElement).toBe(tags()[0]);
  });
});

describe('a move', () => {
  it('that asks nothing is sent at once, with the version it was based on', async () => {
    const job = buildRailJob();
    const answer = buildMoveAnswer({
      ...job,
      stage: 'repair',
      undo: { eventId: 'e1', until: '2026-12-01T18:41:00.000Z' },
    });
    await open([job], ['mechanic'], { [MOVES]: answer });
    await lift();
    await floor.press('Repair');
    expect(floor.sent()).toHaveLength(1);
    expect(floor.sent()[0]?.body).toMatchObject({ version: 3, to: 'repair', lines: [] });
    expect(floor.sent()[0]?.key).toBeTruthy();
    expect(floor.text()).toContain('Moved to Repair.');
  });

  it('to ready asks for the outcome and its line, refuses a blank one in words, and sends what was typed', async () => {
    const job = buildRailJob();
    await open([job], ['mechanic'], {
      [MOVES]: buildMoveAnswer({ ...job, stage: 'ready', outcome: 'repaired' }),
    });
    await lift();
    await floor.press('Readyrings the bell');
    await floor.press('Move to Ready');
    expect(floor.text()).toContain('Choose how it ends.');
    await floor.fill('Repaired', 'x');
    await floor.press('Ring the bell');
    expect(floor.text()).toContain('Write how it is met. A blank line does not count.');
    expect(floor.sent()).toHaveLength(0);
    await floor.fill('What was run, and what it showed', 'Two cycles to 125 psi');
    await floor.press('Ring the bell');
    expect(floor.sent()[0]?.body).toMatchObject({
      to: 'ready',
      outcome: 'repaired',
      lines: [{ guard: 'passing_run', mode: 'met', how: 'Two cycles to 125 psi' }],
    });
  });

  it('without its guard asks what is left out and why; who may not is told who may', async () => {
    const job = buildRailJob();
    await open([job], ['counter']);
    await lift();
    await floor.press('Readyrings the bell');
    await floor.fill('Repaired', 'x');
    expect(floor.button('Release without').disabled).toBe(true);
    expect(floor.text()).toContain('The mechanic or the owner may go on without it.');
  });

  it('stops work only with who asked for it, and without an outcome of finished work', async () => {
    const job = buildRailJob({ stage: 'repair' });
    await open([job], ['mechanic'], {
      [MOVES]: buildMoveAnswer({ ...job, stage: 'ready', outcome: 'declined' }),
    });
    await lift();
    await floor.press('Stop workgive back as it is');
    expect(
      [...document.querySelectorAll('[role=dialog] input[type=radio]')].map(
        (input) => (input as HTMLInputElement).value,
      ),
    ).toEqual(['declined', 'given_back', 'not_worth_repairing', 'cannot_be_repaired']);
    await floor.fill('Declined', 'x');
    await floor.press('Stop work, give back');
    expect(floor.sent()).toHaveLength(0);
    await floor.fill('Who asked, how and why', 'Dana, by telephone');
    await floor.press('Stop work, give back');
    expect(floor.sent()[0]?.body).toMatchObject({
      to: 'ready',
      outcome: 'declined',
      lines: [{ guard: 'asked_to_stop' }],
    });
  });

  it('hands over unpaid up to the limit by the counter, above it not', async () => {
    const job = buildRailJob({ stage: 'ready', outcome: 'repaired' });
    await open([job], ['counter'], { [MOVES]: buildMoveAnswer({ ...job, stage: 'collected' }) });
    await lift();
    await floor.press('Collected');
    await floor.fill('How it was handed over, and what went with it', 'Shown running');
    await floor.fill('Who collected', 'Ray Ortiz');
    await floor.press('Hand over unpaid');
    await floor.fill('What is open', 'All of it');
    await floor.fill('Why, and who vouched', 'Dana vouches');
    await floor.fill('Sum left unpaid', '250.01');
    await floor.press('Move to Collected');
    expect(floor.text()).toContain('Up to $250.00 the counter may hand over unpaid; above it the owner.');
    expect(floor.sent()).toHaveLength(0);
    await floor.fill('Sum left unpaid', '250.00');
    await floor.press('Move to Collected');
    expect(floor.sent()[0]?.body).toMatchObject({
      lines: [{}, {}, { guard: 'paid', mode: 'without', amountCents: 25_000 }],
    });
  });

  it('to awaiting parts says what is waited for', async () => {
    const job = buildRailJob({ stage: 'repair' });
    await open([job], ['mechanic'], { [MOVES]: buildMoveAnswer({ ...job, stage: 'awaiting_parts' }) });
    await lift();
    await floor.press('Awaiting parts');
    await floor.press('Move to Awaiting parts');
    expect(floor.text()).toContain('Choose what is waited for.');
    await floor.fill("The maker's answer", 'x');
    await floor.press('Move to Awaiting parts');
    expect(floor.sent()[0]?.body).toMatchObject({ partsReason: 'makers_answer' });
  });

  it('keeps what was typed when the server finds a fault, and shows it beside its field', async () => {
    const job = buildRailJob();
    const fields = [
      { path: 'lines.0.how', key: 'errors.field.characters', message: 'Type it again by hand.' },
    ];
    await open([job], ['mechanic'], { [MOVES]: refusal(400, 'invalid', { fields }) });
    await lift();
    await floor.press('Readyrings the bell');
    await floor.fill('Repaired', 'x');
    await floor.fill('What was run, and what it showed', 'Two cycles');
    await floor.press('Ring the bell');
    const field = floor.field('What was run, and what it showed');
    expect(field.value).toBe('Two cycles');
    expect(field.getAttribute('aria-invalid')).toBe('true');
    expect(floor.text()).toContain('Type it again by hand.');
  });

  it('that comes second says who was quicker, where the tag is now, and reads the board again', async () => {
    const job = buildRailJob();
    const details = { stage: 'ready', version: 4, by: 'Joel Kemp', at: '2026-12-01T18:39:00.000Z' };
    let reads = 0;
    await open([job], ['mechanic'], {
      [RAIL]: () =>
        buildRail([(reads += 1) === 1 ? job : { ...job, stage: 'ready', version: 4, outcome: 'repaired' }]),
      [MOVES]: refusal(409, 'moved_meanwhile', { details }),
    });
    await lift();
    await floor.press('Repair');
    expect(floor.text()).toContain('It has moved meanwhile: Joel Kemp put 7K4-QM2 on Ready at 11:39 am.');
    expect(tray()).toBeNull();
    expect(document.querySelector('[data-stage="ready"] button[data-job]')?.textContent).toContain('7K4-QM2');
    expect(document.activeElement).toBe(tags()[0]);
  });

  it('is taken back by Undo', async () => {
    const job = buildRailJob();
    const moved = {
      ...job,
      stage: 'repair' as const,
      undo: { eventId: 'e1', until: '2026-12-01T18:41:00.000Z' },
    };
    await open([job], ['mechanic'], {
      [MOVES]: buildMoveAnswer(moved),
      'POST /api/shop/jobs/7K4QM2/undo': buildMoveAnswer(job),
    });
    await lift();
    await floor.press('Repair');
    await floor.press('Undo');
    expect(floor.sent()[1]?.body).toEqual({ eventId: 'e1' });
    expect(floor.text()).toContain('Taken back. It is in Test run again.');
  });

  it('whose undo comes too late is told to correct it', async () => {
    const job = buildRailJob();
    const moved = {
      ...job,
      stage: 'repair' as const,
      undo: { eventId: 'e1', until: '2026-12-01T18:41:00.000Z' },
    };
    await open([job], ['mechanic'], {
      [MOVES]: buildMoveAnswer(moved),
      'POST /api/shop/jobs/7K4QM2/undo': refusal(409, 'too_late'),
    });
    await lift();
    await floor.press('Repair');
    await floor.press('Undo');
    expect(floor.text()).toContain('Too late to undo; correct it on the job sheet.');
    expect(floor.buttons()).not.toContain('Undo');
  });

  it('keeps its key when the answer was lost, so that it is never made twice', async () => {
    const job = buildRailJob();
    let tries = 0;
    await open([job], ['mechanic'], {
      [MOVES]: () =>
        (tries += 1) === 1 ? refusal(502, 'unavailable') : buildMoveAnswer({ ...job, stage: 'repair' }),
    });
    await lift();
    await floor.press('Repair');
    expect(floor.text()).toContain('No answer from the shop');
    await floor.press('Repair');
    const [first, second] = floor.sent();
    expect(second?.key).toBe(first?.key);
  });
});
