/** The mechanics move jobs from stage to stage: by tap, by keyboard, wrongly, and both at once. */
import { expect, type Locator, type Page } from '@playwright/test';
import { letPass } from '../support/clock';
import {
  form,
  hangsOn,
  lastMove,
  openSheet,
  putOn,
  section,
  signInStaff,
  tagOf,
  tray,
} from '../support/floor';
import { choose, focusIn, walkToTag } from '../support/keyboard';
import type { Cast, Story } from './story';

/** One machine from the gate to the bell, by tap; every guard asks for its line. */
export async function repairsByTap(page: Page, story: Story): Promise<void> {
  const [tag] = story.tags;
  await page.goto('/shop/rail');
  await putOn(page, tag, 'Diagnosis');
  await sign(
    form(page, /to Diagnosis$/),
    'What did you see',
    'Belt guard cracked, wheels sound',
    'Move to Diagnosis',
  );
  await hangsOn(page, tag, 'Diagnosis');
  await putOn(page, tag, 'Awaiting approval');
  await hangsOn(page, tag, 'Awaiting approval');
  await putOn(page, tag, 'Repair');
  await sign(
    form(page, /to Repair$/),
    'Who said yes, how and when',
    'Nora said yes by telephone',
    'Move to Repair',
  );
  await hangsOn(page, tag, 'Repair');
  await putOn(page, tag, 'Test run');
  await hangsOn(page, tag, 'Test run');
  await putOn(page, tag, 'Ready');
  const ending = form(page, /to Ready$/);
  await ending.getByRole('radio', { name: 'Repaired', exact: true }).check();
  await sign(ending, 'What was run, and what it showed', 'Two cycles, 124 to 96 psi', 'Ring the bell');
  await hangsOn(page, tag, 'Ready');
  await expect(lastMove(page)).toContainText(/Text to Nora Beck .*goes? at \d/);
}

/** A blank line does not count; a written one does. */
async function sign(dialog: Locator, label: string, words: string, button: string): Promise<void> {
  await dialog.getByRole('button', { name: button }).click();
  await expect(dialog.getByText('A blank line does not count.')).toBeVisible();
  await dialog.getByLabel(label).fill(words);
  await dialog.getByRole('button', { name: button }).click();
  await expect(dialog).toBeHidden();
}

/** What the job sheet shows while the text waits, and after it has gone. */
export async function readsSheet(page: Page, story: Story): Promise<void> {
  await openSheet(page, story.tags[0]);
  await expect(section(page, 'History')).toContainText('Test run to Ready: Repaired');
  await expect(section(page, 'Signed lines')).toContainText('Two cycles, 124 to 96 psi');
  const ready = section(page, 'Notices')
    .getByRole('listitem')
    .filter({ hasText: /^.*Ready\s*text to/s });
  await expect(ready).toContainText(/Held, goes at \d/);
  await letPass(61);
  await story.phone.read(new RegExp(`No\\. ${story.machines[0].number} is ready`));
  await expect(ready).toContainText('Delivered', { timeout: 30_000 });
}

/** Another machine, from the gate to the bell, without a pointer. */
export async function repairsByKeyboard(page: Page, story: Story): Promise<void> {
  const tag = story.tags[1];
  await page.goto('/shop/rail');
  await walkToTag(page, tag);
  await choose(page, 'Diagnosis');
  await writeByKey(page, /to Diagnosis$/, 'What did you see', 'Pull cord frayed');
  await hangsOn(page, tag, 'Diagnosis');
  await walkToTag(page, tag);
  await choose(page, 'Test run');
  await hangsOn(page, tag, 'Test run');
  await walkToTag(page, tag);
  await choose(page, 'Ready');
  await focusIn(
    page,
    form(page, /to Ready$/)
      .getByRole('radio')
      .first(),
  );
  await page.keyboard.press('Space');
  await writeByKey(page, /to Ready$/, 'What was run, and what it showed', 'Two cycles, all well');
  await hangsOn(page, tag, 'Ready');
  await letPass(61);
  await story.phone.read(new RegExp(`No\\. ${story.machines[1].number} is ready`));
}

async function writeByKey(page: Page, dialog: RegExp, label: string, words: string): Promise<void> {
  await focusIn(page, form(page, dialog).getByLabel(label));
  await page.keyboard.type(words);
  await page.keyboard.press('Enter');
  await expect(form(page, dialog)).toBeHidden();
}

/** The wrong tag is put on Ready and taken back: nobody ever hears of it. */
export async function takesBack(page: Page, story: Story): Promise<void> {
  const tag = story.tags[2];
  const before = await story.phone.count();
  await stopWork(page, tag, 'Declined', 'Meant another tag');
  await hangsOn(page, tag, 'Ready');
  await lastMove(page).getByRole('button', { name: 'Undo' }).click();
  await expect(lastMove(page)).toContainText('Taken back. It is in Checked in again.');
  await hangsOn(page, tag, 'Checked in');
  await letPass(61);
  // Long enough for a worker that looks every second.
  await page.waitForTimeout(3_000);
  expect(await story.phone.count(), 'what was taken back is told to nobody').toBe(before);
}

/** Ends the work early. */
export async function stopWork(page: Page, tag: string, outcome: string, why: string): Promise<void> {
  await tagOf(page, tag).click();
  const stop = tray(page).getByRole('button', { name: /^Stop work/ });
  if ((await stop.count()) === 0) await tray(page).getByRole('button', { name: 'Other rail' }).click();
  await stop.click();
  const dialog = form(page, /stop work, give back as it is$/);
  await dialog.getByRole('radio', { name: outcome, exact: true }).check();
  await dialog.getByLabel('Who asked, how and why').fill(why);
  await dialog.getByRole('button', { name: 'Stop work, give back' }).click();
  await expect(dialog).toBeHidden();
}

/** Two people move one tag: one succeeds, the other is told who was quicker. */
export async function twoAtOnce(page: Page, story: Story, { another, watch }: Cast): Promise<void> {
  const tag = story.tags[2];
  const marta = await another();
  await signInStaff(marta, 'Marta');
  for (const one of [page, marta]) {
    await putOn(one, tag, 'Diagnosis');
    await form(one, /to Diagnosis$/)
      .getByLabel('What did you see')
      .fill('Drain valve loose');
  }
  watch.allow(/^409 POST .*\/moves$/);
  await form(page, /to Diagnosis$/)
    .getByRole('button', { name: 'Move to Diagnosis' })
    .click();
  await hangsOn(page, tag, 'Diagnosis');
  await form(marta, /to Diagnosis$/)
    .getByRole('button', { name: 'Move to Diagnosis' })
    .click();
  await expect(marta.getByRole('alert')).toContainText(
    `It has moved meanwhile: Rosa Imber put ${tag} on Diagnosis`,
  );
  await hangsOn(marta, tag, 'Diagnosis');
  await marta.context().close();
}
