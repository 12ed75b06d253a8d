import type supertest from 'supertest';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { routeTable } from '#server/routes/table';
import { makeShop, type TestShop } from '../support/factories';
import { startTestApp, visitor, type TestApp } from '../support/testApp';

let app: TestApp;
let shop: TestShop;

beforeAll(async () => {
  app = await startTestApp();
  shop = await makeShop(app);
});
afterAll(() => app.stop());

/** What OWASP's HTTP Headers Cheat Sheet and ASVS 5.0 3.4 ask of every answer. */
const ON_EVERY_ANSWER = {
  'cross-origin-opener-policy': 'same-origin',
  'cross-origin-resource-policy': 'same-origin',
  'permissions-policy': 'camera=(), geolocation=(), microphone=(), payment=(), usb=()',
  'referrer-policy': 'no-referrer',
  'x-content-type-options': 'nosniff',
  'x-frame-options': 'DENY',
};

const directivesOf = (policy: string): Map<string, string> =>
  new Map(
    policy.split('; ').map((part) => {
      const [name = '', ...values] = part.split(' ');
      return [name, values.join(' ')];
    }),
  );

function fetchRoute(method: 'get' | 'post', path: string): Promise<supertest.Response> {
  const filled = path.replace(':shop', shop.slug).replace(/:\w+/g, 'x');
  const client = visitor(app);
  return Promise.resolve(method === 'get' ? client.get(filled) : client.post(filled).send({}));
}

test('every route answers with the security headers and a policy of its own nonce', async () => {
  const nonces = new Set<string>();
  const table = routeTable(app.services);
  for (const { method, path } of table) {
    const answer = await fetchRoute(method, path);
    expect(answer.headers, `${method} ${path}`).toMatchObject(ON_EVERY_ANSWER);
    expect(answer.headers).not.toHaveProperty('x-powered-by');
    expect(answer.headers['x-request-id']).toMatch(/^[0-9a-f-]{36}$/);
    nonces.add(/'nonce-([^']+)'/.exec(String(answer.headers['content-security-policy']))?.[1] ?? '');
  }
  expect(nonces.size).toBe(table.length);
});

test('answers of the API are kept nowhere', async () => {
  for (const { method, path } of routeTable(app.services).filter((route) => !('raw' in route))) {
    const answer = await fetchRoute(method, path);
    expect(answer.headers['cache-control'], `${method} ${path}`).toBe('no-store');
  }
});

test('the content policy lets nothing in from elsewhere and nothing inline but styles with the nonce', async () => {
  const answer = await visitor(app).get('/api/session');
  const policy = String(answer.headers['content-security-policy']);
  const nonce = /'nonce-([^']+)'/.exec(policy)?.[1] ?? '';
  expect(Buffer.from(nonce, 'base64')).toHaveLength(16);
  expect(Object.fromEntries(directivesOf(policy))).toEqual({
    'default-src': "'self'",
    'script-src': "'self'",
    'script-src-attr': "'none'",
    'style-src': `'self' 'nonce-${nonce}'`,
    'img-src': "'self' data: blob:",
    'font-src': "'self' data:",
    'connect-src': "'self'",
    'worker-src': "'self'",
    'object-src': "'none'",
    'base-uri': "'none'",
    'frame-src': "'none'",
    'frame-ancestors': "'none'",
    'form-action': "'self'",
    'report-uri': '/api/csp-reports',
  });
  expect(policy).not.toMatch(/unsafe/);
});

describe('over https', () => {
  test('browsers are told to stay there for a year', async () => {
    const answer = await visitor(app).get('/api/session').set('X-Forwarded-Proto', 'https');
    expect(answer.headers).toMatchObject({
      'strict-transport-security': 'max-age=31536000; includeSubDomains',
      'reporting-endpoints': 'csp="/api/csp-reports"',
    });
    expect(answer.headers['content-security-policy']).toMatch(/; report-to csp$/);
  });

  test('over plain http they are not, or a phone on the shop’s network could never come back', async () => {
    const answer = await visitor(app).get('/api/session');
    expect(answer.headers).not.toHaveProperty('strict-transport-security');
  });
});

test.each(['/t/abcdefghijklmnopqrstuv', '/u/abcdefghijklmnopqrstuv', '/api/t/abcdefghijklmnopqrstuv'])(
  '%s is neither indexed nor kept',
  async (path) => {
    const answer = await visitor(app).get(path);
    expect(answer.headers).toMatchObject({
      'x-robots-tag': 'noindex, nofollow',
      'cache-control': 'no-store',
      'referrer-policy': 'no-referrer',
    });
  },
);

test('an address that does not exist is answered in the one form of all errors', async () => {
  const answer = await visitor(app).get('/api/nothing-here').expect(404);
  expect(answer.body).toEqual({
    error: {
      code: 'not_found',
      message: 'We do not have that. Check the address or the code.',
      requestId: answer.headers['x-request-id'],
    },
  });
});

test('the address a client claims through more proxies than there are is not believed', async () => {
  const tries = await Promise.all(
    Array.from({ length: 7 }, (_, at) =>
      visitor(app, `203.0.113.${at}, 198.51.100.9`)
        .post(`/api/shops/${shop.slug}/sign-in/password`)
        .send({ email: 'nobody@example.com', password: 'wrong' }),
    ),
  );
  expect(tries.filter(({ status }) => status === 429)).toHaveLength(2);
});
