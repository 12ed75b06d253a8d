import { enableAutoUnmount, flushPromises, type VueWrapper } from '@vue/test-utils';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import Book from './Book.vue';
import { mountPage, pretendServer, refusal, type Answer } from '#tests/support/mountPage';
import type { BookAnswer } from '#shared/schemas/booking';
import type { TimesView } from '#shared/schemas/shop';

const uuid = (n: number): string => `${String(n).padStart(8, '0')}-0000-4000-8000-000000000000`;
const LEAKS = uuid(1);
const NOISY = uuid(2);
const REQUEST = uuid(3);
const NOW = '2026-12-01T18:40:00.000Z';
const NINE = '2026-12-03T09:00:00-07:00';
const ELEVEN = '2026-12-03T11:00:00-07:00';
const HALF_PAST_ONE = '2026-12-03T13:30:00-07:00';

const SHOP: Answer = {
  body: {
    now: NOW,
    slug: 'cinder-flat',
    name: 'Cinder Flat',
    zone: 'America/Denver',
    phone: '+13035550142',
    email: 'shop@example.com',
    address: '418 Flatiron Road',
    gateNote: { en: 'Gate on the left', es: 'Portón a la izquierda' },
    about: { en: '', es: '' },
    hours: {},
    closures: [],
    complaintKinds: [
      { id: LEAKS, key: 'leaks', label: { en: 'Leaks', es: 'Tiene fuga' } },
      { id: NOISY, key: 'noisy', label: { en: 'Noisy', es: 'Hace ruido' } },
    ],
    machineKinds: [],
    consent: { version: '1' },
  },
};

function times(full: string[]): Answer {
  const each = (at: string) => ({ at, full: full.includes(at) });
  const days = [{ date: '2026-12-03', times: [NINE, ELEVEN, HALF_PAST_ONE].map(each) }];
  const view: TimesView = { now: NOW, zone: 'America/Denver', days };
  return { body: view };
}

const BOOKED: BookAnswer = {
  visitId: uuid(9),
  stubCode: '5WN3KT',
  stubPath: '/t/token',
  arrivesAt: ELEVEN,
  jobs: [{ tag: '7K4QM2', machine: 'No. 14' }],
  toldBy: { text: true, email: false },
};
const PERSON = {
  id: uuid(8),
  name: 'Dana Whitlock',
  roles: ['manager'],
  language: 'en',
  phone: '+13035550101',
  email: 'dana@example.com',
  textsOn: false,
  account: { id: uuid(7), name: 'High Course Roofing' },
  shop: { slug: 'cinder-flat', name: 'Cinder Flat', zone: 'America/Denver', phone: '+13035550142' },
  abilities: ['book', 'fleet.view'],
};
const fleetMachine = (n: number, openStage: string | null) => ({
  id: uuid(n),
  kind: 'wheelbarrow_compressor',
  maker: 'Ironvale',
  model: 'TW-8',
  fleetNumber: String(n),
  serial: '',
  openStage,
});

const BOOK = 'POST /api/shops/cinder-flat/bookings';
const CODES = 'POST /api/shops/cinder-flat/codes';
const TIMES = 'GET /api/shops/cinder-flat/times?machines=';
const answers = (more: Record<string, Answer | (() => Answer)> = {}) => ({
  'GET /api/session': { body: { now: NOW, person: null } },
  'GET /api/shops/cinder-flat': SHOP,
  [`${TIMES}1`]: times([NINE]),
  [`${TIMES}2`]: times([NINE, ELEVEN]),
  [CODES]: { body: { requestId: REQUEST, expiresAt: '2026-12-01T18:50:00.000Z' } },
  [BOOK]: { status: 201, body: BOOKED },
  ...more,
});

async function settle(): Promise<void> {
  await flushPromises();
  await vi.dynamicImportSettled();
  await flushPromises();
}
async function open(query = '') {
  const path = `/s/cinder-flat/book${query}`;
  const mounted = await mountPage(Book, { path, props: { shop: 'cinder-flat' }, guarded: true });
  await settle();
  return mounted;
}
async function press(page: VueWrapper, words: string): Promise<void> {
  const button = page.findAll('button').find((each) => each.text().includes(words) && !each.classes('vh'));
  if (!button) throw new Error(`no button says ${words}`);
  await button.trigger('click');
  await settle();
}
/** What can be chosen under these words; the calendar is drawn a moment after its days are known. */
async function radio(page: VueWrapper, words: string) {
  const label = await vi.waitFor(() => {
    const found = page.findAll('label').find((each) => each.text().includes(words));
    if (!found) throw new Error(`nothing to choose says ${words}`);
    return found;
  });
  return label.get('input');
}
function field(page: VueWrapper, label: string) {
  const found = page.findAll('label').find((each) => each.text() === label);
  return page.get(`[id="${found?.attributes('for')}"]`);
}
/** The sentence that a control is described by. */
function errorOf(page: VueWrapper, control: { attributes: (name: string) => string | undefined }): string {
  const ids = control.attributes('aria-describedby')?.split(' ') ?? [];
  return ids.map((id) => page.find(`[id="${id}"]`).text()).join(' ');
}

