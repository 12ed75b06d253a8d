/** The stub on a bad connection: what was last known stays, and says from when it is. */
import { signInStaff } from './support/floor';
import { jobIn, stubPathOf } from './support/places';
import { expect, test } from './support/test';

test('without a signal the stub shows what it knew, and catches up by itself', async ({
  page,
  another,
  watch,
}) => {
  const staff = await another();
  await signInStaff(staff, 'Rosa');
  await page.goto(await stubPathOf(staff, await jobIn(staff, 'test_run')));
  await page.getByRole('radio', { name: 'English' }).check();
  await expect(page.locator('html')).toHaveAttribute('lang', 'en');
  const head = page.getByRole('heading', { level: 1 });
  const known = await head.innerText();
  watch.allow(/ERR_INTERNET_DISCONNECTED GET \/api\/t\//);
  await page.context().setOffline(true);
  const line = page.getByText(/^No signal\. Showing \d+:\d\d [ap]m\.$/);
  // It asks every ten seconds.
  await expect(line).toBeVisible({ timeout: 20_000 });
  await expect(head).toHaveText(known);
  await page.context().setOffline(false);
  await expect(line).toBeHidden({ timeout: 20_000 });
});
