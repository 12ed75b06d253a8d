import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { ApiError, call, detailsOf, onSignedOut } from './client';
import { now } from '@/lib/clock';

const fetched = vi.fn<typeof fetch>();
const answer = (status: number, body: string) =>
  fetched.mockResolvedValueOnce(new Response(body, { status }));
const refusal = (code: string, more = {}) =>
  JSON.stringify({ error: { code, message: 'm', requestId: 'r-1', ...more } });
const caught = () =>
  call('GET', '/api/x').then(
    () => expect.fail('it should have been refused'),
    (error: unknown) => error as ApiError,
  );

beforeEach(() => vi.stubGlobal('fetch', fetched));
afterEach(() => {
  vi.unstubAllGlobals();
  fetched.mockReset();
  onSignedOut(() => undefined);
});

describe('what the server says', () => {
  it('is given on as it came', async () => {
    answer(200, '{"a":1}');
    await expect(call('GET', '/api/x')).resolves.toEqual({ a: 1 });
  });

  it('may be nothing at all', async () => {
    fetched.mockResolvedValueOnce(new Response(null, { status: 204 }));
    await expect(call('POST', '/api/sign-out')).resolves.toBeNull();
  });

  it('sets the clock that the pages go by', async () => {
    answer(200, '{"now":"2031-05-06T07:08:09.000Z"}');
    await call('GET', '/api/x');
    expect(now().toISOString().slice(0, 15)).toBe('2031-05-06T07:0');
  });

  it('keeps code, fields, details and request id of a refusal', async () => {
    const fields = [{ path: 'a', key: 'errors.field.required', message: 'Fill this in.' }];
    answer(400, refusal('invalid', { fields, details: { half: 'am' } }));
    const error = await caught();
    expect(error).toBeInstanceOf(ApiError);
    expect(error).toMatchObject({ code: 'invalid', status: 400, fields, requestId: 'r-1' });
    expect(detailsOf(error, 'invalid')).toEqual({ half: 'am' });
    expect(detailsOf(error, 'times_full')).toBeNull();
  });

  it('is told on when the session has ended', async () => {
    const tell = vi.fn();
    onSignedOut(tell);
    answer(401, refusal('unauthenticated'));
    await caught();
    answer(403, refusal('forbidden'));
    await caught();
    expect(tell).toHaveBeenCalledOnce();
  });
});

describe('no answer of ours', () => {
  it.each([
    ['a page of a proxy', '<html>Bad gateway</html>'],
    ['a code that we do not have', refusal('party')],
    ['a body of something else', '{"message":"no"}'],
  ])('%s counts as unavailable', async (_case, body) => {
    answer(502, body);
    expect(await caught()).toMatchObject({ code: 'unavailable', status: 502 });
  });

  it('a broken line counts as unavailable', async () => {
    fetched.mockRejectedValueOnce(new TypeError('Failed to fetch'));
    expect(await caught()).toMatchObject({ code: 'unavailable', status: 0 });
  });

  it('a call that was given up stays what it is', async () => {
    const giveUp = new AbortController();
    giveUp.abort();
    fetched.mockRejectedValueOnce(new DOMException('aborted', 'AbortError'));
    await expect(call('GET', '/api/x', { signal: giveUp.signal })).rejects.toMatchObject({
      name: 'AbortError',
    });
  });
});

describe('what is asked', () => {
  it('carries the key, the body and the query', async () => {
    answer(200, '{}');
    await call('POST', '/api/x', { body: { a: 1 }, key: 'k-1', query: { machines: 3 } });
    const [url, init] = fetched.mock.calls[0] ?? [];
    expect(url).toBe('/api/x?machines=3');
    expect(init).toMatchObject({ method: 'POST', body: '{"a":1}', credentials: 'same-origin' });
    expect(init?.headers).toMatchObject({ 'Idempotency-Key': 'k-1', 'Content-Type': 'application/json' });
  });
});
