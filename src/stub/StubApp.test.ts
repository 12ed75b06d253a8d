import { enableAutoUnmount, flushPromises, mount, type VueWrapper } from '@vue/test-utils';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import StubApp from './StubApp.vue';
import type { Outcome, Stage } from '#shared/domain/stages';
import type { StubMachine, StubView } from '#shared/schemas/stub';

const DAY = [{ from: '07:00', to: '17:00' }];

function machine(fleetNumber: string, stages: Stage[], outcome: Outcome | null = null): StubMachine {
  const stage = stages.at(-1) ?? 'booked';
  return {
    tag: '7K4QM2',
    fleetNumber,
    kind: 'wheelbarrow_compressor',
    maker: 'Ironvale',
    model: 'TW-8',
    complaint: { en: 'No pressure', es: 'Sin presión' },
    words: 'Stops at 70 psi',
    stage,
    outcome,
    history: stages.map((each) => ({
      stage: each,
      at: '2026-11-30T15:40:00.000Z',
      outcome: each === stage ? outcome : null,
    })),
  };
}

function stubView(changes: Partial<StubView> = {}): StubView {
  return {
    now: '2026-12-01T18:40:00.000Z',
    nextChangeAt: null,
    language: 'en',
    stubCode: '5WN3KT',
    arrivesAt: '2026-12-03T16:00:00.000Z',
    account: 'High Course Roofing',
    shop: {
      slug: 'cinder-flat',
      name: 'Cinder Flat Equipment Repair',
      zone: 'America/Denver',
      phone: '+13035550142',
      address: '418 Flatiron Road',
      gateNote: { en: 'Gate on the left', es: 'Portón a la izquierda' },
      hours: { '1': DAY, '2': DAY },
    },
    machines: [machine('17', ['booked', 'checked_in', 'diagnosis', 'repair'])],
    ...changes,
  };
}

type Answer = StubView | { status: number; code: string; details?: unknown } | 'no signal';
let answer: Answer;
const fetched = vi.fn(() => {
  if (answer === 'no signal') return Promise.reject(new TypeError('Failed to fetch'));
  if ('status' in answer) {
    const { status, code, details } = answer;
    const body = { error: { code, message: code, details, requestId: 'r' } };
    return Promise.resolve(new Response(JSON.stringify(body), { status }));
  }
  return Promise.resolve(new Response(JSON.stringify(answer)));
});

/** Opens the page and waits until its words are there. */
async function open(first: Answer): Promise<VueWrapper> {
  answer = first;
  const page = mount(StubApp, { props: { token: 'abc' } });
  await vi.advanceTimersByTimeAsync(300);
  await vi.dynamicImportSettled();
  await flushPromises();
  return page;
}

async function pass(milliseconds: number): Promise<void> {
  await vi.advanceTimersByTimeAsync(milliseconds);
  await flushPromises();
}

let visibility: DocumentVisibilityState;
enableAutoUnmount(afterEach);
beforeEach(() => {
  vi.useFakeTimers();
  vi.stubGlobal('fetch', fetched);
  fetched.mockClear();
  sessionStorage.clear();
  localStorage.clear();
  visibility = 'visible';
  vi.spyOn(document, 'visibilityState', 'get').mockImplementation(() => visibility);
});
afterEach(() => {
  vi.useRealTimers();
  vi.unstubAllGlobals();
});

describe('what the stub says', () => {
  it('answers first, names the shop and tells the time in the shop’s zone', async () => {
    const page = await open(
      stubView({
        machines: [
          machine('9', ['booked', 'checked_in', 'ready'], 'repaired'),
          machine('14', ['booked', 'checked_in', 'repair']),
          machine('17', ['booked', 'checked_in', 'diagnosis']),
        ],
      }),
    );
    expect(page.get('h1').text()).toBe('One ready. Two in work.');
    expect(page.text()).toContain('High Course Roofing. Dropped off Mon 30 Nov, 8:40 am MST');
    expect(page.text()).toContain('Checked 11:40 am');
    expect(page.get('a[href="tel:+13035550142"]').text()).toContain('(303) 555-0142');
    expect(page.text()).toContain('Mon to Tue 7:00 am to 5:00 pm');
  });

  it('names an outcome other than repaired as what it is, and does not ring the bell for it', async () => {
    const page = await open(
      stubView({ machines: [machine('9', ['booked', 'checked_in', 'ready'], 'not_worth_repairing')] }),
    );
    expect(page.get('h1').text()).toBe('One to pick up, not repaired.');
    expect(page.get('.coupon h2').text()).toBe('Not worth repairing');
    expect(page.text()).not.toContain('ready');
    expect(page.find('.bell').exists()).toBe(false);
  });

  it('says when a booked visit is due and what to do before it', async () => {
    const page = await open(stubView({ machines: [machine('17', ['booked'])] }));
    expect(page.get('h1').text()).toBe('Booked for Thu 3 Dec, 9:00 am.');
    expect(page.text()).toContain('Arrives Thu 3 Dec, 9:00 am MST');
    expect(page.text()).toContain('wait until the gauge reads zero');
    expect(page.text()).toContain('follow the manual');
  });

  it('leaves the cautions out once the machine is there', async () => {
    const page = await open(stubView());
    expect(page.text()).not.toContain('Before you bring');
  });

  it('says its progress in words and lists its history with times', async () => {
    const page = await open(stubView());
    expect(page.get('.coupon [role="img"]').attributes('aria-label')).toMatch(/^Being repaired, step 4 of /);
    const steps = page.findAll('.history li').map((item) => item.text());
    expect(steps).toHaveLength(4);
    expect(steps[1]).toContain('At the shop');
    expect(steps[1]).toContain('Mon 30 Nov, 8:40 am MST');
  });
});

