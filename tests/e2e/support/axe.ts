import AxeBuilder from '@axe-core/playwright';
import { expect, type Page } from '@playwright/test';

/** What axe can see of WCAG 2.2, levels A and AA. */
const WCAG = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'];

/** Notes every violation that axe sees on the page as it stands; the test goes on to the next page. */
export async function expectAccessible(page: Page, what: string): Promise<void> {
  await page.evaluate(() => document.fonts.ready);
  const { violations } = await new AxeBuilder({ page }).withTags(WCAG).analyze();
  const found = violations.flatMap(({ id, nodes }) =>
    nodes.map(({ target, failureSummary }) => `${id} at ${target.join(' ')}: ${failureSummary ?? ''}`),
  );
  expect.soft(found, what).toEqual([]);
}

/** Opens a page and looks at it once it has its words. */
export async function look(page: Page, path: string, what: string): Promise<void> {
  await page.goto(path, { waitUntil: 'networkidle' });
  await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
  await expectAccessible(page, what);
}
