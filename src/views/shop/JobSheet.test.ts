import { afterEach, describe, expect, it, vi } from 'vitest';
import {
  buildMoveAnswer,
  buildRailJob,
  buildSheet,
  mountFloor,
  refusal,
  type Answers,
  type Floor,
} from '#tests/support/shopFloor';
import type { HistoryItem, JobSheet as Sheet, PersonView } from '#shared/schemas/job';
import type { StaffRole } from '#shared/domain/roles';
import JobSheet from './JobSheet.vue';

const SHEET = 'GET /api/shop/jobs/7K4QM2';
let floor: Floor;

async function open(
  more: Partial<Sheet>,
  roles: StaffRole[] = ['counter'],
  answers: Answers = {},
): Promise<void> {
  const sheet = buildSheet(buildRailJob(), more);
  floor = await mountFloor(JobSheet, {
    roles,
    props: { tag: '7K4QM2' },
    answers: { [SHEET]: sheet, ...answers },
  });
}
const section = (title: string): HTMLElement => {
  const heads = [...document.querySelectorAll('section h2')];
  const found = heads.find((head) => head.textContent?.includes(title))?.closest('section');
  if (!found) throw new Error(`no section "${title}"`);
  return found;
};
const item = (more: Partial<HistoryItem>): HistoryItem => ({
  id: 'h1',
  at: '2026-12-01T18:00:00.000Z',
  kind: 'moved',
  from: 'repair',
  to: 'test_run',
  outcome: null,
  by: 'Marta Velez',
  reason: '',
  visibleAt: null,
  undone: false,
  ...more,
});
const dana: PersonView = {
  id: '00000000-0000-4000-8000-00000000cccc',
  name: 'Dana Ruiz',
  roles: ['manager'],
  phone: '+13035550118',
  email: 'dana@example.com',
  language: 'es',
  texts: 'on',
};

afterEach(() => {
  floor.unmount();
  vi.unstubAllGlobals();
});

describe('what the sheet says', () => {
  it('keeps apart whose machine it is, who is billed and who brought it', async () => {
    await open({});
    const words = section('The job').textContent;
    expect(words).toContain('WhoseHigh Course Roofing');
    expect(words).toContain('Billed toBluestem Roof & Gutter');
    expect(words).toContain('Brought byRay Ortiz');
  });

  it('shows the cautions beside a test run, and none beside a wait', async () => {
    await open({});
    expect(floor.text()).toContain('Run engines outdoors');
    floor.unmount();
    const waiting = buildRailJob({ stage: 'awaiting_approval' });
    await open({ job: { ...buildSheet(waiting).job } });
    expect(floor.text()).not.toContain('Run engines outdoors');
  });

  it('strikes what was taken back, gives the reason of a correction and the time of a held move', async () => {
    await open({
      history: [
        item({ id: 'a', undone: true, from: 'repair', to: 'awaiting_parts' }),
        item({ id: 'b', kind: 'corrected', from: 'ready', to: 'repair', reason: 'Wrong machine' }),
        item({ id: 'c', visibleAt: '2026-12-01T18:41:00.000Z' }),
      ],
    });
    const history = section('History');
    expect([...history.querySelectorAll('s')].map((struck) => struck.textContent)).toEqual([
      'Repair to Awaiting parts',
    ]);
    expect(history.textContent).toContain('Corrected from Ready to Repair');
    expect(history.textContent).toContain('“Wrong machine”');
    expect(history.textContent).toContain('Customers see it from 11:41 am.');
  });

  it('keeps a voided line readable, struck', async () => {
    const line = {
      id: 'l1',
      at: '2026-12-01T18:00:00.000Z',
      by: 'Marta Velez',
      guard: 'paid' as const,
      mode: 'met' as const,
      how: 'Card at the counter',
      leftOut: '',
      why: '',
      amountCents: 23_640,
      voided: true,
    };
    await open({ lines: [line, { ...line, id: 'l2', voided: false, how: 'Cash' }] });
    const struck = [...section('Signed lines').querySelectorAll('s')].map((one) => one.textContent);
    expect(struck).toEqual(['Met: Card at the counter ($236.40)']);
    expect(section('Signed lines').textContent).toContain('Met: Cash ($236.40)');
  });

  it('says how each notice stands: held with its time, failed with its reason', async () => {
    const notice = {
      id: 'n1',
      kind: 'ready',
      channel: 'text' as const,
      to: '+13035550118',
      personName: 'Dana Ruiz',
      state: 'held' as const,
      releaseAt: '2026-12-01T18:41:00.000Z',
      settledAt: null,
      body: 'No. 14 is ready.',
      problem: null,
    };
    await open({
      notices: [notice, { ...notice, id: 'n2', state: 'undelivered', problem: 'Unknown number (30005)' }],
    });
    expect(section('Notices').textContent).toContain('Held, goes at 11:41 am.');
    expect(section('Notices').textContent).toContain('Not delivered.');
    expect(section('Notices').textContent).toContain('Unknown number (30005)');
  });

  it('says plainly that a tag is not known', async () => {
    await open({}, ['counter'], { [SHEET]: refusal(404, 'not_found') });
    expect(floor.text()).toContain('We do not have that.');
    expect(floor.buttons()).toContain('Try again');
  });
});

