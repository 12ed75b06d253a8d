import { timingSafeEqual } from 'node:crypto';
import { setTimeout as wait } from 'node:timers/promises';
import express from 'express';
import type { Request, Response, Router } from 'express';
import { isValidPhoneNumber } from 'libphonenumber-js/max';
import { errorBody, providerErrors } from '#fakes/fake-sms/errors';
import type { ProviderError } from '#fakes/fake-sms/errors';
import type { Gateway } from '#fakes/fake-sms/gateway';
import { listPage } from '#fakes/fake-sms/listPage';
import { wireMessage } from '#fakes/fake-sms/message';
import type { SmsMessage } from '#fakes/fake-sms/message';

const MAX_BODY = 1600;

/** The provider's REST API as far as texts go. */
export function restRoutes(gateway: Gateway): Router {
  const router = express.Router();
  const account = '/2010-04-01/Accounts/:account';
  router.use('/2010-04-01', (request, response, next) => {
    if (hasCredentials(gateway, request)) return next();
    return refuse(response, providerErrors.notAuthenticated);
  });
  router.use(account, (request, response, next) => {
    const asked = request.params.account?.replace(/\.json$/, '');
    return asked === gateway.options.accountSid ? next() : notFound(request, response);
  });
  router.post(`${account}/Messages.json`, express.urlencoded({ extended: false }), (request, response) =>
    createMessage(gateway, request, response),
  );
  router.get(`${account}/Messages.json`, (request, response) => {
    response.json(listPage(gateway.listed(), request.originalUrl));
  });
  router.get(`${account}/Messages/:sid.json`, (request, response) => {
    const message = gateway.store.find(request.params.sid ?? '');
    return message ? void response.json(wireMessage(message)) : notFound(request, response);
  });
  router.use('/2010-04-01', notFound);
  return router;
}

function refuse(response: Response, error: ProviderError): void {
  if (error.status === 401) response.set('WWW-Authenticate', 'Basic realm="Twilio API"');
  response.status(error.status).json(errorBody(error));
}

function notFound(request: Request, response: Response): void {
  refuse(response, providerErrors.notFound(request.originalUrl.split('?')[0] ?? ''));
}

function hasCredentials(gateway: Gateway, request: Request): boolean {
  const { accountSid, authToken } = gateway.options;
  const wanted = Buffer.from(`Basic ${Buffer.from(`${accountSid}:${authToken}`).toString('base64')}`);
  const given = Buffer.from(request.headers.authorization ?? '');
  return given.length === wanted.length && timingSafeEqual(given, wanted);
}

type Form = Record<string, string | undefined>;

async function createMessage(gateway: Gateway, request: Request, response: Response): Promise<void> {
  const form = (request.body ?? {}) as Form;
  const to = form.To ?? '';
  const slow = gateway.faults.strike(['slow'], [to]);
  if (slow) await wait(gateway.draw(slow.ms));
  const error = faultBefore(gateway, to) ?? findProblem(gateway, form);
  if (error) return refuse(response, error);
  const message = await gateway.accept({
    direction: 'outbound-api',
    from: form.From ?? '',
    to,
    body: form.Body ?? '',
    statusCallback: form.StatusCallback ?? null,
    validityPeriod: form.ValidityPeriod ?? null,
  });
  await answerAccepted(gateway, message, request, response);
}

function faultBefore(gateway: Gateway, to: string): ProviderError | undefined {
  const fault = gateway.faults.strike(['429', '500', '503'], [to]);
  if (!fault) return undefined;
  if (fault.kind === '429') return providerErrors.tooManyRequests;
  return fault.kind === '500' ? providerErrors.internal : providerErrors.unavailable;
}

/** What the provider would refuse, in the order in which it looks. */
function findProblem(gateway: Gateway, { To: to, From: from, Body: body }: Form): ProviderError | undefined {
  if (!to) return providerErrors.noTo;
  if (!from) return providerErrors.noFrom;
  if (!isE164(to)) return providerErrors.badTo(to);
  if (!isE164(from)) return providerErrors.badFrom(from);
  if (!body) return providerErrors.noBody;
  if ([...body].length > MAX_BODY) return providerErrors.bodyTooLong;
  if (gateway.isNotMobile(to)) return providerErrors.notMobile(to);
  if (gateway.isOptedOut(to, from)) return providerErrors.optedOut;
  return undefined;
}

function isE164(number: string): boolean {
  return /^\+[1-9]\d{6,14}$/.test(number) && isValidPhoneNumber(number);
}

/** The text is taken; whether the sender learns of it is another matter. */
async function answerAccepted(
  gateway: Gateway,
  message: SmsMessage,
  request: Request,
  response: Response,
): Promise<void> {
  const fault = gateway.faults.strike(['500AfterAccept', 'dropAfterAccept', 'hangAfterAccept'], [message.to]);
  if (fault?.kind === 'dropAfterAccept') return void request.socket.destroy();
  if (fault?.kind === '500AfterAccept') return refuse(response, providerErrors.internal);
  if (fault?.kind === 'hangAfterAccept') await wait(gateway.draw(fault.ms));
  response.status(201).json(wireMessage({ ...message, status: 'queued', sentAt: null, errorCode: null }));
}
