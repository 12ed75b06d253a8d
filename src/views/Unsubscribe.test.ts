import { enableAutoUnmount, flushPromises } from '@vue/test-utils';
import { afterEach, describe, expect, it, vi } from 'vitest';
import Unsubscribe from './Unsubscribe.vue';
import { mountPage, pretendServer, refusal, type Answer } from '#tests/support/mountPage';

const view = (already: boolean): Answer => ({
  body: { shopName: 'Cinder Flat', email: 'office@example.com', already },
});
const open = () => mountPage(Unsubscribe, { path: '/u/tok', props: { token: 'tok' } });

enableAutoUnmount(afterEach);
afterEach(() => vi.unstubAllGlobals());

describe('the link under every e-mail', () => {
  it('changes nothing by being opened', async () => {
    const requests = pretendServer({ 'GET /api/u/tok': view(false) });
    const { page } = await open();
    expect(requests.map((request) => request.path)).toEqual(['GET /api/u/tok']);
    expect(page.text()).toContain('Cinder Flat writes to office@example.com');
  });

  it('ends the e-mails by its button', async () => {
    const requests = pretendServer({ 'GET /api/u/tok': view(false), 'POST /u/tok': { body: null } });
    const { page } = await open();
    await page.get('button').trigger('click');
    await flushPromises();
    expect(requests.at(-1)?.path).toBe('POST /u/tok');
    expect(page.get('h1').text()).toBe('Done. No more e-mails.');
    expect(page.find('button').exists()).toBe(false);
  });

  it('says when they have ended before', async () => {
    pretendServer({ 'GET /api/u/tok': view(true) });
    const { page } = await open();
    expect(page.get('h1').text()).toBe('Done. No more e-mails.');
  });

  it('does not claim what failed, and can be tried again', async () => {
    pretendServer({ 'GET /api/u/tok': view(false), 'POST /u/tok': refusal(500, 'internal') });
    const { page } = await open();
    await page.get('button').trigger('click');
    await flushPromises();
    expect(page.get('h1').text()).toBe('No more e-mails?');
    expect(page.get('[role=alert]').text()).toContain('Something broke on our side.');
  });

  it('says when it is not one of ours', async () => {
    pretendServer({});
    const { page } = await open();
    expect(page.get('[role=alert]').text()).toContain('This link has ended or is not complete.');
  });
});
