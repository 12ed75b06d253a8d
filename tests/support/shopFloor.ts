/** Mounts a staff screen over a server that answers from a table, and builds what it reads. */
import { PiniaColada } from '@pinia/colada';
import { flushPromises, mount } from '@vue/test-utils';
import { createPinia } from 'pinia';
import { NMessageProvider } from 'naive-ui';
import { vi } from 'vitest';
import { h, type Component } from 'vue';
import { createI18n } from 'vue-i18n';
import { createMemoryHistory, createRouter } from 'vue-router';
import { messages } from '@/i18n/en';
import { setServerNow } from '@/lib/clock';
import { useSessionStore } from '@/stores/session';
import type { StaffRole } from '#shared/domain/roles';
import { abilitiesOf } from '#shared/policies/abilities';
import type { GateView, JobSheet, MoveAnswer, RailJob, RailView } from '#shared/schemas/job';

/** 11:40 am in Denver on Tue 1 Dec 2026. */
export const NOW = '2026-12-01T18:40:00.000Z';
const ZONE = 'America/Denver';
const minutes = (count: number) => new Date(Date.parse(NOW) + count * 60_000).toISOString();

export interface Request {
  method: string;
  path: string;
  body: unknown;
  key: string | null;
}
/** By "METHOD /path": a body to answer with, or a function of the request. A status other than 200 comes as `[status, body]`. */
export type Answers = Record<string, unknown>;

let madeJobs = 0;

/** An error answer as the server gives it. */
export function refusal(status: number, code: string, more: Record<string, unknown> = {}): [number, unknown] {
  return [status, { error: { code, message: `refused: ${code}`, requestId: 'r1', ...more } }];
}

/** One tag of the Rail. */
export function buildRailJob(more: Partial<RailJob> = {}): RailJob {
  madeJobs += 1;
  return {
    id: `00000000-0000-4000-8000-${String(madeJobs).padStart(12, '0')}`,
    tag: '7K4QM2',
    version: 3,
    stage: 'test_run',
    stageSince: minutes(-90),
    outcome: null,
    partsReason: null,
    machine: {
      id: '00000000-0000-4000-8000-00000000aaaa',
      kind: 'wheelbarrow_compressor',
      maker: 'Ironvale',
      model: 'TW-8',
      fleetNumber: '14',
      serial: '',
    },
    account: { id: '00000000-0000-4000-8000-00000000bbbb', name: 'High Course Roofing' },
    complaint: 'Slow to build pressure',
    words: '',
    arrivesAt: minutes(-3000),
    rush: false,
    undo: null,
    abilities: ['job.view', 'job.move', 'job.correct', 'job.note'],
    ...more,
  };
}

/** The Rail with these tags. */
export function buildRail(jobs: RailJob[], more: Partial<RailView> = {}): RailView {
  return { now: NOW, zone: ZONE, unpaidLimitCents: 25_000, pegs: { test_run: 2 }, jobs, ...more };
}

/** The answer to a move of that job. */
export function buildMoveAnswer(job: RailJob, more: Partial<MoveAnswer> = {}): MoveAnswer {
  return { job: { ...job, version: job.version + 1 }, held: [], ...more };
}

/** The Gate, empty unless more is given. */
export function buildGate(more: Partial<GateView> = {}): GateView {
  return { now: NOW, zone: ZONE, date: '2026-12-01', visits: [], unanswered: [], ...more };
}

/** A visit at the Gate with that one machine. */
export function buildVisit(
  job: RailJob,
  more: Partial<GateView['visits'][number]> = {},
): GateView['visits'][number] {
  const { id, tag, version, stage, machine, complaint, words, abilities } = job;
  return {
    id: `visit-${id}`,
    stubCode: '5WN3KT',
    arrivesAt: minutes(-40),
    account: job.account,
    bookedBy: { id: '00000000-0000-4000-8000-00000000cccc', name: 'Dana Ruiz', phone: '+13035550118' },
    people: [{ id: '00000000-0000-4000-8000-00000000cccc', name: 'Dana Ruiz' }],
    note: '',
    jobs: [{ id, tag, version, stage, machine, complaint, words, abilities, checkedInAt: null, undo: null }],
    ...more,
  };
}

/** The sheet of that job. */
export function buildSheet(job: RailJob, more: Partial<JobSheet> = {}): JobSheet {
  return {
    now: NOW,
    zone: ZONE,
    unpaidLimitCents: 25_000,
    job: {
      ...job,
      visit: { id: 'v1', stubCode: '5WN3KT', note: '' },
      billed: { id: 'a1', name: 'Bluestem Roof & Gutter' },
      broughtBy: 'Ray Ortiz',
      leftWithIt: '50 ft hose',
      outcomeNote: '',
    },
    people: [],
    history: [],
    notes: [],
    lines: [],
    notices: [],
    texts: [],
    told: [],
    correctTo: [],
    abilities: abilitiesOf({ roles: ['counter'] }),
    ...more,
  };
}

