/** The customer hears the bell, writes back, ends the texts, and collects. */
import { expect, type Page } from '@playwright/test';
import { letPass } from '../support/clock';
import { form, hangsOn, openSheet, putOn, section } from '../support/floor';
import { openMail } from '../support/inbox';
import { stopWork } from './rail';
import type { Story } from './story';

/** The link in the ready text leads to a stub that says so. */
export async function hearsTheBell(story: Story): Promise<void> {
  const [first, , third] = story.machines;
  const stub = await story.phone.tapLink(new RegExp(`No\\. ${first.number} is ready`));
  const coupon = stub.getByRole('region', { name: `No. ${first.number}`, exact: true });
  await expect(coupon.getByRole('heading', { level: 2 })).toHaveText('Ready');
  const other = stub.getByRole('region', { name: `No. ${third.number}`, exact: true });
  await expect(other.getByRole('heading', { level: 2 })).not.toHaveText('Ready');
  await stub.close();
}

/** A text that nobody can answer yet is shown on Gate. */
export async function writesBack(page: Page, story: Story): Promise<void> {
  const words = `Can I come at ten to five with trailer ${story.machines[0].number}?`;
  await story.phone.answer(words);
  await page.goto('/shop/gate');
  const texts = page.getByRole('region', { name: 'Unanswered texts' });
  await expect(texts.getByRole('listitem').filter({ hasText: words })).toContainText(story.customer.name);
}

/** STOP is honoured: the next notice, of the third machine, comes by e-mail alone. */
export async function endsTexts(page: Page, story: Story): Promise<void> {
  await story.phone.answer('STOP');
  await openSheet(page, story.tags[2]);
  await expect(section(page, 'People')).toContainText('Asked to stop texts');
  const before = await story.phone.count();
  await page.goto('/shop/rail');
  await stopWork(page, story.tags[2], 'Given back', 'Nora wants it back today');
  await hangsOn(page, story.tags[2], 'Ready');
  await letPass(61);
  const letter = await openMail(page, story.customer.email, /To be picked up/);
  await expect(letter.locator('[data-mail-text]')).toContainText('Given back as it is');
  await letter.close();
  expect(await story.phone.count(), 'no text after STOP').toBe(before);
}

/** Hand-over: three signed lines, then the e-mail to the manager. */
export async function collects(page: Page, story: Story): Promise<void> {
  const [tag] = story.tags;
  await page.goto('/shop/rail');
  await putOn(page, tag, 'Collected');
  const dialog = form(page, /to Collected$/);
  await dialog.getByLabel('How it was handed over, and what went with it').fill('Walked round it together');
  await dialog.getByLabel('Who collected').fill('Ray Colter, white pick-up');
  await dialog.getByLabel('How it was paid, or which terms').fill('Paid by card at the counter');
  await dialog.getByRole('button', { name: 'Move to Collected' }).click();
  await expect(dialog.getByText('Type the sum, like 236.40.')).toBeVisible();
  await dialog.getByLabel('Sum paid or put on terms').fill('118.20');
  await dialog.getByRole('button', { name: 'Move to Collected' }).click();
  await hangsOn(page, tag, 'Collected');
  await letPass(61);
  const letter = await openMail(page, story.customer.email, /Collected/);
  await expect(letter.locator('[data-mail-text]')).toContainText(`No. ${story.machines[0].number}`);
  await letter.close();
}

/** The link at the foot of an e-mail ends e-mails, and only after a tap that says so. */
export async function endsMails(page: Page, story: Story): Promise<void> {
  const letter = await openMail(page, story.customer.email, /Collected/);
  const address = await letter.locator('[data-mail-text] a[href*="/u/"]').getAttribute('href');
  await letter.goto(address ?? '');
  await expect(letter.getByRole('heading', { level: 1, name: 'No more e-mails?' })).toBeVisible();
  await letter.getByRole('button', { name: 'Stop these e-mails' }).click();
  await expect(letter.getByRole('heading', { level: 1, name: 'Done. No more e-mails.' })).toBeVisible();
  await letter.reload();
  await expect(letter.getByRole('heading', { level: 1, name: 'Done. No more e-mails.' })).toBeVisible();
  await letter.close();
}
