/** A customer who reads Spanish meets Spanish, on every page, in every text and in every e-mail. */
import type { Page } from '@playwright/test';
import { shop } from './support/addresses';
import { signInStaff } from './support/floor';
import { openMail } from './support/inbox';
import { asTyped, newCustomer } from './support/people';
import { Phone } from './support/phone';
import { answerLinks, jobIn, placesOf, stubPathOf } from './support/places';
import { expect, test } from './support/test';
import { onlyIn, words } from './support/words';

test.use({ locale: 'es-US' });

const say = (key: string) => words('es', key);
const english = onlyIn('en');
// A language is called by its own name.
english.delete('Español');

/** Lines on screen, and what screen readers are told, that are English and not Spanish. */
async function readsSpanish(page: Page, what: string): Promise<void> {
  await expect(page.locator('html')).toHaveAttribute('lang', 'es');
  const said = await page.evaluate(() => [
    document.title,
    ...document.body.innerText.split('\n'),
    ...[...document.querySelectorAll('[aria-label], [placeholder], [alt]')].flatMap((element) =>
      ['aria-label', 'placeholder', 'alt'].map((name) => element.getAttribute(name) ?? ''),
    ),
  ]);
  const lines = said.map((line) => line.trim());
  expect
    .soft(
      lines.filter((line) => english.has(line)),
      what,
    )
    .toEqual([]);
}

test('every public page and the stub', async ({ page, another, watch }) => {
  watch.allow(/^404 GET \/nowhere\/at\/all$/);
  await answerLinks(page);
  const staff = await another();
  await signInStaff(staff, 'Rosa');
  for (const { name, path } of placesOf('AAAAAA').filter(({ isStaff }) => !isStaff)) {
    await page.goto(path, { waitUntil: 'networkidle' });
    await readsSpanish(page, name);
  }
  for (const stage of ['booked', 'awaiting_approval', 'ready']) {
    await page.goto(await stubPathOf(staff, await jobIn(staff, stage)), { waitUntil: 'networkidle' });
    await page.getByRole('radio', { name: 'Español' }).check();
    await page.locator('summary').first().click();
    await readsSpanish(page, `stub, ${stage}`);
  }
});

test('the language of the page is one tap away, and is kept', async ({ page }) => {
  await page.goto(`/s/${shop}`);
  await readsSpanish(page, 'welcome');
  await page.getByRole('button', { name: 'English' }).click();
  await expect(page.locator('html')).toHaveAttribute('lang', 'en');
  await page.goto(`/s/${shop}/book`);
  await expect(page.getByRole('heading', { level: 1, name: 'Which machines are coming?' })).toBeVisible();
});

test('a booking in Spanish is answered in Spanish', async ({ page }) => {
  const { name, company, phone, email } = newCustomer();
  await page.goto(`/s/${shop}/book`);
  await page.getByRole('textbox', { name: say('book.new.fleetNumber') }).fill('S1');
  const kinds = page.getByRole('radiogroup', { name: say('book.what_is_wrong') });
  await kinds.getByRole('radio').first().check();
  const days = page.getByRole('group', { name: say('book.time.day'), exact: true }).getByRole('button');
  if ((await days.count()) > 0) await days.last().click();
  const times = page.getByRole('radiogroup', { name: say('book.time.head') });
  await times.getByRole('radio').last().check();
  await page.getByRole('button', { name: say('book.next_who') }).click();
  await page.getByRole('textbox', { name: say('book.who.name') }).fill(name);
  await page.getByRole('textbox', { name: say('book.who.account') }).fill(company);
  await page.getByRole('textbox', { name: say('book.who.phone') }).fill(asTyped(phone));
  await page.getByRole('textbox', { name: say('book.who.email') }).fill(email);
  await page.getByRole('checkbox', { name: new RegExp(`^${say('book.consent_head')}`) }).check();
  await readsSpanish(page, 'who');
  await page.getByRole('button', { name: say('book.next_code') }).click();
  const device = await Phone.open(page, phone);
  await page.getByLabel(say('book.code.label')).fill(await device.code());
  await readsSpanish(page, 'check and book');
  await page
    .getByRole('button', { name: say('book.book_it') })
    .first()
    .click();
  await expect(page.getByRole('heading', { level: 1, name: say('book.done.head') })).toBeVisible();
  await readsSpanish(page, 'confirmation');
  expect(await device.read(/ficha/i)).not.toMatch(/\b(booked|machine|stub|reply)\b/i);
  const letter = await openMail(page, email, /./);
  await expect(letter.locator('[data-mail-text]')).toContainText('Ficha');
  await expect(letter.locator('[data-mail-text]')).not.toContainText(
    /\b(Hello|booked|machines?|unsubscribe)\b/,
  );
});
