/** What a reader without a pointer relies on. */
import { shop } from './support/addresses';
import { form, signInStaff, tagOf, tray } from './support/floor';
import { focusIn } from './support/keyboard';
import { jobIn } from './support/places';
import { formatCode } from '#shared/domain/tagCode';
import { expect, test } from './support/test';

test('the first Tab offers the way past the head of the page', async ({ page }) => {
  await page.goto(`/s/${shop}`);
  await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
  await page.keyboard.press('Tab');
  await expect(page.getByRole('link', { name: 'Skip to the page' })).toBeFocused();
  await page.keyboard.press('Enter');
  await expect(page.getByRole('main')).toBeFocused();
});

test('a new page is read from its heading', async ({ page }) => {
  await page.goto(`/s/${shop}`);
  await focusIn(page, page.getByRole('link', { name: 'Book the bench' }));
  await page.keyboard.press('Enter');
  await expect(page.getByRole('heading', { level: 1, name: 'Which machines are coming?' })).toBeFocused();
  await page.goBack();
  await expect(page.getByRole('heading', { level: 1, name: /^Book the bench/ })).toBeFocused();
});

test('Escape puts a tag back, and the keyboard with it', async ({ page }) => {
  await signInStaff(page, 'Marta');
  const { job } = await jobIn(page, 'diagnosis');
  const tag = tagOf(page, formatCode(job.tag));
  await tag.focus();
  await page.keyboard.press('Enter');
  await expect(tray(page).getByRole('button').first()).toBeFocused();
  await page.keyboard.press('Escape');
  await expect(tray(page)).toBeHidden();
  await expect(tag).toBeFocused();
});

test('a form in front of the page keeps the keyboard and lets go at Escape', async ({ page }) => {
  await signInStaff(page, 'Marta');
  const { job } = await jobIn(page, 'checked_in');
  await tagOf(page, formatCode(job.tag)).focus();
  await page.keyboard.press('Enter');
  await focusIn(page, tray(page).getByRole('button', { name: 'Diagnosis' }));
  await page.keyboard.press('Enter');
  const dialog = form(page, /to Diagnosis$/);
  await expect(dialog).toBeVisible();
  for (let presses = 0; presses < 12; presses += 1) {
    await page.keyboard.press('Tab');
    const isOutside = await page.evaluate(() => {
      const at = document.activeElement;
      return at !== null && at !== document.body && at.closest('[role=dialog]') === null;
    });
    expect(isOutside, 'Tab never reaches the page behind').toBe(false);
  }
  await page.keyboard.press('Escape');
  await expect(dialog).toBeHidden();
});