async function chooseMachineAndTime(page: VueWrapper): Promise<void> {
  await (await radio(page, 'Noisy')).setValue();
  await field(page, 'In your words').setValue('Knocks when cold');
  await (await radio(page, '11:00 am')).setValue();
  await settle();
}
async function fillInWho(page: VueWrapper): Promise<void> {
  await field(page, 'Your name').setValue('Ana Duarte');
  await field(page, 'Company').setValue('Duarte Roofing');
  await field(page, 'Mobile phone').setValue('(303) 555-0118');
  await page.get('[role=checkbox]').trigger('click');
}
/** As a guest up to the last step, the code typed. */
async function toTheEnd(page: VueWrapper): Promise<void> {
  await chooseMachineAndTime(page);
  await press(page, 'Next');
  await fillInWho(page);
  await press(page, 'Text me the code');
  await field(page, 'Six digits').setValue('482 113');
}

const scrolledTo = vi.fn();
enableAutoUnmount(afterEach);
beforeEach(() => {
  sessionStorage.clear();
  localStorage.clear();
  vi.stubGlobal('scrollTo', vi.fn());
  scrolledTo.mockClear();
  Element.prototype.scrollIntoView = scrolledTo;
});
afterEach(() => vi.unstubAllGlobals());

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

describe('a guest', () => {
  it('books with a code, and sees the stub', async () => {
    const requests = pretendServer(answers());
    const { page, router } = await open();
    await toTheEnd(page);
    const asked = requests.find((request) => request.path === CODES);
    expect(asked?.body).toMatchObject({ phone: '+13035550118', purpose: 'book', consent: true });
    await press(page, 'Book it');
    const sent = requests.find((request) => request.path === BOOK);
    expect(sent?.body).toMatchObject({
      arrivesAt: ELEVEN,
      machines: [{ from: 'new', complaintKindId: NOISY, words: 'Knocks when cold' }],
      language: 'en',
      textConsent: true,
      guest: { name: 'Ana Duarte', phone: '+13035550118', requestId: REQUEST, code: '482113' },
    });
    expect(router.currentRoute.value.query.step).toBe('done');
    expect(page.text()).toContain('5WN-3KT');
    expect(page.text()).toContain('Thu 3 Dec, 11:00 am MST');
    expect(page.text()).toContain('wait until the gauge reads zero');
    expect(page.get('a[href="/t/token"]').text()).toBe('Open the stub');
    expect(JSON.stringify(sessionStorage)).not.toContain('Ana Duarte');
  });

  it('loses nothing by a reload, and is not sent a second code for it', async () => {
    const requests = pretendServer(answers());
    const first = await open();
    await toTheEnd(first.page);
    first.page.unmount();
    const { page } = await open('?step=check');
    expect(page.text()).toContain('Knocks when cold');
    expect(page.text()).toContain('Ana Duarte');
    expect(page.text()).toContain('Thu 3 Dec, 11:00 am MST');
    expect(requests.filter((request) => request.path === CODES)).toHaveLength(1);
  });

  it('keeps one key for one intent, over an answer that was lost and a reload', async () => {
    let tries = 0;
    const requests = pretendServer(
      answers({
        [BOOK]: () => ((tries += 1) === 1 ? refusal(503, 'unavailable') : { status: 201, body: BOOKED }),
      }),
    );
    const first = await open();
    await toTheEnd(first.page);
    await press(first.page, 'Book it');
    expect(first.page.text()).toContain('No answer from the shop’s server'.replace('’', "'"));
    first.page.unmount();
    const { page } = await open('?step=check');
    await field(page, 'Six digits').setValue('482113');
    await press(page, 'Book it');
    const keys = requests
      .filter((request) => request.path === BOOK)
      .map((request) => (request.headers as Record<string, string>)['Idempotency-Key']);
    expect(keys).toHaveLength(2);
    expect(keys[0]).toBeTruthy();
    expect(keys[1]).toBe(keys[0]);
  });

  it('is offered the next free times when the chosen one filled up, and books one of them', async () => {
    let tries = 0;
    const full = refusal(409, 'times_full', { details: { half: 'am', next: [HALF_PAST_ONE] } });
    const requests = pretendServer(
      answers({ [BOOK]: () => ((tries += 1) === 1 ? full : { status: 201, body: BOOKED }) }),
    );
    const { page } = await open();
    await toTheEnd(page);
    await press(page, 'Book it');
    expect(page.get('[role="alert"]').text()).toContain('This time has just filled up');
    await press(page, 'Thu 3 Dec, 1:30 pm MST');
    expect(field(page, 'Six digits').element).toHaveProperty('value', '482 113');
    await press(page, 'Book it');
    const bodies = requests.filter((request) => request.path === BOOK).map((request) => request.body);
    expect(bodies[1]).toMatchObject({ arrivesAt: HALF_PAST_ONE, machines: [{ words: 'Knocks when cold' }] });
  });

  it('is told that another code is on its way, and stands in its field', async () => {
    pretendServer(answers());
    const { page } = await open();
    await toTheEnd(page);
    await press(page, 'Send another code');
    expect(page.get('[role="status"]').text()).toBe(
      'A new code is on its way to (303) 555-0118. The one before no longer works.',
    );
    expect(field(page, 'Six digits').element).toHaveProperty('value', '');
    expect(document.activeElement).toBe(field(page, 'Six digits').element);
  });

  it('is brought to what went wrong, from the button at the foot of a phone', async () => {
    pretendServer(answers({ [CODES]: refusal(503, 'unavailable') }));
    const { page } = await open();
    await chooseMachineAndTime(page);
    await press(page, 'Next');
    await fillInWho(page);
    await press(page, 'Text me the code');
    const shown = scrolledTo.mock.contexts.at(-1) as HTMLElement;
    expect(shown.querySelector('[role="alert"]')?.textContent).toContain('No answer from the shop');
  });

  it('reads at the code that it was wrong', async () => {
    pretendServer(answers({ [BOOK]: refusal(400, 'code_wrong') }));
    const { page } = await open();
    await toTheEnd(page);
    await press(page, 'Book it');
    expect(errorOf(page, field(page, 'Six digits'))).toBe(
      'That is not the code. Check the six digits in the text.',
    );
  });

  it('says who he is where several share the phone', async () => {
    const people = [
      { id: uuid(5), name: 'Ana Duarte', account: 'Duarte Roofing' },
      { id: uuid(6), name: 'Luis Duarte', account: 'Duarte Roofing' },
    ];
    let tries = 0;
    const which = refusal(409, 'which_person', { details: { people } });
    const requests = pretendServer(
      answers({ [BOOK]: () => ((tries += 1) === 1 ? which : { status: 201, body: BOOKED }) }),
    );
    const { page } = await open();
    await toTheEnd(page);
    await press(page, 'Book it');
    await (await radio(page, 'Luis Duarte')).setValue();
    await press(page, 'Book it');
    const last = requests.filter((request) => request.path === BOOK).at(-1);
    expect(last?.body).toMatchObject({ guest: { personId: uuid(6) } });
  });

  it('whose phone has said STOP is told how to undo it and whom to call', async () => {
    pretendServer(answers({ [CODES]: refusal(409, 'opted_out') }));
    const { page, router } = await open();
    await chooseMachineAndTime(page);
    await press(page, 'Next');
    await fillInWho(page);
    await press(page, 'Text me the code');
    expect(router.currentRoute.value.query.step).toBe('who');
    expect(page.get('[role="alert"]').text()).toContain('START');
    expect(page.find('[role="alert"] a[href="tel:+13035550142"]').exists()).toBe(true);
  });

  it('reads the consent in Spanish, naming the shop', async () => {
    localStorage.setItem('benchbell.language', 'es');
    pretendServer(answers());
    const { page } = await open();
    await (await radio(page, 'Hace ruido')).setValue();
    await (await radio(page, '11:00 am')).setValue();
    await settle();
    await press(page, 'Sigue');
    const words = page.get('.consent').text();
    expect(words).toContain('Acepto que Cinder Flat envíe mensajes');
    expect(words).toMatch(/STOP.*HELP/);
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
