import { expect, type Locator, type Page } from '@playwright/test';
import { sms } from './addresses';

/** A customer's phone: the gateway's page on which a person reads and answers texts. */
export class Phone {
  private constructor(
    private readonly page: Page,
    readonly number: string,
  ) {}

  /** Opens the phone in a tab of its own. */
  static async open(beside: Page, number: string): Promise<Phone> {
    const page = await beside.context().newPage();
    await page.goto(`${sms}/phones/${encodeURIComponent(number)}`);
    return new Phone(page, number);
  }

  /** Texts from the shop, oldest first. */
  get texts(): Locator {
    return this.page.getByRole('log', { name: 'Texts' }).getByRole('listitem').filter({ hasNot: this.mine });
  }

  private get mine(): Locator {
    return this.page.getByText('sent from this phone');
  }

  /** The latest text that says this, as soon as it has come. */
  async read(says: RegExp): Promise<string> {
    // Before the first text the page has no thread to grow in.
    await expect(async () => {
      if ((await this.texts.filter({ hasText: says }).count()) === 0) await this.page.reload();
      await expect(this.texts.filter({ hasText: says }).last()).toBeVisible({ timeout: 2_000 });
    }).toPass({ timeout: 45_000 });
    return this.texts.filter({ hasText: says }).last().getByRole('paragraph').innerText();
  }

  /** The six digits of the latest code. */
  async code(): Promise<string> {
    const text = await this.read(/\b\d{6}\b/);
    return /\b\d{6}\b/.exec(text)?.[0] ?? '';
  }

  /** How many texts the shop has sent so far. */
  async count(): Promise<number> {
    await this.page.reload();
    return this.texts.count();
  }

  /** Answers the shop. */
  async answer(body: string): Promise<void> {
    await this.page.getByRole('textbox', { name: /^Answer as/ }).fill(body);
    await this.page.getByRole('button', { name: 'Send' }).click();
    await expect(this.page.getByRole('listitem').filter({ has: this.mine }).last()).toContainText(body);
  }

  /** Taps the link in the latest text that has one. @returns the page that opens */
  async tapLink(says: RegExp): Promise<Page> {
    await this.read(says);
    const link = this.texts.filter({ hasText: says }).last().getByRole('link');
    const address = await link.getAttribute('href');
    const page = await this.page.context().newPage();
    await page.goto(address ?? '');
    return page;
  }

  /** Takes a picture of the thread. */
  async shot(path: string): Promise<void> {
    await this.page.screenshot({ path });
  }
}
