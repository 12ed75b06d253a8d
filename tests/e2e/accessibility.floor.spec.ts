/** Axe finds no violation of WCAG 2.2 AA on the shop floor, nor on what opens there: light and dark, both widths. */
import { formatCode } from '#shared/domain/tagCode';
import { expectAccessible, look } from './support/axe';
import { form, putOn, signInStaff, tagOf, tray } from './support/floor';
import { jobIn, placesOf } from './support/places';
import { expect, test } from './support/test';

for (const colorScheme of ['light', 'dark'] as const) {
  test.describe(`${colorScheme}, shop floor`, () => {
    test.use({ colorScheme, contextOptions: { reducedMotion: 'reduce' } });

    test('every staff page, with what opens on it', async ({ page }) => {
      await signInStaff(page, 'Wes');
      const ready = await jobIn(page, 'ready');
      for (const place of placesOf(ready.job.tag).filter(({ isStaff }) => isStaff)) {
        await test.step(place.name, () => look(page, place.path, place.name));
      }
      await page.locator('details.person summary').click();
      await expectAccessible(page, 'the menu of a person');
    });

    test('tray and forms on the Rail', async ({ page }) => {
      await signInStaff(page, 'Wes');
      const { job } = await jobIn(page, 'test_run');
      const code = formatCode(job.tag);
      await tagOf(page, code).click();
      await expectAccessible(page, 'the tray');
      await tray(page).getByRole('button', { name: 'Other rail' }).click();
      await expectAccessible(page, 'the tray with every rail');
      await tray(page).getByRole('button', { name: 'Put back' }).click();
      await putOn(page, code, 'Ready');
      const ending = form(page, /to Ready$/);
      await ending.getByRole('radio', { name: 'Repaired', exact: true }).check();
      await ending.getByRole('button', { name: 'Ring the bell' }).click();
      await expect(ending.locator('[aria-invalid=true]').first()).toBeFocused();
      await expectAccessible(page, 'how it ends, with faults');
    });

    test('check-in, correction and the end of texts', async ({ page }) => {
      await signInStaff(page, 'Wes');
      const { job: booked } = await jobIn(page, 'booked');
      await putOn(page, formatCode(booked.tag), 'Checked in');
      const dialog = form(page, /^Check in/);
      await dialog.getByRole('checkbox', { name: 'Hang a blank tag instead' }).check();
      await dialog.getByRole('button', { name: 'Check in', exact: true }).click();
      await expectAccessible(page, 'check-in, with faults');
      const { job: ready } = await jobIn(page, 'ready');
      await page.goto(`/shop/jobs/${ready.tag}`);
      await page.getByRole('button', { name: 'Correct', exact: true }).click();
      await form(page, /^Correct/)
        .getByRole('button')
        .last()
        .click();
      await expectAccessible(page, 'correction, with faults');
      await page.keyboard.press('Escape');
      await page.getByRole('button', { name: 'Customer asked to stop texts' }).first().click();
      await expectAccessible(page, 'stop texts');
    });
  });
}
