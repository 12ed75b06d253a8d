/** Pages fit their screen, down to the narrowest that WCAG asks for, and load their letters from the server. */
import type { Page } from '@playwright/test';
import { formatCode } from '#shared/domain/tagCode';
import { shop, web } from './support/addresses';
import { form, putOn, signInStaff, tagOf } from './support/floor';
import { answerLinks, jobIn, placesOf, stubPathOf } from './support/places';
import { expect, test } from './support/test';

const NARROWEST = 320;

/** The widths in question; a phone's own window grows with what does not fit, so the asked width is what counts. */
async function fits(page: Page, width: number, what: string): Promise<void> {
  const reach = await page.evaluate(() => document.documentElement.scrollWidth);
  expect.soft(reach, `${what} at ${width} px`).toBeLessThanOrEqual(width);
}

/** At the screen's own width, and at the narrowest. */
async function fitsBoth(page: Page, what: string): Promise<void> {
  const size = page.viewportSize() ?? { width: 0, height: 0 };
  await fits(page, size.width, what);
  await page.setViewportSize({ width: NARROWEST, height: 640 });
  await fits(page, NARROWEST, what);
  await page.setViewportSize(size);
}

test('no page reaches beyond the screen', async ({ page, watch }) => {
  watch.allow(/^404 GET \/nowhere\/at\/all$/);
  await signInStaff(page, 'Wes');
  await answerLinks(page);
  const ready = await jobIn(page, 'ready');
  const stub = { name: 'stub', path: await stubPathOf(page, ready) };
  for (const { name, path } of [...placesOf(ready.job.tag), stub]) {
    await page.goto(path, { waitUntil: 'networkidle' });
    await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
    await fitsBoth(page, name);
  }
});

test('neither does what opens on the Rail', async ({ page }) => {
  await signInStaff(page, 'Wes');
  const { job } = await jobIn(page, 'test_run');
  await tagOf(page, formatCode(job.tag)).click();
  await fitsBoth(page, 'tray');
  await page.keyboard.press('Escape');
  await putOn(page, formatCode(job.tag), 'Ready');
  await expect(form(page, /to Ready$/)).toBeVisible();
  await fitsBoth(page, 'form');
});

test('letters come from the server and are the ones of the design', async ({ page }) => {
  const fonts: string[] = [];
  page.on('request', (request) => {
    if (request.resourceType() === 'font') fonts.push(new URL(request.url()).origin);
  });
  await page.goto(`/s/${shop}`, { waitUntil: 'networkidle' });
  await page.evaluate(() => document.fonts.ready);
  expect(new Set(fonts)).toEqual(new Set([web]));
  const loaded = await page.evaluate(() =>
    [...document.fonts].filter(({ status }) => status === 'loaded').map(({ family }) => family),
  );
  expect(loaded.join()).toContain('Nunito');
  const family = await page
    .getByRole('heading', { level: 1 })
    .evaluate((h1) => getComputedStyle(h1).fontFamily);
  expect(family).toMatch(/^"?Nunito/);
});
