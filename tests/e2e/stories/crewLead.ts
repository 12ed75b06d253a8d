/** The crew lead looks where his machine is: by the link in the text, and by the code on the stub. */
import { expect, type Page } from '@playwright/test';
import { shop } from '../support/addresses';
import type { Cast, Story } from './story';

/** Opens the stub from the text, in both languages. */
export async function opensStub(story: Story): Promise<void> {
  const stub = await story.phone.tapLink(/3 machines booked for/);
  await expect(stub.getByRole('heading', { level: 1, name: /^Booked for/ })).toBeVisible();
  for (const machine of story.machines) {
    const coupon = stub.getByRole('region', { name: `No. ${machine.number}`, exact: true });
    await expect(coupon.getByRole('heading', { level: 2 })).toHaveText('Booked');
    await expect(coupon).toContainText(machine.words);
  }
  await stub.getByRole('radio', { name: 'Español' }).check();
  await expect(stub.locator('html')).toHaveAttribute('lang', 'es');
  await expect(stub.getByRole('heading', { level: 1 })).not.toContainText('Booked');
  for (const machine of story.machines) await expect(stub.getByText(machine.words)).toBeVisible();
  await stub.getByRole('radio', { name: 'English' }).check();
  await expect(stub.getByRole('heading', { level: 1, name: /^Booked for/ })).toBeVisible();
  await stub.close();
}

/** Types stub code and last four digits on the shop's front page. */
export async function findsStub(story: Story, { another, watch }: Cast): Promise<void> {
  const page = await another();
  await page.goto(`/s/${shop}`);
  watch.allow(/^404 POST .*\/stubs$/);
  await typeStub(page, story.stubCode, wrongDigits(story.customer.phone));
  await expect(page.getByRole('alert')).toContainText(`We do not know ${story.stubCode}`);
  await typeStub(page, story.stubCode, story.customer.phone.slice(-4));
  await page.waitForURL('**/t/*');
  await expect(page.getByText(story.stubCode)).toBeVisible();
  await page.context().close();
}

async function typeStub(page: Page, code: string, lastFour: string): Promise<void> {
  await page.getByLabel('Stub code').fill(code);
  await page.getByLabel('Last four digits').fill(lastFour);
  await page.getByRole('button', { name: 'Find my machine' }).click();
}

const wrongDigits = (phone: string): string =>
  String((Number(phone.slice(-4)) + 1) % 10_000).padStart(4, '0');
