import { expect, type Locator, type Page } from '@playwright/test';
import { tagOf, tray } from './floor';

const ENOUGH = 120;

/** Presses Tab until the keyboard is there. */
export async function focusIn(page: Page, target: Locator): Promise<void> {
  await expect(target).toBeVisible();
  for (let presses = 0; presses < ENOUGH; presses += 1) {
    if (await target.evaluate((element) => element === document.activeElement)) return;
    await page.keyboard.press('Tab');
  }
  await expect(target, 'reached by Tab').toBeFocused();
}

/** Where a tag hangs: which rail from above, which tag from the left; only rails that carry tags count. */
async function placeOf(page: Page, code: string | null): Promise<[rail: number, tag: number]> {
  return page.evaluate((wanted) => {
    const rails = [...document.querySelectorAll('main section[data-stage]')]
      .map((rail) => [...rail.querySelectorAll<HTMLElement>('button[data-job]')])
      .filter((tags) => tags.length > 0);
    const isIt = (tag: HTMLElement) =>
      wanted === null ? tag === document.activeElement : tag.innerText.trim().startsWith(wanted);
    const rail = rails.findIndex((tags) => tags.some(isIt));
    return [rail, rails[rail]?.findIndex(isIt) ?? -1];
  }, code);
}

/** Tab to the board, then arrow keys to the tag; Enter picks it up. */
export async function walkToTag(page: Page, code: string): Promise<void> {
  await page.locator('main h1').focus();
  for (let presses = 0; presses < ENOUGH && (await placeOf(page, null))[0] < 0; presses += 1) {
    await page.keyboard.press('Tab');
  }
  for (let presses = 0; presses < ENOUGH; presses += 1) {
    const [rail, tag] = await placeOf(page, null);
    const [toRail, toTag] = await placeOf(page, code);
    if (rail === toRail && tag === toTag) break;
    if (rail !== toRail) await page.keyboard.press(rail < toRail ? 'ArrowDown' : 'ArrowUp');
    else await page.keyboard.press(tag < toTag ? 'ArrowRight' : 'ArrowLeft');
  }
  await expect(tagOf(page, code)).toBeFocused();
  await page.keyboard.press('Enter');
  await expect(
    tray(page).getByRole('button').first(),
    'the keyboard follows the tag into the tray',
  ).toBeFocused();
}

/** Chooses a rail in the tray. */
export async function choose(page: Page, stage: string): Promise<void> {
  const button = tray(page).getByRole('button', { name: new RegExp(`^${stage}`) });
  if ((await button.count()) === 0) {
    await focusIn(page, tray(page).getByRole('button', { name: 'Other rail' }));
    await page.keyboard.press('Enter');
  }
  await focusIn(page, button);
  await page.keyboard.press('Enter');
}