function answering(answers: Answers, requests: Request[]) {
  return (url: string, init: RequestInit = {}): Promise<Response> => {
    const method = init.method ?? 'GET';
    const headers = new Headers(init.headers);
    const body: unknown = typeof init.body === 'string' ? JSON.parse(init.body) : undefined;
    const request = { method, path: url, body, key: headers.get('Idempotency-Key') };
    requests.push(request);
    const given = answers[`${method} ${url}`] ?? refusal(404, 'not_found');
    const answer: unknown =
      typeof given === 'function' ? (given as (request: Request) => unknown)(request) : given;
    const [status, content] = Array.isArray(answer) ? (answer as [number, unknown]) : [200, answer];
    return Promise.resolve(new Response(JSON.stringify(content), { status }));
  };
}

export interface Floor {
  /** Takes the screen down, with its timers. */
  unmount: () => void;
  requests: Request[];
  /** Only what was sent to change something. */
  sent: () => Request[];
  /** Everything to be read, dialogs included. */
  text: () => string;
  /** A button anywhere on the page, by its words. */
  button: (words: string) => HTMLButtonElement;
  buttons: () => string[];
  press: (words: string) => Promise<void>;
  /** Sends the form of the open dialog. */
  submit: () => Promise<void>;
  /** The control that a label belongs to. */
  field: (label: string) => HTMLInputElement;
  fill: (label: string, value: string) => Promise<void>;
}

const wordsOf = (element: Element) => (element.textContent ?? '').replace(/\s+/g, ' ').trim();

/** Mounts a staff view for a person of these roles, and waits for what it reads. */
export async function mountFloor(
  view: Component,
  { roles, answers, props = {} }: { roles: StaffRole[]; answers: Answers; props?: Record<string, unknown> },
): Promise<Floor> {
  const requests: Request[] = [];
  // The router reads the session, and with it the server's time, before any page.
  setServerNow(NOW);
  vi.stubGlobal('fetch', vi.fn(answering(answers, requests)));
  Element.prototype.scrollIntoView = () => undefined;
  document.body.innerHTML = '<div id="app"></div>';
  const pinia = createPinia();
  const blank = { template: '<p />' };
  const router = createRouter({
    history: createMemoryHistory(),
    routes: [
      { path: '/', component: blank },
      { path: '/shop/jobs/:tag', name: 'job', component: blank },
    ],
  });
  const i18n = createI18n({ legacy: false, locale: 'en', messages: { en: messages as never } });
  const page = () => h(NMessageProvider, null, () => h(view, props));
  const wrapper = mount(page, {
    attachTo: '#app',
    global: {
      plugins: [pinia, PiniaColada, i18n, router, { install: () => signIn(roles) }],
    },
  });
  await flushPromises();
  return { unmount: () => wrapper.unmount(), requests, ...reading(requests) };
}

function signIn(roles: StaffRole[]): void {
  useSessionStore().signedIn({
    now: NOW,
    person: {
      id: '00000000-0000-4000-8000-00000000dddd',
      name: 'Marta Velez',
      roles,
      language: 'en',
      phone: null,
      email: 'marta@example.com',
      textsOn: false,
      account: null,
      shop: { slug: 'cinder-flat', name: 'Cinder Flat Equipment Repair', zone: ZONE, phone: '+13035550142' },
      abilities: abilitiesOf({ roles }),
    },
  });
}

function reading(requests: Request[]): Omit<Floor, 'unmount' | 'requests'> {
  const all = () => [...document.querySelectorAll<HTMLButtonElement>('button')];
  function button(words: string): HTMLButtonElement {
    const found = all().find((one) => wordsOf(one) === words || one.getAttribute('aria-label') === words);
    if (!found) throw new Error(`no button "${words}" among: ${all().map(wordsOf).join(' | ')}`);
    return found;
  }
  function field(label: string): HTMLInputElement {
    const labels = [...document.querySelectorAll('label')];
    const ticks = [...document.querySelectorAll<HTMLInputElement>('[role=checkbox]')];
    const named = labels.find((one) => wordsOf(one).startsWith(label))?.control as
      HTMLInputElement | undefined;
    const found = named ?? ticks.find((one) => wordsOf(one).startsWith(label));
    if (found) return found;
    throw new Error(`no field "${label}" among: ${[...labels, ...ticks].map(wordsOf).join(' | ')}`);
  }
  return {
    sent: () => requests.filter((request) => request.method === 'POST'),
    text: () => wordsOf(document.body),
    button,
    buttons: () => all().map(wordsOf),
    press: async (words) => {
      button(words).click();
      await flushPromises();
    },
    submit: async () => {
      document.querySelector<HTMLButtonElement>('[role=dialog] button[type=submit]')?.click();
      await flushPromises();
    },
    field,
    fill: async (label, value) => {
      const control = field(label);
      if (control.type === 'radio' || control.role === 'checkbox') control.click();
      else {
        control.value = value;
        control.dispatchEvent(new Event('input'));
      }
      await flushPromises();
    },
  };
}
