import { enableAutoUnmount, flushPromises } from '@vue/test-utils';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { RouterView } from 'vue-router';
import { homeOf } from './guards';
import { routes } from './routes';
import { mountPage, pretendServer, refusal, type Answer } from '#tests/support/mountPage';
import { getRail } from '@/api/jobs';
import { wantedPage } from '@/composables/useAfterSignIn';
import { currentLanguage } from '@/i18n';
import { useSessionStore } from '@/stores/session';
import type { Role } from '#shared/domain/roles';
import { abilitiesOf } from '#shared/policies/abilities';
import type { SessionView } from '#shared/schemas/session';

const shop = { slug: 'cinder-flat', name: 'Cinder Flat', zone: 'America/Denver', phone: '+13035550142' };
const view = (roles: Role[]): SessionView => ({
  now: '2026-12-01T18:40:00.000Z',
  person: {
    id: 'p-1',
    name: 'Marta',
    roles,
    language: 'es',
    phone: null,
    email: null,
    textsOn: false,
    account: roles.includes('manager') ? { id: 'a-1', name: 'High Course Roofing' } : null,
    shop,
    abilities: abilitiesOf({ roles }),
  },
});
const visitor: Answer = { body: { now: '2026-12-01T18:40:00.000Z', person: null } };
/** Opens a path with whoever is signed in, and says where that leads. */
async function arrive(path: string, session: Answer) {
  pretendServer({ 'GET /api/session': session });
  const { router, page, pinia } = await mountPage(RouterView, { path, guarded: true });
  return { path: router.currentRoute.value.fullPath, router, page, pinia };
}

enableAutoUnmount(afterEach);
beforeEach(() => localStorage.clear());
afterEach(() => vi.unstubAllGlobals());

describe('the door of the shop floor', () => {
  it('lets staff in', async () => {
    expect((await arrive('/shop/rail', { body: view(['mechanic']) })).path).toBe('/shop/rail');
  });

  it('sends a visitor to the sign-in of the shop last used here, and says where to go on', async () => {
    localStorage.setItem('benchbell.shop', 'cinder-flat');
    expect((await arrive('/shop/jobs/7K4QM2', visitor)).path).toBe(
      '/s/cinder-flat/sign-in?next=/shop/jobs/7K4QM2',
    );
  });

  it('sends a visitor of no shop to the start', async () => {
    expect((await arrive('/shop/gate', visitor)).path).toBe('/');
  });

  it('is shut for customers', async () => {
    expect((await arrive('/shop/rail', { body: view(['manager']) })).path).toContain(
      '/s/cinder-flat/sign-in',
    );
  });

  it('stays shut, without breaking, while the server is away', async () => {
    expect((await arrive('/shop/rail', refusal(503, 'unavailable'))).path).toBe('/');
  });

  it('is left when the session ends meanwhile', async () => {
    const { router } = await arrive('/shop/rail', { body: view(['mechanic']) });
    pretendServer({ 'GET /api/shop/rail': refusal(401, 'unauthenticated') });
    await getRail().catch(() => undefined);
    await flushPromises();
    expect(router.currentRoute.value.fullPath).toBe('/s/cinder-flat/sign-in?next=/shop/rail');
  });
});

describe('where a person starts', () => {
  it.each<[Role[], object]>([
    [['mechanic'], { name: 'rail' }],
    [['counter'], { name: 'gate' }],
    [['owner', 'mechanic'], { name: 'gate' }],
    [['manager'], { name: 'book', params: { shop: 'cinder-flat' } }],
    [['crew_lead'], { name: 'book', params: { shop: 'cinder-flat' } }],
    [['driver'], { name: 'welcome', params: { shop: 'cinder-flat' } }],
  ])('%j', async (roles, page) => {
    const { pinia } = await arrive('/', { body: view(roles) });
    expect(homeOf(useSessionStore(pinia))).toEqual(page);
  });

  it.each([
    ['/shop/rail', '/shop/rail'],
    ['/s/cinder-flat/book?day=2', '/s/cinder-flat/book?day=2'],
    ['//evil.example.com', null],
    ['https://evil.example.com', null],
    ['/s//evil.example.com:80', null],
    ['/shop/\\evil', null],
    [['/shop/rail'], null],
    [undefined, null],
  ])('may be asked for in the address: %j', (next, page) => {
    expect(wantedPage(next)).toBe(page);
  });
});

describe('every page', () => {
  it('is read in the language of the person, the shop floor in English', async () => {
    await arrive('/', { body: view(['mechanic']) });
    expect(currentLanguage()).toBe('es');
    expect(document.title).toBe('Inicio – Benchbell');
    await arrive('/shop/rail', { body: view(['mechanic']) });
    expect(currentLanguage()).toBe('en');
    expect(document.title).toBe('Rail – Benchbell');
  });

  it('has a title, and a page behind it', () => {
    const pages = routes.flatMap((route) => route.children ?? []).filter((route) => !route.redirect);
    expect(pages.length).toBeGreaterThan(9);
    expect(pages.filter((route) => !route.meta?.title || !route.component)).toEqual([]);
  });

  it('moves the focus to its heading when the reader goes there', async () => {
    const { router } = await arrive('/', visitor);
    expect(document.activeElement).toBe(document.body);
    await router.push('/s/cinder-flat');
    await vi.waitFor(() => expect(document.activeElement?.tagName).toBe('H1'));
    expect(document.activeElement?.textContent).toBe('welcome');
  });
});
