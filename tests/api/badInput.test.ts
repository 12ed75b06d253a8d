/** Whatever is wrong with a body: 400, a sentence for each field in the reader's language, and never a 500. */
import { randomUUID } from 'node:crypto';
import type { Response } from 'supertest';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { ZodType } from 'zod';
import { routeTable } from '#server/routes/table';
import { gatherEverybody, type Everybody } from '../support/everybody';
import { atGate, errorOf, faultsOf, met, newKey, newMachine } from '../support/jobs';
import { mutantsOf, type Mutant } from '../support/mutants';
import { ask, guestBody, SAMPLES } from '../support/samples';
import { startTestApp, visitor, type Client, type TestApp } from '../support/testApp';

type Loose = Record<string, unknown>;

let app: TestApp;
let everybody: Everybody;
let schemas: Map<string, ZodType>;

beforeAll(async () => {
  app = await startTestApp();
  everybody = await gatherEverybody(app);
  schemas = new Map(
    routeTable(app.services).flatMap((entry) => {
      if ('raw' in entry || !entry.body) return [];
      return [[`${entry.method.toUpperCase()} ${entry.path}`, entry.body] as [string, ZodType]];
    }),
  );
});
afterAll(() => app.stop());

/** Bodies with everything that a route can be sent, where its sample leaves something out. */
const RICH: Record<string, (sample: Loose) => Promise<Loose> | Loose> = {
  'POST /api/shops/:shop/bookings': async () => {
    const { own } = everybody;
    const machine = newMachine(own.shop, { model: 'G5', fleetNumber: '7', serial: 'S1' });
    const fleet = {
      from: 'fleet',
      machineId: randomUUID(),
      complaintKindId: machine.complaintKindId,
      words: '',
    };
    const body = await guestBody(app, own);
    const guest = { ...(body.guest as Loose), personId: randomUUID() };
    return { ...body, guest, note: 'the gate is locked', machines: [machine, fleet] };
  },
  'POST /api/shops/:shop/sign-in/code': (sample) => ({ ...sample, personId: randomUUID() }),
  'POST /api/shop/jobs/:tag/moves': (sample) => ({
    ...sample,
    outcome: 'repaired',
    partsReason: 'part',
    note: 'rope round the tank',
    lines: [met('paid', { amountCents: 100, leftOut: 'n', why: 'y' })],
    checkIn: { ...atGate, newTag: '7K4QM2', broughtByPersonId: randomUUID(), leftWithIt: 'hose' },
  }),
};

/** What may stand in these fields is not for their form to say: a password is what it is, a wrong code is not found. */
const FREE = /(sign-in\/password password|password-links.* password|stubs code)$/;
const CHARACTERS = /zero byte|surrogate/;
/** Browsers send what they like in a report; only its frame is checked. */
const REPORTS = 'POST /api/csp-reports';

function isFree(route: string, { path, what }: Mutant): boolean {
  if (route !== REPORTS) return FREE.test(`${route} ${path}`) && CHARACTERS.test(what);
  return path === 'csp-report' ? what === 'an object' : !/object|lists|null|true/.test(what);
}

const routes = Object.keys(SAMPLES).filter((route) => SAMPLES[route]?.body);

/** Acts on jobs are the owner's to try, all else a visitor's. */
const clientFor = (route: string): Client =>
  route.includes('/api/shop/') ? everybody.own.clients.owner : visitor(app);

async function wordsIn(language: string, send: (language: string) => PromiseLike<Response>) {
  const answer = await send(language);
  expect([answer.status, errorOf(answer).code]).toEqual([400, 'invalid']);
  return { paths: faultsOf(answer), words: (errorOf(answer).fields ?? []).map(({ message }) => message) };
}

/** Sentences that were found in both languages already. */
const known = new Set<string>();

/** 400 with at least one sentence of its own in each language. */
async function expectFaults(what: string, send: (language: string) => PromiseLike<Response>) {
  const english = await wordsIn('en', send);
  expect(english.paths.length, what).toBeGreaterThan(0);
  expect(new Set(english.paths).size, what).toBe(english.paths.length);
  if (english.words.every((sentence) => known.has(sentence))) return english.paths;
  const spanish = await wordsIn('es-MX,es;q=0.9', send);
  for (const sentence of english.words) known.add(sentence);
  expect(spanish.paths, what).toEqual(english.paths);
  for (const [at, sentence] of english.words.entries()) {
    expect(sentence, what).toMatch(/^[A-Z].* .*[.?!]$/);
    expect(sentence, what).not.toMatch(/[{}]|errors\./);
    expect(spanish.words[at], what).toMatch(/^[A-ZÁÉÍÓÚ¿¡].* .*[.?!]$/);
    expect(spanish.words[at], what).not.toBe(sentence);
  }
  return english.paths;
}