describe('what may be done from the sheet', () => {
  it('rings the bell from the test run, through the same questions', async () => {
    const job = buildRailJob();
    await open({}, ['mechanic'], {
      'POST /api/shop/jobs/7K4QM2/moves': buildMoveAnswer({ ...job, stage: 'ready', outcome: 'repaired' }),
    });
    await floor.press('Ring the bellMoves to Ready');
    await floor.fill('Repaired', 'x');
    await floor.fill('What was run, and what it showed', 'Two cycles');
    await floor.submit();
    expect(floor.text()).toContain('Moved to Ready.');
    expect(floor.sent()[0]?.body).toMatchObject({ outcome: 'repaired' });
  });

  it('corrects with a stage and a reason, says who was told, and sends them one text', async () => {
    await open(
      {
        correctTo: ['checked_in', 'diagnosis', 'repair'],
        told: [
          {
            personId: dana.id,
            name: 'Dana Ruiz',
            channel: 'text',
            at: '2026-12-01T17:00:00.000Z',
            wrongAfter: ['diagnosis', 'repair'],
          },
        ],
      },
      ['counter'],
      { 'POST /api/shop/jobs/7K4QM2/corrections': buildMoveAnswer(buildRailJob({ stage: 'repair' })) },
    );
    await floor.press('Correct');
    expect(floor.text()).toContain('Already told: Dana Ruiz by text 10:00 am.');
    await floor.submit();
    expect(floor.text()).toContain('Choose where it really is.');
    expect(floor.text()).toContain('A blank reason does not count.');
    expect(floor.sent()).toHaveLength(0);
    await floor.fill('Checked in', 'x');
    expect(floor.text()).toContain('Nobody has been told anything that this would make wrong.');
    await floor.fill('Repair', 'x');
    expect(floor.text()).toContain('Already told: Dana Ruiz by text 10:00 am.');
    await floor.fill('Why', 'Moved the wrong tag');
    await floor.submit();
    expect(floor.sent()).toHaveLength(1);
    expect(floor.sent()[0]?.body).toEqual({
      version: 3,
      to: 'repair',
      reason: 'Moved the wrong tag',
      tell: true,
    });
    expect(floor.text()).toContain('Corrected to Repair.');
  });

  it('lists signed lines newest first, as everything else on the sheet', async () => {
    const line = { by: 'Marta Velez', guard: 'walk_round', mode: 'met', leftOut: '', why: '' } as const;
    const more = { amountCents: null, voided: false };
    await open({
      lines: [
        { id: 'l1', at: '2026-11-30T18:00:00.000Z', how: 'Walked round it', ...line, ...more },
        { id: 'l2', at: '2026-12-01T18:00:00.000Z', how: 'Walked round it again', ...line, ...more },
      ],
    });
    const words = section('Signed lines').textContent ?? '';
    expect(words.indexOf('again')).toBeLessThan(words.lastIndexOf('Walked round it'));
  });

  it('offers no correction to whom the server gives none', async () => {
    await open({ correctTo: [] });
    expect(floor.buttons()).not.toContain('Correct');
  });

  it('stops texts to a person only after asking', async () => {
    await open({ people: [dana] }, ['counter'], { [`POST /api/shop/people/${dana.id}/stop-texts`]: {} });
    expect(section('People').textContent).toContain('Spanish. Gets texts.');
    await floor.press('Customer asked to stop texts');
    expect(floor.sent()).toHaveLength(0);
    await floor.press('Stop texts');
    expect(floor.sent()[0]?.path).toBe(`/api/shop/people/${dana.id}/stop-texts`);
  });

  it('keeps stopping texts from whoever may not', async () => {
    await open({ people: [dana], abilities: ['job.view', 'job.move'] }, ['mechanic']);
    expect(floor.buttons()).not.toContain('Customer asked to stop texts');
    expect(floor.buttons()).not.toContain('Add note');
  });

  it('adds a note, keeps it typed when that fails, and refuses a blank one', async () => {
    let isDown = true;
    await open({}, ['mechanic'], {
      'POST /api/shop/jobs/7K4QM2/notes': () => (isDown ? refusal(503, 'unavailable') : {}),
    });
    await floor.press('Add note');
    expect(floor.text()).toContain('Write the note first.');
    await floor.fill('New note', 'Reed is cracked');
    await floor.press('Add note');
    expect(floor.field('New note').value).toBe('Reed is cracked');
    expect(floor.text()).toContain('No answer from the shop');
    isDown = false;
    await floor.press('Add note');
    expect(floor.field('New note').value).toBe('');
    expect(floor.sent().map((request) => request.body)).toEqual([
      { body: 'Reed is cracked' },
      { body: 'Reed is cracked' },
    ]);
    expect(floor.sent()[1]?.key).toBe(floor.sent()[0]?.key);
  });
});
