import type { RouteLocationNormalized, RouteLocationRaw, Router } from 'vue-router';
import { onSignedOut } from '@/api/client';
import { currentLanguage, preferredLanguage, setLanguage, t } from '@/i18n';
import { useSessionStore } from '@/stores/session';

/** Where a person starts after signing in. */
export function homeOf(session: ReturnType<typeof useSessionStore>): RouteLocationRaw {
  const person = session.person;
  if (!person) return { name: 'home' };
  if (!session.isStaff) return { name: 'book', params: { shop: person.shop.slug } };
  // A driver's own screen comes with the van; until then the shop's front page is all there is for him.
  if (!session.may('rail.view')) return { name: 'welcome', params: { shop: person.shop.slug } };
  const worksAtTheDesk = person.roles.includes('counter') || person.roles.includes('owner');
  return { name: worksAtTheDesk ? 'gate' : 'rail' };
}

/** Sends whoever may not see a staff page to the sign-in of the shop last used here. */
export async function guardStaff(to: RouteLocationNormalized): Promise<RouteLocationRaw | true> {
  const session = useSessionStore();
  if (!session.isLoaded) await session.load().catch(() => undefined);
  if (!to.meta.staff || session.isStaff) return true;
  const shop = session.lastShop();
  if (!shop) return { name: 'home' };
  return { name: 'sign-in', params: { shop }, query: { next: to.fullPath } };
}

/** Staff screens are in English; everywhere else the reader's language holds. */
async function matchLanguage(to: RouteLocationNormalized): Promise<void> {
  const session = useSessionStore();
  const wanted = to.meta.staff ? 'en' : preferredLanguage(session.person?.language);
  if (wanted !== currentLanguage()) await setLanguage(wanted);
}

/** Title of a page, for the browser's tab and history. */
export function titleOf(to: Pick<RouteLocationNormalized, 'meta'>): string {
  return to.meta.title ? `${t(to.meta.title)} – Benchbell` : 'Benchbell';
}

/** After a change of page the reader starts at its heading, by eye, keyboard and ear. */
function focusHeading(): void {
  const heading =
    document.querySelector<HTMLElement>('main h1') ?? document.querySelector<HTMLElement>('main');
  heading?.setAttribute('tabindex', '-1');
  heading?.focus({ preventScroll: true });
}

/** A staff page whose session has ended leads to the sign-in, and from there back. */
function leaveWhenSignedOut(router: Router): void {
  onSignedOut(() => {
    const session = useSessionStore();
    const shop = session.lastShop();
    session.forget();
    const { meta, fullPath } = router.currentRoute.value;
    if (!meta.staff || !shop) return;
    void router.push({ name: 'sign-in', params: { shop }, query: { next: fullPath } });
  });
}

/** Hangs session, language, title and focus on the router. */
export function installGuards(router: Router): void {
  leaveWhenSignedOut(router);
  router.beforeEach(guardStaff);
  router.beforeEach(matchLanguage);
  router.afterEach((to, from, failure) => {
    if (failure) return;
    document.title = titleOf(to);
    const isFirstPage = from.matched.length === 0;
    if (!isFirstPage && to.path !== from.path) setTimeout(focusHeading, 0);
  });
}