describe('the language', () => {
  it('is the visit’s own, switches in place and is remembered', async () => {
    const page = await open(stubView({ language: 'es' }));
    expect(page.get('h1').text()).toBe('Una en proceso.');
    expect(document.documentElement.lang).toBe('es');

    await page.get('input[value="en"]').setValue();
    await vi.dynamicImportSettled();
    await flushPromises();
    expect(page.get('h1').text()).toBe('One in work.');

    page.unmount();
    const again = await open(stubView({ language: 'es' }));
    expect(again.get('h1').text()).toBe('One in work.');
  });
});

describe('keeping fresh', () => {
  it('asks again every ten seconds and shows what is new', async () => {
    const page = await open(stubView());
    expect(fetched).toHaveBeenCalledTimes(1);
    answer = stubView({ machines: [machine('17', ['booked', 'checked_in', 'ready'], 'repaired')] });
    await pass(9_000);
    expect(fetched).toHaveBeenCalledTimes(1);
    await pass(1_000);
    expect(fetched).toHaveBeenCalledTimes(2);
    expect(page.get('h1').text()).toBe('One ready.');
  });

  it('asks at the moment of the next visible change, a quarter second after it', async () => {
    await open(stubView({ nextChangeAt: '2026-12-01T18:40:04.000Z' }));
    await pass(4_249 - 300);
    expect(fetched).toHaveBeenCalledTimes(1);
    answer = stubView();
    await pass(2);
    expect(fetched).toHaveBeenCalledTimes(2);
  });

  it('rests while nobody looks, and asks at once on return', async () => {
    await open(stubView());
    visibility = 'hidden';
    document.dispatchEvent(new Event('visibilitychange'));
    await pass(60_000);
    expect(fetched).toHaveBeenCalledTimes(1);
    visibility = 'visible';
    document.dispatchEvent(new Event('visibilitychange'));
    window.dispatchEvent(new Event('focus'));
    await pass(0);
    expect(fetched).toHaveBeenCalledTimes(2);
  });
});

describe('when the signal drops', () => {
  it('keeps the last answer, says from when it is, and takes the line away again', async () => {
    const page = await open(stubView());
    answer = 'no signal';
    await pass(10_000);
    expect(page.get('[role="status"]').text()).toBe('No signal. Showing 11:40 am.');
    expect(page.get('h1').text()).toBe('One in work.');
    answer = stubView({ now: '2026-12-01T18:41:00.000Z' });
    await pass(10_000);
    expect(page.find('[role="status"]').exists()).toBe(false);
    expect(page.text()).toContain('Checked 11:41 am');
  });

  it('shows the last answer after a reload without signal', async () => {
    (await open(stubView())).unmount();
    const page = await open('no signal');
    expect(page.get('[role="status"]').text()).toBe('No signal. Showing 11:40 am.');
    expect(page.get('h1').text()).toBe('One in work.');
  });

  it('offers another try where there was never an answer', async () => {
    const page = await open('no signal');
    expect(page.get('h1').text()).toBe('No signal');
    answer = stubView();
    await page.get('button').trigger('click');
    await flushPromises();
    expect(page.get('h1').text()).toBe('One in work.');
  });
});

describe('a link that opens nothing', () => {
  it('says that an ended one has ended, leads to the shop and asks no more', async () => {
    const shop = { slug: 'cinder-flat', name: 'Cinder Flat', phone: '+13035550142' };
    const page = await open({ status: 404, code: 'link_ended', details: { shop } });
    expect(page.get('h1').text()).toBe('This stub has ended');
    expect(page.get('a[href="/s/cinder-flat"].btn').text()).toBe('To Cinder Flat');
    await pass(60_000);
    expect(fetched).toHaveBeenCalledTimes(1);
  });

  it('says that it does not know a wrong one', async () => {
    const page = await open({ status: 404, code: 'not_found' });
    expect(page.get('h1').text()).toBe('We do not know this stub');
  });

  it('keeps nothing of a visit whose link ends while the page is open', async () => {
    const page = await open(stubView());
    answer = { status: 404, code: 'link_ended' };
    await pass(10_000);
    expect(page.text()).not.toContain('High Course Roofing');
    expect(sessionStorage).toHaveLength(0);
    expect(page.get('a[href="/s/cinder-flat"].btn').text()).toContain('Cinder Flat Equipment Repair');
  });
});
