import { PiniaColada } from '@pinia/colada';
import { flushPromises, mount, type VueWrapper } from '@vue/test-utils';
import { createPinia, setActivePinia } from 'pinia';
import { vi } from 'vitest';
import { defineComponent, h, type Component } from 'vue';
import { createMemoryHistory, createRouter, RouterView, type RouteRecordRaw } from 'vue-router';
import { i18n, setLanguage } from '@/i18n';
import { installGuards } from '@/router/guards';
import { routes } from '@/router/routes';
import type { Language } from '#shared/domain/when';

/** What the pretended server answers to one request: a body, or a refusal by its status. */
export interface Answer {
  status?: number;
  body: unknown;
}
type Answers = Record<string, Answer | ((body: unknown) => Answer)>;

/** The refusal that the server gives under that code. */
export function refusal(status: number, code: string, more: object = {}): Answer {
  return { status, body: { error: { code, message: code, requestId: 'r', ...more } } };
}

/**
 * Lets `fetch` answer by method and path.
 * @returns the requests made so far, with their bodies
 */
export function pretendServer(answers: Answers): { path: string; body: unknown; headers: unknown }[] {
  const requests: { path: string; body: unknown; headers: unknown }[] = [];
  vi.stubGlobal('fetch', (path: string, init: RequestInit) => {
    const body: unknown = typeof init.body === 'string' ? JSON.parse(init.body) : undefined;
    const name = `${init.method} ${path}`;
    requests.push({ path: name, body, headers: init.headers });
    const found = answers[name] ?? refusal(404, 'not_found');
    const { status = 200, body: given } = typeof found === 'function' ? found(body) : found;
    return Promise.resolve(new Response(JSON.stringify(given), { status }));
  });
  return requests;
}

interface Options {
  path?: string;
  props?: Record<string, unknown>;
  language?: Language;
  /** With the guards of the app: session, language, title, focus. */
  guarded?: boolean;
}

/** Mounts a part of a page at a path, with the app's own words, stores and routes; the pages themselves stay bare. */
export async function mountPage(component: Component, options: Options = {}) {
  await setLanguage(options.language ?? 'en');
  const pinia = createPinia();
  setActivePinia(pinia);
  const history = createMemoryHistory();
  history.replace(options.path ?? '/');
  const router = createRouter({ history, routes: routes.map(bare) });
  if (options.guarded) installGuards(router);
  const Page = defineComponent(() => () => h('div', [h(component, options.props ?? {})]));
  const page: VueWrapper = mount(Page, {
    attachTo: document.body,
    global: { plugins: [pinia, PiniaColada, i18n, router] },
  });
  await router.isReady();
  await flushPromises();
  return { page, router, pinia };
}

/** The same route with nothing but a heading on its page. */
function bare(route: RouteRecordRaw): RouteRecordRaw {
  const { children, redirect, ...rest } = route;
  if (redirect) return route;
  const page = defineComponent(
    () => () => (children ? h(RouterView) : h('main', h('h1', String(route.name)))),
  );
  return { ...rest, props: false, component: page, children: children?.map(bare) } as RouteRecordRaw;
}
