/** Nothing that is typed on Book is lost: not by a reload, by going back, by a server that fails, nor by a full time. */
import type { Page } from '@playwright/test';
import {
  askForCode,
  bookWith,
  chooseTime,
  openBook,
  sayWho,
  threeMachines,
  writeMachines,
} from './support/booking';
import { asTyped, newCustomer } from './support/people';
import { Phone } from './support/phone';
import { expect, test } from './support/test';
import type { TimesView } from '#shared/schemas/shop';

const [first, second] = threeMachines('K');

async function holdsMachines(page: Page): Promise<void> {
  for (const machine of [first, second]) {
    const tag = page.getByRole('group', { name: `No. ${machine.number}`, exact: true });
    await expect(tag.getByLabel('Maker')).toHaveValue(machine.maker);
    await expect(tag.getByLabel('In your words')).toHaveValue(machine.words);
    await expect(tag.getByRole('radio', { name: machine.complaint, exact: true })).toBeChecked();
  }
  await expect(page.getByRole('radio', { name: 'Your time' })).toBeChecked();
}

async function holdsWho(page: Page, who: ReturnType<typeof newCustomer>): Promise<void> {
  await expect(page.getByLabel('Your name')).toHaveValue(who.name);
  await expect(page.getByLabel('Mobile phone')).toHaveValue(asTyped(who.phone));
  await expect(page.getByRole('textbox', { name: 'E-mail' })).toHaveValue(who.email);
  await expect(page.getByRole('checkbox', { name: /^Text me/ })).toBeChecked();
}

test('a reload and the way back keep what was typed', async ({ page }) => {
  const who = newCustomer();
  await openBook(page);
  await writeMachines(page, [first, second]);
  await chooseTime(page);
  await page.reload();
  await holdsMachines(page);
  await sayWho(page, who);
  await page.reload();
  await holdsWho(page, who);
  await page.goBack();
  await holdsMachines(page);
  await page.goForward();
  await holdsWho(page, who);
});

test('a server that fails is said in words, and the next try goes through', async ({ page, watch }) => {
  const who = newCustomer();
  await openBook(page);
  await writeMachines(page, [first, second]);
  await chooseTime(page);
  await sayWho(page, who);
  watch.allow(/^503 POST .*\/codes$/);
  watch.allow(/ERR_FAILED POST .*\/codes$/);
  const codes = '**/api/shops/*/codes';
  await page.route(codes, (route) => route.fulfill({ status: 503, body: 'gone' }));
  await page.getByRole('button', { name: 'Text me the code' }).click();
  await expect(page.getByRole('alert')).toContainText(/\S/);
  await holdsWho(page, who);
  await page.unroute(codes);
  await page.route(codes, (route) => route.abort());
  await page.getByRole('button', { name: 'Text me the code' }).click();
  await expect(page.getByRole('alert')).toContainText('No answer from the shop');
  await holdsWho(page, who);
  await page.unroute(codes);
  await askForCode(page);
});

test('a time that has filled up offers the next ones, and books at one of them', async ({ page, watch }) => {
  const who = newCustomer();
  await openBook(page);
  await writeMachines(page, [first, second]);
  const chosen = await chooseTime(page);
  await sayWho(page, who);
  await askForCode(page);
  const phone = await Phone.open(page, who.phone);
  const code = await phone.code();

  watch.allow(/^409 POST .*\/bookings$/);
  const next = await nextTimes(page, chosen);
  await page.route(
    '**/api/shops/*/bookings',
    (route) => route.fulfill({ status: 409, json: filledUp(next) }),
    {
      times: 1,
    },
  );
  await page.getByLabel('Six digits').fill(code);
  await page.getByRole('button', { name: 'Book it' }).first().click();
  const offer = page.getByRole('alert').filter({ hasText: 'This time has just filled up.' });
  await offer.getByRole('button').first().click();
  await expect(page.getByLabel('Six digits')).toHaveValue(code);
  await bookWith(page, code);
  const stub = page.getByRole('region', { name: 'Claim stub' });
  for (const machine of [first, second]) await expect(stub).toContainText(`No. ${machine.number}`);
});

async function nextTimes(page: Page, after: Date): Promise<string[]> {
  const answer = await page.request.get('/api/shops/cinder-flat/times?machines=2');
  const { days } = (await answer.json()) as TimesView;
  const times = days.flatMap((day) => day.times).filter(({ at, full }) => new Date(at) > after && !full);
  return times.slice(0, 3).map(({ at }) => at);
}

const filledUp = (next: string[]) => ({
  error: {
    code: 'times_full',
    message: 'This time has just filled up.',
    requestId: 'none',
    details: { next },
  },
});
