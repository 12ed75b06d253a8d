import { expect, type Page } from '@playwright/test';
import { mail } from './addresses';

/**
 * Opens the latest mail to an address whose subject says this, as soon as it has come.
 * @returns the page that shows the mail
 */
export async function openMail(beside: Page, to: string, subject: RegExp): Promise<Page> {
  const page = await beside.context().newPage();
  const link = page
    .getByRole('list', { name: /^Mails/ })
    .getByRole('link', { name: subject })
    .first();
  await expect(async () => {
    await page.goto(`${mail}/?to=${encodeURIComponent(to)}`);
    await expect(link).toBeVisible({ timeout: 2_000 });
  }).toPass({ timeout: 45_000 });
  await link.click();
  return page;
}
