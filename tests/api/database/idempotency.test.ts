import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { rows, withShop } from '#server/lib/db';
import { answered, once, type KeyedRequest } from '#server/lib/idempotency';
import { newId } from '#server/lib/ids';
import { JobNote } from '#server/models/index';
import {
  ctxOf,
  openShopDatabase,
  NOW,
  plainShop,
  type PlainShop,
  type ShopDatabase,
} from '../../support/shopDatabase';

let base: ShopDatabase;
let shop: PlainShop;
let other: PlainShop;

beforeAll(async () => {
  base = await openShopDatabase();
  shop = await plainShop(base, 'flint-street');
  other = await plainShop(base, 'ember-yard');
});
afterAll(() => base.close());

/** An act that leaves a trace: a note with the words of the request. */
async function addNote(at: PlainShop, body: string): Promise<{ noteId: string }> {
  const [jobId = ''] = at.jobIds;
  const by = { personId: at.personId, byName: 'Dana Ruiz', at: NOW };
  const note = await JobNote.create({ shopId: at.id, id: newId(), jobId, body, ...by });
  return { noteId: note.id };
}
const request = (key: string, body = 'seen', act = 'note'): KeyedRequest => ({ key, act, body });
const send = (given: KeyedRequest, at = shop, ctx = ctxOf(at)) =>
  withShop(at.id, () => once(ctx, given, () => addNote(at, String(given.body))));
const notes = (at = shop) => withShop(at.id, () => JobNote.count());
const keys = (key: string) =>
  withShop(shop.id, () => rows('select 1 from idempotency_keys where key = $1', [key]));

describe('a key', () => {
  it('used again for the same gives the first answer and acts once', async () => {
    const before = await notes();
    const first = await send(request('first-key'));
    expect(await send(request('first-key'))).toEqual(first);
    expect(await send(request('first-key'))).toEqual(first);
    expect(await notes()).toBe(before + 1);
  });

  it('is refused for another body, another act and another person', async () => {
    await send(request('reused-key'));
    const before = await notes();
    const refused = { code: 'key_reused', status: 422 };
    await expect(send(request('reused-key', 'something else'))).rejects.toMatchObject(refused);
    await expect(send(request('reused-key', 'seen', 'move'))).rejects.toMatchObject(refused);
    const ctx = ctxOf(shop);
    const stranger = ctx.actor && { ...ctx, actor: { ...ctx.actor, personId: newId() } };
    await expect(send(request('reused-key'), shop, stranger ?? ctx)).rejects.toMatchObject(refused);
    expect(await notes()).toBe(before);
  });

  it('sent by many at once acts once, and all are told the same', async () => {
    const before = await notes();
    const answers = await Promise.all(Array.from({ length: 8 }, () => send(request('crowd-key'))));
    expect(new Set(answers.map(({ noteId }) => noteId)).size).toBe(1);
    expect(await notes()).toBe(before + 1);
  });

  it('of an act that failed is free again', async () => {
    const failing = withShop(shop.id, () =>
      once(ctxOf(shop), request('failed-key'), async () => {
        await addNote(shop, 'half done');
        throw new Error('no more places');
      }),
    );
    await expect(failing).rejects.toThrow('no more places');
    expect(await keys('failed-key')).toEqual([]);
    const before = await notes();
    await send(request('failed-key', 'another body'));
    expect(await notes()).toBe(before + 1);
  });

  it('whose act fails lets the one that waited for it act instead', async () => {
    let fail: () => void = () => undefined;
    const holds = new Promise<void>((resolve) => (fail = resolve));
    let began: () => void = () => undefined;
    const hasBegun = new Promise<void>((resolve) => (began = resolve));
    const first = withShop(shop.id, () =>
      once(ctxOf(shop), request('waiting-key'), async () => {
        began();
        await holds;
        throw new Error('stop');
      }),
    );
    await hasBegun;
    const second = send(request('waiting-key'));
    fail();
    await expect(first).rejects.toThrow('stop');
    expect((await second).noteId).toMatch(/^[0-9a-f-]{36}$/);
  });

  it('is each shop’s own', async () => {
    const first = await send(request('shared-key'));
    const second = await send(request('shared-key'), other);
    expect(second.noteId).not.toBe(first.noteId);
    expect(await notes(other)).toBe(1);
  });

  it('can be asked for before anything else is looked at', async () => {
    const ask = (key: string, body = 'seen') =>
      withShop(shop.id, () => answered(ctxOf(shop), request(key, body)));
    expect(await ask('never-used')).toBeNull();
    expect(await ask('first-key')).toEqual(await send(request('first-key')));
    await expect(ask('first-key', 'other')).rejects.toMatchObject({ code: 'key_reused' });
  });
});