/** A report that has neither of the two forms is at fault as a whole. */
const isAbout = (fault: string, path: string): boolean =>
  (fault === '' && path.startsWith('csp-report')) ||
  fault === path ||
  path.startsWith(`${fault}.`) ||
  fault.startsWith(`${path}.`);

test('every route that reads a body has a sample, and every sample a schema', () => {
  expect([...schemas.keys()].sort()).toEqual([...routes].sort());
});

describe.each(routes)('%s', (route) => {
  test('one point wrong at a time', { timeout: 120_000 }, async () => {
    const { own } = everybody;
    const id = (await SAMPLES[route]?.subject?.(app, own)) ?? '';
    const sample = (await SAMPLES[route]?.body?.(app, own, id)) ?? {};
    const body = (await RICH[route]?.(sample)) ?? sample;
    const schema = schemas.get(route);
    if (!schema) throw new Error(`no schema for ${route}`);
    const mutants = mutantsOf(schema, body);
    expect(mutants.length).toBeGreaterThan(6);
    const client = clientFor(route);
    for (const mutant of mutants) {
      const what = `${mutant.what} at ${mutant.path}`;
      if (isFree(route, mutant)) {
        expect((await ask(app, client, route, own, { body: mutant.body })).status, what).toBeLessThan(500);
        continue;
      }
      const paths = await expectFaults(what, (language) =>
        ask(app, client, route, own, { id, body: mutant.body, language }),
      );
      expect(
        paths.some((fault) => isAbout(fault, mutant.path)),
        `${what}: ${paths.join()}`,
      ).toBe(true);
    }
  });

  test('no body, a list, a word, and what is no JSON', async () => {
    const { own } = everybody;
    const { path, subject, keyed } = SAMPLES[route] ?? { path: () => '' };
    const id = (await subject?.(app, own)) ?? '';
    const client = clientFor(route);
    const send = (text: string) => (language: string) => {
      const request = client.post(path(own.shop.slug, id)).set('Accept-Language', language);
      if (keyed) request.set('Idempotency-Key', newKey());
      return request.set('Content-Type', 'application/json').send(text);
    };
    for (const text of ['', '{}', '[[]]', '"word"', '17', 'null', '{"a":', '{"a":1}}', '\u0000']) {
      await expectFaults(text, send(text));
    }
    await expectFaults('deeply nested', send('['.repeat(45_000) + ']'.repeat(45_000)));
    await expectFaults('more than is read', send(JSON.stringify({ words: 'x'.repeat(200_000) })));
    await expectFaults('an unknown character set', (language) =>
      send('{}')(language).set('Content-Type', 'application/json; charset=utf-99'),
    );
    await expectFaults('a body that says it is packed and is not', (language) =>
      send('{}')(language).set('Content-Encoding', 'gzip'),
    );
  });
});

test('a body that is no JSON by its own account is taken from nobody, as a form of another site could send it', async () => {
  const { own } = everybody;
  for (const type of ['text/plain', 'application/x-www-form-urlencoded', 'multipart/form-data; boundary=x']) {
    const answer = await visitor(app)
      .post(`/api/shops/${own.shop.slug}/codes`)
      .set('Content-Type', type)
      .send('phone=1');
    expect([answer.status, errorOf(answer).code]).toEqual([403, 'cross_site']);
  }
});

describe('the Idempotency-Key', () => {
  const keyed = Object.keys(SAMPLES).filter((route) => SAMPLES[route]?.keyed);
  test.each(keyed)('%s asks for one that can be one', async (route) => {
    const { own } = everybody;
    const { path, subject, body } = SAMPLES[route] ?? { path: () => '' };
    const id = (await subject?.(app, own)) ?? '';
    const sent = await body?.(app, own, id);
    const client = route.includes('bookings') ? own.clients.manager : own.clients.owner;
    for (const key of [undefined, '', 'short', 'x'.repeat(256), 'with spaces in it', 'ключ-ключ-ключ']) {
      const paths = await expectFaults(String(key), (language) => {
        const request = client.post(path(own.shop.slug, id)).set('Accept-Language', language);
        if (key !== undefined) request.set('Idempotency-Key', Buffer.from(key).toString('latin1'));
        return request.send(sent);
      });
      expect(paths).toEqual(['Idempotency-Key']);
    }
  });
});

describe('the query of the free times', () => {
  const queries = ['0', '13', '-1', '1.5', 'abc', '', 'NaN', '1e9', '99999999999999999999', '%00', 'null']
    .map((value) => `machines=${value}`)
    .concat(['machines=1&machines=2', 'machines[]=1', 'weeks=2', 'machines=1&weeks=2', '__proto__=1']);
  test.each(queries)('?%s', async (query) => {
    const { own } = everybody;
    await expectFaults(query, (language) =>
      visitor(app).get(`/api/shops/${own.shop.slug}/times?${query}`).set('Accept-Language', language),
    );
  });
});
