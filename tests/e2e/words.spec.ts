/** Wrong input is said in words, beside its field, in the reader's language. */
import { shop } from './support/addresses';
import { expect, test } from './support/test';
import { words } from './support/words';

for (const { language, locale } of [
  { language: 'en', locale: 'en-US' },
  { language: 'es', locale: 'es-US' },
] as const) {
  test.describe(language, () => {
    test.use({ locale });
    const say = (key: string) => words(language, key);

    test('who books', async ({ page }) => {
      await page.goto(`/s/${shop}/book`);
      await page.getByRole('button', { name: say('book.next_who') }).click();
      const kinds = page.getByRole('radiogroup', { name: say('book.what_is_wrong') });
      await expect(kinds).toHaveAccessibleDescription(/\S/);
      await kinds.getByRole('radio').first().check();
      await page
        .getByRole('radiogroup', { name: say('book.time.head') })
        .getByRole('radio')
        .first()
        .check();
      await page.getByRole('button', { name: say('book.next_who') }).click();

      const field = (key: string) => page.getByRole('textbox', { name: say(key) });
      await field('book.who.phone').fill('123');
      await field('book.who.email').fill('nora at home');
      await page.getByRole('button', { name: say('book.next_code') }).click();
      await expect(field('book.who.name')).toHaveAccessibleDescription(say('errors.field.required'));
      await expect(field('book.who.name')).toBeFocused();
      await expect(field('book.who.phone')).toHaveAccessibleDescription(
        new RegExp(escaped(say('errors.field.phone'))),
      );
      await expect(field('book.who.email')).toHaveAccessibleDescription(
        new RegExp(escaped(say('errors.field.email'))),
      );
      await expect(field('book.who.phone')).toHaveValue('123');
    });

    test('stub code and sign-in', async ({ page, watch }) => {
      await page.goto(`/s/${shop}`);
      await page.getByLabel(say('welcome.find_last_four')).fill('12');
      await page.getByRole('button', { name: say('welcome.find_act') }).click();
      await expect(page.getByLabel(say('welcome.find_code'))).toHaveAccessibleDescription(
        say('errors.field.required'),
      );
      await expect(page.getByLabel(say('welcome.find_last_four'))).toHaveAccessibleDescription(
        say('errors.field.last_four'),
      );
      await page.goto(`/s/${shop}/sign-in`);
      await page.getByLabel(say('signin.phone')).fill('555');
      await page.getByRole('button', { name: say('signin.ask') }).click();
      await expect(page.getByLabel(say('signin.phone'))).toHaveAccessibleDescription(
        say('errors.field.phone'),
      );
      watch.allow(/^401 POST .*\/sign-in\/password$/);
      await page.getByLabel(say('signin.email')).fill('nobody@example.com');
      await page.getByLabel(say('signin.password'), { exact: true }).fill('a guess that is long enough');
      await page.getByRole('button', { name: say('signin.sign_in') }).click();
      await expect(page.getByRole('alert')).toContainText(say('errors.sign_in_failed'));
      await expect(page.getByLabel(say('signin.email'))).toHaveValue('nobody@example.com');
    });
  });
}

const escaped = (text: string): string => text.replace(/[.*+?^${}()|[\]\\]/g, '\\$&');
