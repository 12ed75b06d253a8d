/** Axe finds no violation of WCAG 2.2 AA wherever the public comes: light and dark, both languages, both widths. */
import { shop } from './support/addresses';
import { expectAccessible, look } from './support/axe';
import { signInStaff } from './support/floor';
import { asTyped, newCustomer } from './support/people';
import { answerLinks, jobIn, placesOf, stubPathOf } from './support/places';
import { expect, test } from './support/test';
import { words, type Language } from './support/words';

// Paint does not hang on the language, so that each is looked at by day and one of them by night.
const LOOKS: { colorScheme: 'light' | 'dark'; language: Language; locale: string }[] = [
  { colorScheme: 'light', language: 'en', locale: 'en-US' },
  { colorScheme: 'light', language: 'es', locale: 'es-US' },
  { colorScheme: 'dark', language: 'en', locale: 'en-US' },
];

for (const { colorScheme, language, locale } of LOOKS) {
  test.describe(`${colorScheme}, ${language}`, () => {
    test.use({ colorScheme, locale, contextOptions: { reducedMotion: 'reduce' } });

    test('every public page', async ({ page, watch }) => {
      watch.allow(/^404 GET \/nowhere\/at\/all$/);
      await answerLinks(page);
      for (const place of placesOf('AAAAAA').filter(({ isStaff }) => !isStaff)) {
        await test.step(place.name, () => look(page, place.path, place.name));
        await expect(page.locator('html')).toHaveAttribute('lang', language);
      }
    });

    test('every step of a booking', async ({ page }) => {
      const say = (key: string) => words(language, key);
      const { name, company, phone, email } = newCustomer();
      await page.goto(`/s/${shop}/book`);
      await page.getByRole('button', { name: say('book.next_who') }).click();
      await expect(
        page
          .getByRole('group', { name: say('book.what_is_wrong') })
          .or(page.locator('[aria-invalid]'))
          .first(),
      ).toBeVisible();
      await expectAccessible(page, 'machines and time, with faults');
      await page
        .getByRole('radiogroup', { name: say('book.what_is_wrong') })
        .getByRole('radio')
        .first()
        .check();
      await page
        .getByRole('radiogroup', { name: say('book.time.head') })
        .getByRole('radio')
        .first()
        .check();
      await expectAccessible(page, 'machines and time, chosen');
      await page.getByRole('button', { name: say('book.next_who') }).click();
      await page.getByRole('button', { name: say('book.next_code') }).click();
      await expect(page.getByText(say('errors.field.required')).first()).toBeVisible();
      await expectAccessible(page, 'who, with faults');
      await page.getByRole('textbox', { name: say('book.who.name') }).fill(name);
      await page.getByRole('textbox', { name: say('book.who.account') }).fill(company);
      await page.getByRole('textbox', { name: say('book.who.phone') }).fill(asTyped(phone));
      await page.getByRole('textbox', { name: say('book.who.email') }).fill(email);
      await page.getByRole('button', { name: say('book.next_code') }).click();
      await expect(page.getByRole('heading', { level: 1, name: say('book.check.head') })).toBeVisible();
      await page
        .getByRole('button', { name: say('book.book_it') })
        .first()
        .click();
      await expect(page.getByText(say('errors.field.six_digits'))).toBeVisible();
      await expectAccessible(page, 'check and book, with faults');
    });

    test('stubs in every state', async ({ page, another, watch }) => {
      const staff = await another();
      await signInStaff(staff, 'Rosa');
      for (const stage of ['booked', 'checked_in', 'test_run', 'ready']) {
        await look(page, await stubPathOf(staff, await jobIn(staff, stage)), `stub, ${stage}`);
        await page.locator('summary').first().click();
        await expectAccessible(page, `stub, ${stage}, with its history`);
      }
      await staff.context().close();
      await page.context().setOffline(true);
      watch.allow(/ERR_INTERNET_DISCONNECTED/);
      await page.evaluate(() => window.dispatchEvent(new Event('online')));
      await expect(page.getByRole('status')).toContainText(/No signal|Sin señal/);
      await expectAccessible(page, 'stub without a signal');
      await page.context().setOffline(false);
      watch.allow(/^404 GET \/api\/t\//);
      await look(page, '/t/AAAAAAAAAAAAAAAAAAAAAA', 'unknown stub');
    });
  });
}
