import { enableAutoUnmount, flushPromises, type VueWrapper } from '@vue/test-utils';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import SignInDoors from './SignInDoors.vue';
import { mountPage, pretendServer, refusal, type Answer } from '#tests/support/mountPage';
import type { ShopView } from '#shared/schemas/shop';

const REQUEST = '6f1c2b9e-5c1e-4a57-9d0e-6a4c5b1f2e3d';
const DANA = '6f1c2b9e-5c1e-4a57-9d0e-6a4c5b1f2e3a';
const shop = {
  slug: 'cinder-flat',
  name: 'Cinder Flat',
  phone: '+13035550142',
  email: 'shop@example.com',
} as ShopView;
const codes = 'POST /api/shops/cinder-flat/codes';
const byCode = 'POST /api/shops/cinder-flat/sign-in/code';
const byPassword = 'POST /api/shops/cinder-flat/sign-in/password';
const sent: Answer = { body: { requestId: REQUEST, expiresAt: '2026-12-01T18:50:00.000Z' } };
const signedIn = (roles: string[], account: object | null): Answer => ({
  body: {
    now: '2026-12-01T18:40:00.000Z',
    person: { id: DANA, name: 'Dana', roles, language: 'en', textsOn: false, account, shop, abilities: [] },
  },
});

const open = (path = '/s/cinder-flat/sign-in') => mountPage(SignInDoors, { path, props: { shop } });
const field = (page: VueWrapper, autocomplete: string) => page.get(`input[autocomplete="${autocomplete}"]`);
async function press(page: VueWrapper, words: string) {
  const button = page.findAll('button').find((candidate) => candidate.text().includes(words));
  await (button?.attributes('type') === 'submit'
    ? page
        .findAll('form')
        .find((form) => form.element.contains(button.element))
        ?.trigger('submit')
    : button?.trigger('click'));
  await flushPromises();
}
async function askForCode(page: VueWrapper) {
  await field(page, 'tel').setValue('(303) 555-0118');
  await press(page, 'Text me a code');
}

enableAutoUnmount(afterEach);
beforeEach(() => localStorage.clear());
afterEach(() => vi.unstubAllGlobals());

describe('a customer', () => {
  it('signs in by the code texted to the phone, and lands on Book', async () => {
    const requests = pretendServer({
      [codes]: sent,
      [byCode]: signedIn(['manager'], { id: 'a', name: 'A' }),
    });
    const { page, router } = await open();
    await askForCode(page);
    expect(requests[0]?.body).toMatchObject({ phone: '+13035550118', purpose: 'sign_in', language: 'en' });
    await field(page, 'one-time-code').setValue('482 113');
    await press(page, 'Sign in');
    expect(requests[1]?.body).toEqual({ requestId: REQUEST, code: '482113' });
    expect(router.currentRoute.value.path).toBe('/s/cinder-flat/book');
  });

  it('says who he is where several share the phone, without typing the code again', async () => {
    const people = [{ id: DANA, name: 'Dana Ortega', account: 'High Course Roofing' }];
    const requests = pretendServer({
      [codes]: sent,
      [byCode]: (body) =>
        (body as { personId?: string }).personId === DANA
          ? signedIn(['crew_lead'], { id: 'a', name: 'A' })
          : refusal(409, 'which_person', { details: { people } }),
    });
    const { page, router } = await open();
    await askForCode(page);
    await field(page, 'one-time-code').setValue('482113');
    await press(page, 'Sign in');
    expect(page.find('[role=alert]').exists()).toBe(false);
    await press(page, 'Dana Ortega, High Course Roofing');
    expect(requests.at(-1)?.body).toEqual({ requestId: REQUEST, code: '482113', personId: DANA });
    expect(router.currentRoute.value.path).toBe('/s/cinder-flat/book');
  });

  it('is told that the code is wrong, and keeps what was typed', async () => {
    pretendServer({ [codes]: sent, [byCode]: refusal(400, 'code_wrong') });
    const { page } = await open();
    await askForCode(page);
    await field(page, 'one-time-code').setValue('111111');
    await press(page, 'Sign in');
    expect(page.get('[role=alert]').text()).toContain('That is not the code.');
    expect((field(page, 'one-time-code').element as HTMLInputElement).value).toBe('111111');
  });

  it('whose phone has sent STOP is told three ways on', async () => {
    const details = { shopPhone: shop.phone, shopNumberToText: '+13035550100' };
    pretendServer({ [codes]: refusal(409, 'opted_out', { details }) });
    const { page } = await open();
    await askForCode(page);
    const told = page.get('[role=alert]');
    expect(told.text()).toContain('Text START to (303) 555-0100');
    expect(told.findAll('a').map((link) => link.attributes('href'))).toEqual([
      'mailto:shop@example.com',
      'tel:+13035550142',
    ]);
  });

  it('is not sent a code to a number that cannot be one', async () => {
    const requests = pretendServer({ [codes]: sent });
    const { page } = await open();
    await field(page, 'tel').setValue('555');
    await press(page, 'Text me a code');
    expect(requests).toEqual([]);
    expect(page.text()).toContain('Type a US mobile number with its area code');
  });
});

describe('one of the shop', () => {
  it('signs in by e-mail and password, and goes where he was going', async () => {
    pretendServer({ [byPassword]: signedIn(['mechanic'], null) });
    const { page, router } = await open('/s/cinder-flat/sign-in?next=/shop/jobs/7K4QM2');
    await field(page, 'username').setValue('marta@example.com');
    await field(page, 'current-password').setValue('long words in a row');
    await press(page, 'Sign in');
    expect(router.currentRoute.value.path).toBe('/shop/jobs/7K4QM2');
  });

  it('is told when the two do not fit, and stays', async () => {
    pretendServer({ [byPassword]: refusal(401, 'sign_in_failed') });
    const { page, router } = await open();
    await field(page, 'username').setValue('marta@example.com');
    await field(page, 'current-password').setValue('wrong');
    await press(page, 'Sign in');
    expect(page.get('[role=alert]').text()).toContain('do not fit together');
    expect(router.currentRoute.value.name).toBe('sign-in');
  });
});
