import { randomInt } from 'node:crypto';
import { test as base, type Page } from '@playwright/test';
import { web } from './addresses';
import { Watch } from './watch';

interface Fixtures {
  watch: Watch;
  /** Opens a page in a browser of its own: another person on another device, whose language is English. */
  another: () => Promise<Page>;
}

/** Limits count by address and hold in tests as well: every test comes from an address of its own. */
const newAddress = (): string => `10.${randomInt(256)}.${randomInt(256)}.${randomInt(1, 255)}`;

/** Playwright's test in the stack of this run, with every page watched. */
export const test = base.extend<Fixtures>({
  baseURL: web,
  extraHTTPHeaders: async ({ extraHTTPHeaders }, use) => {
    await use({ ...extraHTTPHeaders, 'X-Forwarded-For': newAddress() });
  },
  watch: [
    async ({ context }, use) => {
      const watch = new Watch();
      await watch.over(context);
      await use(watch);
      watch.finish();
    },
    { auto: true },
  ],
  another: async ({ browser, watch }, use) => {
    await use(async () => {
      const extraHTTPHeaders = { 'X-Forwarded-For': newAddress() };
      const context = await browser.newContext({ extraHTTPHeaders, locale: 'en-US' });
      await watch.over(context);
      return context.newPage();
    });
  },
});

export { expect } from '@playwright/test';
