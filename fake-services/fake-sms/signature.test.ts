import twilio from 'twilio';
import { afterEach, describe, expect, it } from 'vitest';
import { postSigned } from '#fakes/fake-sms/webhooks';
import { startReceiver } from '#fakes/lib/testKit';
import type { FormReceiver } from '#fakes/lib/testKit';

// The example of the provider's "Webhooks security" guide (twilio.com/docs/usage/webhooks/webhooks-security).
const TOKEN = '12345';
const ADDRESS = 'https://mycompany.com/myapp.php?foo=1&bar=2';
const SIGNATURE = '0/KCTR6DLpKmkAf8muzZqo1nDgQ=';
const FIELDS = {
  CallSid: 'CA1234567890ABCDE',
  Caller: '+12349013030',
  Digits: '1234',
  From: '+12349013030',
  To: '+18005551212',
};

describe('the published signature', () => {
  it('is what the signing used here gives', () => {
    expect(twilio.getExpectedTwilioSignature(TOKEN, ADDRESS, FIELDS)).toBe(SIGNATURE);
    expect(twilio.validateRequest(TOKEN, SIGNATURE, ADDRESS, FIELDS)).toBe(true);
  });

  it.each([
    ['another field', SIGNATURE, ADDRESS, { ...FIELDS, Digits: '9999' }],
    ['another address', SIGNATURE, ADDRESS.replace('bar=2', 'bar=3'), FIELDS],
    ['a cut signature', SIGNATURE.slice(0, -1), ADDRESS, FIELDS],
    ['no signature', '', ADDRESS, FIELDS],
  ])('does not hold for %s', (_what, signature, address, fields) => {
    expect(twilio.validateRequest(TOKEN, signature, address, fields)).toBe(false);
  });
});

describe('on the wire', () => {
  let receiver: FormReceiver;
  afterEach(() => receiver.stop());

  it('the fields arrive as they were signed, accents, signs and an empty one included', async () => {
    receiver = await startReceiver();
    const url = `${receiver.url}/hooks/sms?shop=cinder%20flat&n=1`;
    const fields = { Body: "¿Ya está? 100% & 'sí' +1=2", From: '+13035550142', Empty: '' };
    expect(await postSigned(url, fields, TOKEN)).toMatchObject({ status: 204 });
    const [form] = receiver.received;
    expect(form?.fields).toEqual(fields);
    expect(twilio.validateRequest(TOKEN, form?.signature ?? '', url, form?.fields ?? {})).toBe(true);
  });
});
