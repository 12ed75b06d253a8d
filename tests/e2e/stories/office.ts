/** The office of a roofing company books a drop-off for three machines. */
import { expect, type Page } from '@playwright/test';
import {
  askForCode,
  bookWith,
  chooseTime,
  openBook,
  sayWho,
  threeMachines,
  writeMachines,
} from '../support/booking';
import { openMail } from '../support/inbox';
import { newCustomer } from '../support/people';
import { Phone } from '../support/phone';
import type { Story } from './story';

const CODE = /^[2-9A-Z]{3}-[2-9A-Z]{3}$/;

/** Books, and reads text and e-mail that say so. */
export async function officeBooks(page: Page, prefix: string): Promise<Story> {
  const customer = newCustomer();
  const machines = threeMachines(prefix);
  await openBook(page);
  await writeMachines(page, machines);
  const arrives = await chooseTime(page);
  await sayWho(page, customer);
  await askForCode(page);
  const phone = await Phone.open(page, customer.phone);
  await bookWith(page, await phone.code());

  const stub = page.getByRole('region', { name: 'Claim stub' });
  const codes = (await stub.locator('.code').allInnerTexts()).map((code) => code.trim());
  expect(codes).toHaveLength(4);
  for (const code of codes) expect(code).toMatch(CODE);
  const [stubCode = '', ...tags] = codes;
  for (const machine of machines) await expect(stub).toContainText(`No. ${machine.number}`);
  const story: Story = { customer, phone, machines, tags: tags as Story['tags'], stubCode, arrives };
  await hearsOfBooking(page, story);
  return story;
}

async function hearsOfBooking(page: Page, story: Story): Promise<void> {
  const text = await story.phone.read(/3 machines booked for/);
  expect(text).toContain(`Stub ${story.stubCode}`);
  const letter = await openMail(page, story.customer.email, /Booked/);
  await expect(letter.locator('[data-mail-text]')).toContainText('these 3 machines');
  await expect(letter.getByRole('heading', { name: 'Calendar entry' })).toBeVisible();
  await expect(letter.locator('[data-calendar-what]')).toContainText('Drop-off at Cinder Flat');
  await expect(letter.locator('[data-calendar-where]')).toContainText('418 Flatiron Road');
  await letter.close();
}
