import { expect, type Locator, type Page } from '@playwright/test';
import { shop } from './addresses';
import { credentials, type StaffName } from './people';

/** Signs a person of the shop in by password, on the way to a staff page. */
export async function signInStaff(page: Page, name: StaffName, to: 'gate' | 'rail' = 'rail'): Promise<void> {
  const { email, password } = credentials(name);
  await page.goto(`/s/${shop}/sign-in?next=/shop/${to}`);
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByLabel('Password', { exact: true }).press('Enter');
  await expect(
    page.getByRole('heading', { level: 1, name: to === 'rail' ? 'The rail' : 'Gate sheet' }),
  ).toBeVisible();
}

/** A stage's rail. */
export const rail = (page: Page, stage: string): Locator =>
  page.getByRole('region', { name: stage, exact: true });

/** A job's tag on the Rail, wherever it hangs. */
export const tagOf = (page: Page, code: string): Locator =>
  page.getByRole('button', { name: new RegExp(`^${code}`) });

/** The tray with the tag in hand. */
export const tray = (page: Page): Locator => page.getByRole('complementary', { name: 'Tag in hand' });

/** What the last move was, with its undo. */
export const lastMove = (page: Page): Locator => page.getByRole('complementary', { name: 'Last move' });

/** A form in front of the page. */
export const form = (page: Page, name: RegExp): Locator => page.getByRole('dialog', { name });

/** Picks a tag up and puts it on a rail, by tap. */
export async function putOn(page: Page, code: string, stage: string): Promise<void> {
  await tagOf(page, code).click();
  await expect(tagOf(page, code)).toHaveAttribute('aria-pressed', 'true');
  const button = tray(page).getByRole('button', { name: new RegExp(`^${stage}`) });
  if ((await button.count()) === 0) await tray(page).getByRole('button', { name: 'Other rail' }).click();
  await button.click();
}

/** The tag hangs on this rail, and is what the keyboard is on. */
export async function hangsOn(page: Page, code: string, stage: string): Promise<void> {
  await expect(rail(page, stage).getByRole('button', { name: new RegExp(`^${code}`) })).toBeVisible();
}

/** Opens a job's sheet. */
export async function openSheet(page: Page, code: string): Promise<void> {
  await page.goto(`/shop/jobs/${code.replace('-', '')}`);
  await expect(page.getByRole('heading', { level: 2, name: 'History' })).toBeVisible();
}

/** One section of the job sheet. */
export const section = (page: Page, name: string): Locator =>
  page.getByRole('region', { name: new RegExp(`^${name}`) });
