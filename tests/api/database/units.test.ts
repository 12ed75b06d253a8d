import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { inUnit, rows, run, sqlState, unitShop, withShop } from '#server/lib/db';
import { openMailGateway } from '#server/lib/mail';
import { fitsPassword, hashPassword } from '#server/lib/passwords';
import { openSmsGateway } from '#server/lib/sms';
import { Account } from '#server/models/index';
import { openShopDatabase, plainShop, type PlainShop, type ShopDatabase } from '../../support/shopDatabase';

let base: ShopDatabase;
let shop: PlainShop;

beforeAll(async () => {
  // One connection: whatever a unit leaves behind, the next one meets.
  base = await openShopDatabase({ pool: 1 });
  shop = await plainShop(base, 'flint-street');
});
afterAll(() => base.close());

const nameNow = () => withShop(shop.id, async () => (await Account.findOne({ rejectOnEmpty: true })).name);
const raise = (code: string) =>
  run(`do 'begin raise exception ''made up'' using errcode = ''${code}''; end'`);

describe('a unit of work', () => {
  it('knows its shop, and only within', async () => {
    expect(inUnit()).toBe(false);
    expect(() => unitShop()).toThrow('outside a unit');
    await withShop(shop.id, () => {
      expect([inUnit(), unitShop()]).toEqual([true, shop.id]);
      return Promise.resolve();
    });
    expect(inUnit()).toBe(false);
  });

  it('is never opened within another, its own shop’s included', async () => {
    const nested = withShop(shop.id, () => withShop(shop.id, () => rows('select 1')));
    await expect(nested).rejects.toThrow('a unit of work inside another');
  });

  it('is taken back whole when it throws, and gives its connection on', async () => {
    const before = await nameNow();
    const broken = withShop(shop.id, async () => {
      await Account.update({ name: 'Half done' }, { where: {} });
      await run("update jobs set words = 'half done'");
      throw new Error('stop');
    });
    await expect(broken).rejects.toThrow('stop');
    expect(await nameNow()).toBe(before);
    expect(await withShop(shop.id, () => rows('select words from jobs'))).toEqual([{ words: '' }]);
  });

  it('leaves no shop set on its connection, whether it ended well or not', async () => {
    for (const end of [() => Promise.resolve(), () => Promise.reject(new Error('stop'))]) {
      await withShop(shop.id, end).catch(() => undefined);
      const [left] = await rows<{ shop: string }>("select current_setting('app.shop', true) as shop");
      expect(left?.shop).toBe('');
    }
  });

  it('runs models and raw statements in one transaction', async () => {
    const ids = await withShop(shop.id, async () => {
      await Account.update({ name: 'One transaction' }, { where: {} });
      const [raw] = await rows<{ xid: string; shop: string }>(
        "select xmin::text as xid, current_setting('app.shop') as shop from accounts",
      );
      const [now] = await rows<{ xid: string }>('select pg_current_xact_id()::text as xid');
      return [raw?.xid, now?.xid, raw?.shop];
    });
    expect(ids[0]).toBe(ids[1]);
    expect(ids[2]).toBe(shop.id);
  });
});

describe('a unit that the database gave up', () => {
  it.each(['40001', '40P01'])('is run again after %s, as nothing of it has happened', async (code) => {
    let tries = 0;
    const name = await withShop(shop.id, async () => {
      tries += 1;
      await Account.update({ name: `try ${tries}` }, { where: {} });
      if (tries === 1) await raise(code);
      return (await Account.findOne({ rejectOnEmpty: true })).name;
    });
    expect([tries, name, await nameNow()]).toEqual([2, 'try 2', 'try 2']);
  });

  it('is not run for ever', async () => {
    let tries = 0;
    const always = withShop(shop.id, () => {
      tries += 1;
      return raise('40001');
    });
    expect(await always.catch(sqlState)).toBe('40001');
    expect(tries).toBe(3);
  });

  it('is not run again for any other reason', async () => {
    let tries = 0;
    const once = withShop(shop.id, () => {
      tries += 1;
      return raise('23505');
    });
    expect(await once.catch(sqlState)).toBe('23505');
    expect(tries).toBe(1);
  });
});

describe('what is slow or leaves the house', () => {
  const sms = openSmsGateway({
    TWILIO_ACCOUNT_SID: `AC${'0'.repeat(32)}`,
    TWILIO_AUTH_TOKEN: 'token-of-the-fake',
  });
  const mail = openMailGateway({ SMTP_URL: 'smtp://127.0.0.1:9', MAIL_FROM: 'shop@example.com' });
  afterAll(() => mail.close());
  const text = {
    from: '+13035550100',
    to: '+13035550101',
    body: 'x',
    statusCallback: '',
    validitySeconds: 60,
  };
  const letter = {
    ...{
      id: 'x',
      fromName: 'x',
      replyTo: 'a@example.com',
      to: 'b@example.com',
      subject: 'x',
      text: 'x',
      html: 'x',
    },
    ...{ calendar: null, unsubscribeUrl: '' },
  };

  it.each<[string, () => Promise<unknown>]>([
    ['a text', () => sms.send(text)],
    ['a look-up', () => sms.findSent('+13035550101')],
    ['an e-mail', () => mail.send(letter)],
    ['hashing', () => hashPassword('seven paper kites')],
    ['hashing', () => fitsPassword('seven paper kites', null)],
  ])('refuses within a unit: %s', async (what, act) => {
    await expect(withShop(shop.id, async () => act())).rejects.toThrow(`${what} inside a unit of work`);
  });
});
