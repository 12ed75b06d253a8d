import { enableAutoUnmount, flushPromises } from '@vue/test-utils';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import Welcome from './Welcome.vue';
import { mountPage, pretendServer, refusal, type Answer } from '#tests/support/mountPage';
import type { Language } from '#shared/domain/when';

const openPage = vi.hoisted(() => vi.fn());
vi.mock('@/lib/openPage', () => ({ openPage }));

const day = [{ from: '07:00', to: '17:00' }];
const shop: Answer = {
  body: {
    now: '2026-12-01T18:40:00.000Z',
    slug: 'cinder-flat',
    name: 'Cinder Flat',
    zone: 'America/Denver',
    phone: '+13035550142',
    email: 'shop@example.com',
    address: '418 Flatiron Road',
    gateNote: { en: 'On the left', es: 'A la izquierda' },
    about: { en: 'We fix what roofing crews run.', es: 'Reparamos lo que usan las cuadrillas.' },
    hours: { 1: day, 2: day, 3: day, 4: day, 5: day, 6: [], 7: [] },
    closures: [],
    complaintKinds: [],
    machineKinds: ['wheelbarrow_compressor', 'generator', 'other'],
    consent: { version: '1' },
  },
};
const GET = 'GET /api/shops/cinder-flat';
const FIND = 'POST /api/shops/cinder-flat/stubs';

async function open(answers: Record<string, Answer>, language: Language = 'en') {
  matchMediaOfADesk();
  const requests = pretendServer({ [GET]: shop, ...answers });
  const opened = await mountPage(Welcome, {
    path: '/s/cinder-flat',
    props: { shop: 'cinder-flat' },
    language,
  });
  return { ...opened, requests };
}
function matchMediaOfADesk() {
  vi.stubGlobal('matchMedia', (media: string) => ({
    media,
    matches: media.includes('min-width'),
    addEventListener: () => undefined,
    removeEventListener: () => undefined,
  }));
}
async function find(page: Awaited<ReturnType<typeof open>>['page'], code: string, lastFour: string) {
  const [first, second] = page.findAll('form.claim input');
  await first?.setValue(code);
  await second?.setValue(lastFour);
  await page.get('form.claim').trigger('submit');
  await flushPromises();
}

enableAutoUnmount(afterEach);
beforeEach(() => {
  localStorage.clear();
  sessionStorage.clear();
});
afterEach(() => vi.unstubAllGlobals());

describe('the front page of a shop', () => {
  it('says what the shop does, when it opens, where it is, and leads to Book', async () => {
    const { page } = await open({});
    expect(page.text()).toContain('We fix what roofing crews run.');
    expect(page.text()).toContain('Mon – Fri');
    expect(page.text()).toContain('7:00 am – 5:00 pm');
    expect(page.text()).toContain('418 Flatiron Road');
    expect(page.text()).toContain('Wheelbarrow compressor and generator');
    expect(page.find('a[href="tel:+13035550142"]').exists()).toBe(true);
    expect(page.get('a[href="/s/cinder-flat/book"]').text()).toBe('Book the bench');
  });

  it('says the same in Spanish', async () => {
    const { page } = await open({}, 'es');
    expect(page.text()).toContain('Reparamos lo que usan las cuadrillas.');
    expect(page.text()).toContain('lun – vie');
    expect(page.text()).toContain('A la izquierda');
    expect(page.get('a[href="/s/cinder-flat/book"]').text()).toBe('Pedir cita');
  });

  it('promises no date and names no price', async () => {
    const { page } = await open({});
    expect(page.text()).not.toMatch(/\$|likely|\bby (Mon|Tue|Wed|Thu|Fri)/i);
  });

  it('of a shop that is not there says so', async () => {
    const { page } = await open({ [GET]: refusal(404, 'not_found') });
    expect(page.get('h1').text()).toBe('We know no shop at this address.');
  });

  it('that did not come through can be asked for again', async () => {
    const { page } = await open({ [GET]: refusal(503, 'unavailable') });
    pretendServer({ [GET]: shop });
    await page.get('[role=alert] button').trigger('click');
    await flushPromises();
    expect(page.text()).toContain('418 Flatiron Road');
  });
});

describe('find my machine', () => {
  it('opens the stub', async () => {
    const { page, requests } = await open({ [FIND]: { body: { stubPath: '/t/abcdefghijklmnopqrstuv' } } });
    await find(page, '5wn-3kt', '0142');
    expect(requests.at(-1)).toMatchObject({ path: FIND, body: { code: '5wn-3kt', lastFour: '0142' } });
    expect(openPage).toHaveBeenCalledWith('/t/abcdefghijklmnopqrstuv');
  });

  it('says what it does not know, what to check and whom to call', async () => {
    const { page } = await open({ [FIND]: refusal(404, 'not_found') });
    await find(page, '5wn-3kt', '0142');
    expect(page.get('.claim [role=alert]').text()).toBe(
      'We do not know 5WN-3KT with these four digits. Check both, or call (303) 555-0142.',
    );
    expect((page.get('form.claim input').element as HTMLInputElement).value).toBe('5wn-3kt');
  });

  it('asks for four digits before it asks the server', async () => {
    const { page, requests } = await open({});
    await find(page, '5wn-3kt', '14');
    expect(requests.filter((request) => request.path === FIND)).toEqual([]);
    expect(page.get('[data-path=lastFour]').text()).toContain('Type the last four digits of the phone.');
  });
});
