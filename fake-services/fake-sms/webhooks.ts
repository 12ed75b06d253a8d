import twilio from 'twilio';

/** Fields of a webhook, by the provider's names. */
export type WebhookFields = Record<string, string>;

const ANSWER_TIMEOUT_MS = 15_000;

/**
 * Posts a form as the provider does, signed with the account's token over the exact address and its fields. Never
 * throws and never repeats: the provider does not either. Returns the status and the text, or nothing if no answer came.
 */
export async function postSigned(
  url: string,
  fields: WebhookFields,
  authToken: string,
): Promise<{ status: number; text: string } | undefined> {
  try {
    const answer = await fetch(url, {
      method: 'POST',
      redirect: 'manual',
      signal: AbortSignal.timeout(ANSWER_TIMEOUT_MS),
      headers: {
        'Content-Type': 'application/x-www-form-urlencoded; charset=utf-8',
        'X-Twilio-Signature': twilio.getExpectedTwilioSignature(authToken, url, fields),
        'User-Agent': 'TwilioProxy/1.1',
        Accept: '*/*',
      },
      body: new URLSearchParams(fields).toString(),
    });
    return { status: answer.status, text: await answer.text() };
  } catch {
    return undefined;
  }
}
