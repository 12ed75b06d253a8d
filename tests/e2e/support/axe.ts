import AxeBuilder from '@axe-core/playwright';
import { expect, type Page } from '@playwright/test';

/** What axe can see of WCAG 2.2, levels A and AA. */
const WCAG = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'];

/**
 * Makes the screen as long as its page. At one place of scrolling the bars at the foot lie over something, and axe takes
 * it for too small; a reader scrolls it clear.
 */
async function unroll(page: Page): Promise<() => Promise<void>> {
  const size = page.viewportSize();
  if (!size) return () => Promise.resolve();
  const height = await page.evaluate(() => document.documentElement.scrollHeight);
  await page.setViewportSize({ ...size, height: Math.max(size.height, height) });
  return () => page.setViewportSize(size);
}

/** Notes every violation that axe sees on the page as it stands; the test goes on to the next page. */
export async function expectAccessible(page: Page, what: string): Promise<void> {
  await page.evaluate(() => document.fonts.ready);
  const rollUp = await unroll(page);
  const { violations } = await new AxeBuilder({ page }).withTags(WCAG).analyze();
  await rollUp();
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
