import { flushPromises, mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import { createMemoryHistory, createRouter } from 'vue-router';
import { drawCode } from '#shared/domain/tagCode';
import FindTag from './FindTag.vue';

const blank = { template: '<p />' };

async function find(typed: string) {
  const router = createRouter({
    history: createMemoryHistory(),
    routes: [
      { path: '/shop/rail', component: blank },
      { path: '/shop/jobs/:tag', name: 'job', component: blank },
    ],
  });
  await router.push('/shop/rail');
  const page = mount(FindTag, { global: { plugins: [router] } });
  await page.get('input').setValue(typed);
  await page.get('form').trigger('submit');
  await flushPromises();
  return { path: router.currentRoute.value.path, words: page.text() };
}

describe('a tag that no longer hangs on the Rail', () => {
  it('is found by its code, typed as it stands on the paper', async () => {
    const code = drawCode((n) => n - 1);
    const asPrinted = `${code.slice(0, 3)}-${code.slice(3)}`.toLowerCase();
    expect((await find(` ${asPrinted} `)).path).toBe(`/shop/jobs/${code}`);
  });

  it.each(['', '7K4', 'ABC-123'])(
    'with %j as its code it is not looked for, and the field says why',
    async (typed) => {
      const { path, words } = await find(typed);
      expect(path).toBe('/shop/rail');
      expect(words).toContain('Check the code: three and three, as on the tag.');
    },
  );
});
