/** The shop takes the three machines in, one by one. */
import { expect, type Locator, type Page } from '@playwright/test';
import { letPass, setShopClock } from '../support/clock';
import { form, signInStaff } from '../support/floor';
import type { Story } from './story';

const MINUTE_MS = 60_000;

/** On the day of the visit: each machine with its tag and who brought it; one text for all three. */
export async function takesIn(page: Page, story: Story): Promise<void> {
  await setShopClock(new Date(story.arrives.getTime() + 2 * MINUTE_MS));
  const before = await story.phone.count();
  await signInStaff(page, 'Rosa', 'gate');
  const visit = page
    .getByRole('listitem')
    .filter({ has: page.getByRole('heading', { name: story.customer.company }) });
  const [first, second, third] = story.machines;
  await checkIn(page, visit, first.number, (dialog) =>
    dialog.getByRole('radio', { name: story.customer.name }).check(),
  );
  await checkIn(page, visit, second.number, (dialog) =>
    dialog.getByRole('radio', { name: story.customer.name }).check(),
  );
  await checkIn(page, visit, third.number, async (dialog) => {
    await dialog.getByRole('radio', { name: 'Someone else' }).check();
    await dialog.getByLabel('Name, if someone else').fill('Ray Colter');
  });
  await expect(visit.getByText(/^In \d/)).toHaveCount(3);

  await letPass(61);
  const text = await story.phone.read(/we have/);
  for (const machine of story.machines) expect(text).toContain(machine.number);
  expect(await story.phone.count(), 'three check-ins make one text').toBe(before + 1);
}

async function checkIn(
  page: Page,
  visit: Locator,
  number: string,
  fill: (dialog: Locator) => Promise<void>,
): Promise<void> {
  await visit.getByRole('button', { name: new RegExp(`^Check in .*No\\. ${number}$`) }).click();
  const dialog = form(page, /^Check in/);
  await dialog.getByRole('button', { name: 'Check in', exact: true }).click();
  await expect(dialog.getByText('Say who brought it.')).toBeVisible();
  await fill(dialog);
  await dialog.getByRole('checkbox', { name: /^Tank bled to zero/ }).check();
  await dialog.getByRole('checkbox', { name: /^Fuel off/ }).check();
  await dialog.getByRole('button', { name: 'Check in', exact: true }).click();
  await expect(dialog).toBeHidden();
}
