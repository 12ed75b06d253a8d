import { expect, type Locator, type Page } from '@playwright/test';
import { shop } from './addresses';
import { shopNow } from './clock';
import type { newCustomer } from './people';
import { asTyped } from './people';

export interface NewMachine {
  number: string;
  maker: string;
  model: string;
  complaint: string;
  words: string;
}

/** The office's three machines; each test writes other numbers on them. */
export function threeMachines(prefix: string): [NewMachine, NewMachine, NewMachine] {
  return [
    {
      number: `${prefix}1`,
      maker: 'Ironvale',
      model: 'TW-8',
      complaint: 'No pressure',
      words: 'Stops at 60 psi',
    },
    {
      number: `${prefix}2`,
      maker: 'Corrick',
      model: '9G',
      complaint: "Won't start",
      words: 'Pulls over, no fire',
    },
    {
      number: `${prefix}3`,
      maker: 'Ironvale',
      model: 'TW-5',
      complaint: 'Leaks air',
      words: 'Hisses at the drain',
    },
  ];
}

/** From the shop's front page to Book. */
export async function openBook(page: Page): Promise<void> {
  await page.goto(`/s/${shop}`);
  await page.getByRole('link', { name: 'Book the bench' }).click();
  await expect(page.getByRole('heading', { level: 1, name: 'Which machines are coming?' })).toBeVisible();
}

/** The tag of one machine on Book. */
export const bookingTag = (page: Page, name: string): Locator =>
  page.getByRole('group', { name, exact: true });

/** Writes machines on blank tags; the first one hangs there already. */
export async function writeMachines(page: Page, machines: readonly NewMachine[]): Promise<void> {
  for (const [index, machine] of machines.entries()) {
    if (index > 0) await page.getByRole('button', { name: /^One more/ }).click();
    await writeMachine(bookingTag(page, `Machine ${index + 1}`), machine);
    await expect(bookingTag(page, `No. ${machine.number}`)).toBeVisible();
  }
}

async function writeMachine(blank: Locator, machine: NewMachine): Promise<void> {
  await blank.getByLabel('Number on it').fill(machine.number);
  // From here on the tag is called by its number.
  const tag = bookingTag(blank.page(), `No. ${machine.number}`);
  await tag.getByLabel('Maker').fill(machine.maker);
  await tag.getByLabel('Model').fill(machine.model);
  await tag.getByRole('radio', { name: machine.complaint, exact: true }).check();
  await tag.getByLabel('In your words').fill(machine.words);
}

/** Nobody is woken: quiet hours end at eight. */
const BY_DAY = /, (9:00 am|11:00 am|1:30 pm|3:30 pm) Free$/;

/**
 * Chooses the first free time by day on a later day than today.
 * @returns the instant
 */
export async function chooseTime(page: Page): Promise<Date> {
  const times = page.getByRole('radiogroup', { name: 'When?' });
  await expect(times.getByText(/^(Free|Full)$/).first()).toBeVisible();
  // A phone shows one day at a time.
  const days = page.getByRole('group', { name: 'Day', exact: true }).getByRole('button');
  if ((await days.count()) > 0) await days.nth(1).click();
  const today = (await shopNow()).toISOString().slice(0, 10);
  const offered = times.getByRole('radio', { name: BY_DAY });
  const values = await offered.evaluateAll((radios) =>
    radios.map((radio) => (radio as HTMLInputElement).value),
  );
  const index = values.findIndex((at) => at.slice(0, 10) > today);
  await offered.nth(index).check();
  const at = new Date(values[index] ?? '');
  await expect(page.getByRole('radio', { name: 'Your time' })).toHaveValue(values[index] ?? '');
  return at;
}

type Customer = ReturnType<typeof newCustomer>;

/** Says who comes and how to reach them, texts allowed. */
export async function sayWho(page: Page, who: Customer): Promise<void> {
  await page.getByRole('button', { name: 'Next: who you are' }).click();
  await expect(page.getByRole('heading', { level: 1, name: 'Who is bringing them?' })).toBeFocused();
  await page.getByLabel('Your name').fill(who.name);
  await page.getByLabel('Company').fill(who.company);
  await page.getByLabel('Mobile phone').fill(asTyped(who.phone));
  await page.getByRole('textbox', { name: 'E-mail' }).fill(who.email);
  await page.getByRole('checkbox', { name: /^Text me about my machines/ }).check();
}

/** Asks for the code. */
export async function askForCode(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'Text me the code' }).click();
  await expect(page.getByRole('heading', { level: 1, name: 'Check and book' })).toBeFocused();
}

/** Types the code and books. */
export async function bookWith(page: Page, code: string): Promise<void> {
  await page.getByLabel('Six digits').fill(code);
  await page.getByRole('button', { name: 'Book it' }).first().click();
  await expect(page.getByRole('heading', { level: 1, name: 'Booked.' })).toBeFocused();
}
