import { enableAutoUnmount, flushPromises } from '@vue/test-utils';
import { afterEach, describe, expect, it, vi } from 'vitest';
import SetPassword from './SetPassword.vue';
import { mountPage, pretendServer, refusal, type Answer } from '#tests/support/mountPage';

const LINK = '/api/shops/cinder-flat/password-links/tok';
const link: Answer = {
  body: { name: 'Marta', email: 'marta@example.com', expiresAt: '2026-12-02T18:40:00.000Z' },
};
const open = () =>
  mountPage(SetPassword, {
    path: '/s/cinder-flat/password/tok',
    props: { shop: 'cinder-flat', token: 'tok' },
  });
async function choose(page: Awaited<ReturnType<typeof open>>['page'], password: string) {
  await page.get('input[autocomplete="new-password"]').setValue(password);
  await page.get('form').trigger('submit');
  await flushPromises();
}

enableAutoUnmount(afterEach);
afterEach(() => vi.unstubAllGlobals());

describe('choosing a password by a link', () => {
  it('leads to the sign-in, where it is asked for', async () => {
    const requests = pretendServer({
      [`GET ${LINK}`]: link,
      [`POST ${LINK}`]: { body: { now: '2026-12-01T18:40:00.000Z', person: null } },
    });
    const { page, router } = await open();
    expect(page.text()).toContain('For Marta, marta@example.com.');
    await choose(page, 'long words in a row');
    expect(requests.at(-1)?.body).toEqual({ password: 'long words in a row' });
    expect(router.currentRoute.value.fullPath).toBe('/s/cinder-flat/sign-in?set=1');
  });

  it('asks for fifteen characters', async () => {
    const requests = pretendServer({ [`GET ${LINK}`]: link });
    const { page } = await open();
    await choose(page, 'fourteen chars');
    expect(requests.some((request) => request.path.startsWith('POST'))).toBe(false);
    expect(page.get('.field-error').text()).toContain('at least 15 characters');
  });

  it('shows which password the server refuses, and keeps it in the field', async () => {
    const fields = [{ path: 'password', key: 'errors.field.password_common', message: '' }];
    pretendServer({ [`GET ${LINK}`]: link, [`POST ${LINK}`]: refusal(400, 'invalid', { fields }) });
    const { page } = await open();
    await choose(page, 'passwordpassword');
    expect(page.get('.field-error').text()).toContain('Many people use this password.');
    expect(page.get('input[autocomplete="new-password"]').attributes('aria-invalid')).toBe('true');
  });

  it('keeps the password out of the browser storage', async () => {
    pretendServer({ [`GET ${LINK}`]: link });
    const { page } = await open();
    await page.get('input[autocomplete="new-password"]').setValue('long words in a row');
    expect(JSON.stringify([Object.entries(sessionStorage), Object.entries(localStorage)])).not.toContain(
      'long',
    );
  });

  it('says that an old link has ended', async () => {
    pretendServer({ [`GET ${LINK}`]: refusal(410, 'link_ended') });
    const { page } = await open();
    expect(page.get('[role=alert]').text()).toContain('has been used or has run out');
    expect(page.find('form').exists()).toBe(false);
  });
});
