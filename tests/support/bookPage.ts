/** The booking page over a server that answers from a table: what its tests open, press and fill in. */
import { enableAutoUnmount, flushPromises, type VueWrapper } from '@vue/test-utils';
import { afterEach, beforeEach, vi } from 'vitest';
import Book from '@/views/Book.vue';
import { mountPage, type Answer } from './mountPage';
import type { BookAnswer } from '#shared/schemas/booking';
import type { TimesView } from '#shared/schemas/shop';

export const uuid = (n: number): string => `${String(n).padStart(8, '0')}-0000-4000-8000-000000000000`;
export const LEAKS = uuid(1);
export const NOISY = uuid(2);
export const REQUEST = uuid(3);
export const NOW = '2026-12-01T18:40:00.000Z';
export const NINE = '2026-12-03T09:00:00-07:00';
export const ELEVEN = '2026-12-03T11:00:00-07:00';
export const HALF_PAST_ONE = '2026-12-03T13:30:00-07:00';

export const SHOP: Answer = {
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

export function times(full: string[]): Answer {
  const each = (at: string) => ({ at, full: full.includes(at) });
  const days = [{ date: '2026-12-03', times: [NINE, ELEVEN, HALF_PAST_ONE].map(each) }];
  const view: TimesView = { now: NOW, zone: 'America/Denver', days };
  return { body: view };
}

export const BOOKED: BookAnswer = {
  visitId: uuid(9),
  stubCode: '5WN3KT',
  stubPath: '/t/token',
  arrivesAt: ELEVEN,
  jobs: [{ tag: '7K4QM2', machine: 'No. 14' }],
  toldBy: { text: true, email: false },
};
export const PERSON = {
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
export const fleetMachine = (n: number, openStage: string | null) => ({
  id: uuid(n),
  kind: 'wheelbarrow_compressor',
  maker: 'Ironvale',
  model: 'TW-8',
  fleetNumber: String(n),
  serial: '',
  openStage,
});

export const BOOK = 'POST /api/shops/cinder-flat/bookings';
export const CODES = 'POST /api/shops/cinder-flat/codes';
export const TIMES = 'GET /api/shops/cinder-flat/times?machines=';
export const answers = (more: Record<string, Answer | (() => Answer)> = {}) => ({
  'GET /api/session': { body: { now: NOW, person: null } },
  'GET /api/shops/cinder-flat': SHOP,
  [`${TIMES}1`]: times([NINE]),
  [`${TIMES}2`]: times([NINE, ELEVEN]),
  [CODES]: { body: { requestId: REQUEST, expiresAt: '2026-12-01T18:50:00.000Z' } },
  [BOOK]: { status: 201, body: BOOKED },
  ...more,
});

export async function settle(): Promise<void> {
  await flushPromises();
  await vi.dynamicImportSettled();
  await flushPromises();
}
export async function open(query = '') {
  const path = `/s/cinder-flat/book${query}`;
  const mounted = await mountPage(Book, { path, props: { shop: 'cinder-flat' }, guarded: true });
  await settle();
  return mounted;
}
export async function press(page: VueWrapper, words: string): Promise<void> {
  const button = page.findAll('button').find((each) => each.text().includes(words) && !each.classes('vh'));
  if (!button) throw new Error(`no button says ${words}`);
  await button.trigger('click');
  await settle();
}
/** What can be chosen under these words; the calendar is drawn a moment after its days are known. */
export async function radio(page: VueWrapper, words: string) {
  const label = await vi.waitFor(() => {
    const found = page.findAll('label').find((each) => each.text().includes(words));
    if (!found) throw new Error(`nothing to choose says ${words}`);
    return found;
  });
  return label.get('input');
}
export function field(page: VueWrapper, label: string) {
  const found = page.findAll('label').find((each) => each.text() === label);
  return page.get(`[id="${found?.attributes('for')}"]`);
}
/** The sentence that a control is described by. */
export function errorOf(
  page: VueWrapper,
  control: { attributes: (name: string) => string | undefined },
): string {
  const ids = control.attributes('aria-describedby')?.split(' ') ?? [];
  return ids.map((id) => page.find(`[id="${id}"]`).text()).join(' ');
}

export async function chooseMachineAndTime(page: VueWrapper): Promise<void> {
  await (await radio(page, 'Noisy')).setValue();
  await field(page, 'In your words').setValue('Knocks when cold');
  await (await radio(page, '11:00 am')).setValue();
  await settle();
}
export async function fillInWho(page: VueWrapper): Promise<void> {
  await field(page, 'Your name').setValue('Ana Duarte');
  await field(page, 'Company').setValue('Duarte Roofing');
  await field(page, 'Mobile phone').setValue('(303) 555-0118');
  await page.get('[role=checkbox]').trigger('click');
}
/** As a guest up to the last step, the code typed. */
export async function toTheEnd(page: VueWrapper): Promise<void> {
  await chooseMachineAndTime(page);
  await press(page, 'Next');
  await fillInWho(page);
  await press(page, 'Text me the code');
  await field(page, 'Six digits').setValue('482 113');
}

/** Each test begins with an empty browser. Called once in a file; gives what was scrolled to. */
export function freshBookPages() {
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
  return { scrolledTo };
}
