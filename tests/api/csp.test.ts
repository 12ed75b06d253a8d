import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import express, { type Express } from 'express';
import supertest from 'supertest';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { pages } from '#server/lib/pages';
import { requestId, securityHeaders } from '#server/middlewares/headers';
import { answerErrors } from '#server/middlewares/errors';
import { newAddress, startTestApp, visitor, type TestApp } from '../support/testApp';

let app: TestApp;
let dist: string;
let site: Express;

const template = (name: string) =>
  `<!doctype html><meta property="csp-nonce" nonce="__NONCE__"><script type="module" nonce="__NONCE__" src="/assets/${name}.js"></script>`;

beforeAll(async () => {
  app = await startTestApp();
  dist = await mkdtemp(join(tmpdir(), 'benchbell-dist-'));
  await mkdir(join(dist, 'assets'));
  await mkdir(join(dist, '.vite'));
  await writeFile(join(dist, 'index.html'), template('app'));
  await writeFile(join(dist, 'stub.html'), template('stub'));
  await writeFile(join(dist, 'assets', 'app-3f9c.js'), `export const long = '${'a'.repeat(5000)}';`);
  await writeFile(join(dist, '.vite', 'manifest.json'), '{}');
  await writeFile(join(dist, 'robots.txt'), 'User-agent: *\nDisallow: /t/\n');
  site = express();
  site.use(requestId, securityHeaders(app.env), await pages(app.services, dist), answerErrors(app.services));
});
afterAll(async () => {
  await rm(dist, { recursive: true, force: true });
  await app.stop();
});

const get = (path: string) => supertest(site).get(path);

describe('pages', () => {
  test.each([
    '/',
    '/s/cinder-flat',
    '/s/cinder-flat/book',
    '/shop/rail',
    '/shop/jobs/7K4QM2',
    '/u/abc',
    '/t/abc',
  ])('%s carries the nonce of its own policy and is kept nowhere', async (path) => {
    const [one, two] = [await get(path).expect(200), await get(path).expect(200)];
    const nonceOf = ({ headers }: supertest.Response) =>
      /'nonce-([^']+)'/.exec(String(headers['content-security-policy']))?.[1] ?? '';
    expect(one.text).not.toContain('__NONCE__');
    expect(one.text.split(`nonce="${nonceOf(one)}"`)).toHaveLength(3);
    expect(nonceOf(two)).not.toBe(nonceOf(one));
    expect(one.headers).toMatchObject({
      'content-type': 'text/html; charset=utf-8',
      'cache-control': 'no-store',
    });
  });

  test('the stub is a page of its own', async () => {
    expect((await get('/t/abcdefghijklmnopqrstuv')).text).toContain('/assets/stub.js');
    expect((await get('/s/cinder-flat')).text).toContain('/assets/app.js');
  });

  test.each(['/nowhere', '/s/cinder-flat/nowhere', '/shop/jobs', '/t', '/t/a/b', '/.vite/manifest.json'])(
    '%s is answered 404, with the page that says so',
    async (path) => {
      const answer = await get(path).expect(404);
      expect(answer.text).toContain('/assets/app.js');
    },
  );

  test('the templates are never sent as they lie on the disk', async () => {
    for (const path of ['/index.html', '/stub.html', '/index%2ehtml', '/stub.htm%6C']) {
      const answer = await get(path).expect(404);
      expect(answer.text).not.toContain('__NONCE__');
    }
  });

  test('another method than reading finds nothing', async () => {
    await supertest(site).post('/s/cinder-flat').expect(404);
  });
});

describe('files', () => {
  test('of the build are kept for ever, and come compressed', async () => {
    const answer = await get('/assets/app-3f9c.js').set('Accept-Encoding', 'gzip').expect(200);
    expect(answer.headers).toMatchObject({
      'cache-control': 'public, max-age=31536000, immutable',
      'content-encoding': 'gzip',
      'x-content-type-options': 'nosniff',
    });
    const brotli = await get('/assets/app-3f9c.js').set('Accept-Encoding', 'br');
    expect(brotli.headers['content-encoding']).toBe('br');
  });

  test.each([
    ['Range', 'bytes=999999-'],
    ['If-Match', '"another"'],
  ])('asked for with a %s that does not fit are no fault of ours', async (name, value) => {
    expect((await get('/robots.txt').set(name, value)).status).toBeLessThan(500);
  });

  test('that are gone are not a page', async () => {
    const answer = await get('/assets/app-0000.js').expect(404);
    expect(answer.headers['content-type']).toContain('application/json');
  });

  test('robots are told to leave the secret addresses alone', async () => {
    expect((await get('/robots.txt').expect(200)).text).toContain('Disallow: /t/');
  });
});

describe('reports of browsers', () => {
  const single = {
    'csp-report': {
      'document-uri': 'https://shop.example.com/t/abcdefghijklmnopqrstuv',
      'effective-directive': 'style-src-elem',
      'blocked-uri': 'inline',
      'source-file': 'https://shop.example.com/assets/app.js',
      'line-number': 12,
      disposition: 'enforce',
    },
  };
  const list = [
    { type: 'csp-violation', age: 1, url: 'x', body: { effectiveDirective: 'img-src', blockedURL: 'data' } },
    { type: 'deprecation', body: {} },
  ];
  const violations = () =>
    app.log
      .filter((line) => line.includes('content policy broken'))
      .map((line) => JSON.parse(line) as object);

  test.each([
    ['application/csp-report', single],
    ['application/reports+json', list],
  ])('%s is logged', async (type, body) => {
    const before = violations().length;
    // Browsers send them by themselves and do not always say from where.
    await supertest(app.express)
      .post('/api/csp-reports')
      .set({ 'Content-Type': type, 'X-Forwarded-For': newAddress() })
      .send(JSON.stringify(body))
      .expect(204);
    expect(violations()).toHaveLength(before + 1);
  });

  test('a secret address in one is masked', () => {
    expect(violations()[0]).toMatchObject({
      violation: {
        page: 'https://shop.example.com/t/…',
        directive: 'style-src-elem',
        source: 'https://shop.example.com/assets/app.js:12',
      },
    });
  });

  test('anything else is refused, and one address cannot fill the log', async () => {
    const client = visitor(app);
    await client.post('/api/csp-reports').send({ hello: 1 }).expect(400);
    const answers: number[] = [];
    for (let at = 0; at < 61; at += 1) {
      answers.push((await client.post('/api/csp-reports').send(single)).status);
    }
    expect(answers.filter((status) => status === 204)).toHaveLength(60);
    expect(answers.at(-1)).toBe(429);
  });
});
