import { describe, expect, it } from 'vitest';
import {
  uuid,
  NOISY,
  NOW,
  NINE,
  ELEVEN,
  HALF_PAST_ONE,
  times,
  PERSON,
  fleetMachine,
  BOOK,
  CODES,
  TIMES,
  answers,
  settle,
  open,
  press,
  field,
  errorOf,
  chooseMachineAndTime,
  fillInWho,
  toTheEnd,
  freshBookPages,
} from '#tests/support/bookPage';
import { pretendServer, refusal } from '#tests/support/mountPage';

freshBookPages();

describe('times', () => {
  it('shows a full time as full, and offers nothing to choose in it', async () => {
    pretendServer(answers());
    const { page } = await open();
    const cards = page.findAll('.slot');
    expect(cards.map((card) => card.text())).toEqual([
      '9:00 amFull',
      'Thu 3 Dec, 11:00 amFree',
      'Thu 3 Dec, 1:30 pmFree',
    ]);
    expect(cards.map((card) => card.find('input').exists())).toEqual([false, true, true]);
    expect(page.text()).toContain('Times are MST');
  });

  it('says that no time has room for so many machines', async () => {
    pretendServer(answers({ [`${TIMES}1`]: times([NINE, ELEVEN, HALF_PAST_ONE]) }));
    const { page } = await open();
    expect(page.get('[role="alert"]').text()).toBe(
      'No time in the next four weeks has room for 1 machine. Call the shop.',
    );
  });

  it('says when the chosen one has no room for one machine more, and does not go on with it', async () => {
    pretendServer(answers());
    const { page, router } = await open();
    await chooseMachineAndTime(page);
    await press(page, 'One more');
    expect(page.get('[role="alert"]').text()).toBe(
      'Thu 3 Dec, 11:00 am has no room for 2 machines. Choose another time, or bring fewer.',
    );
    await page.findAll('.kinds')[1]?.get('input').setValue();
    await press(page, 'Next');
    expect(router.currentRoute.value.query.step).toBeUndefined();

    await page.findAll('button[aria-label^="Take"]')[1]?.trigger('click');
    await settle();
    expect(page.find('[role="alert"]').exists()).toBe(false);
  });
});

describe('what is missing', () => {
  it('is said at its place', async () => {
    pretendServer(answers());
    const { page } = await open();
    await press(page, 'Next');
    const [complaint, when] = page.findAll('[role="radiogroup"]');
    expect(complaint && errorOf(page, complaint)).toBe('Choose one from the list.');
    expect(when && errorOf(page, when)).toBe('Choose a time.');
  });

  it('includes a way to tell the guest', async () => {
    const requests = pretendServer(answers());
    const { page } = await open();
    await chooseMachineAndTime(page);
    await press(page, 'Next');
    await fillInWho(page);
    await page.get('[role=checkbox]').trigger('click');
    await press(page, 'Text me the code');
    expect(errorOf(page, field(page, 'E-mail'))).toContain('one of the two must reach you');
    expect(requests.map((request) => request.path)).not.toContain(CODES);
  });

  it('lands at the field that the server names, a step back', async () => {
    const fields = [{ path: 'machines.0.words', key: 'errors.field.characters', message: 'x' }];
    pretendServer(answers({ [BOOK]: refusal(400, 'invalid', { fields }) }));
    const { page } = await open();
    await toTheEnd(page);
    await press(page, 'Book it');
    expect(page.get('h1').text()).toBe('Which machines are coming?');
    expect(errorOf(page, field(page, 'In your words'))).toContain('characters that we cannot keep');
    expect(document.activeElement).toBe(field(page, 'In your words').element);
  });
});

describe('a customer', () => {
  const known = {
    'GET /api/session': { body: { now: NOW, person: PERSON } },
    'GET /api/fleet': {
      body: { machines: [fleetMachine(14, null), fleetMachine(17, 'repair'), fleetMachine(20, 'booked')] },
    },
  };

  it('chooses from the fleet what is not at the shop or booked already', async () => {
    pretendServer(answers(known));
    const { page } = await open();
    const blanks = page.findAll('.blank').map((blank) => ({
      words: blank.text(),
      off: blank.attributes('disabled') !== undefined,
    }));
    expect(blanks).toEqual([
      { words: 'No. 14Ironvale TW-8', off: false },
      { words: 'No. 17Ironvale TW-8at the shop', off: true },
      { words: 'No. 20Ironvale TW-8booked', off: true },
      { words: 'Not listedwrite it in', off: false },
    ]);
  });

  it('who has agreed to texts is not asked again, nor told that there are none', async () => {
    const session = { body: { now: NOW, person: { ...PERSON, textsOn: true } } };
    pretendServer(answers({ ...known, 'GET /api/session': session }));
    const { page } = await open();
    await press(page, 'No. 14');
    await chooseMachineAndTime(page);
    await press(page, 'Next');
    expect(page.find('[role=checkbox]').exists()).toBe(false);
    expect(page.text()).toContain('Answer STOP to any of the texts');
    await press(page, 'Check and book');
    expect(page.text()).toContain('We text you.');
    expect(page.text()).not.toContain('No texts.');
  });

  it('books without a code', async () => {
    const requests = pretendServer(answers(known));
    const { page } = await open();
    await press(page, 'No. 14');
    await chooseMachineAndTime(page);
    await press(page, 'Next');
    expect(page.text()).toContain('Dana Whitlock');
    await press(page, 'Check and book');
    await press(page, 'Book it');
    const sent = requests.find((request) => request.path === BOOK);
    expect(sent?.body).toEqual({
      arrivesAt: ELEVEN,
      machines: [{ from: 'fleet', machineId: uuid(14), complaintKindId: NOISY, words: 'Knocks when cold' }],
      note: '',
      language: 'en',
      textConsent: false,
    });
    expect(page.text()).toContain('5WN-3KT');
  });
});
