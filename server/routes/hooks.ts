/** The provider's webhooks. Proof is its signature over our public address; the shop comes from the address or the number. */
import express, { type Request, type RequestHandler } from 'express';
import twilio from 'twilio';
import { z } from 'zod';
import type { Services } from '#server/lib/context';
import { rows, withShop } from '#server/lib/db';
import { receiveText } from '#server/messages/receiveText';
import { recordStatus } from '#server/messages/recordStatus';
import { taskCtx } from '#server/messages/taskCtx';
import { Shop } from '#server/models/index';
import type { RawRouteDefinition } from './route';

const StatusPath = z.object({
  shopId: z.uuid(),
  messageId: z.uuid(),
  attempt: z.string().regex(/^[1-9]\d{0,5}$/),
});
const providerId = z.string().regex(/^(SM|MM)[0-9a-f]{32}$/i);
const StatusBody = z.object({
  MessageSid: providerId,
  MessageStatus: z.string().regex(/^[a-z_]{1,30}$/),
  ErrorCode: z
    .string()
    .regex(/^\d{1,6}$/)
    .optional(),
});
const phone = z.string().regex(/^\+[1-9]\d{6,14}$/);
const InboundBody = z.object({
  MessageSid: providerId,
  From: phone,
  To: phone,
  Body: z.string().max(10_000),
});

/** Says that nothing is to be sent in answer: our answers are messages of their own. */
const NO_ANSWER = '<?xml version="1.0" encoding="UTF-8"?><Response></Response>';

/** The webhooks, for the route table. */
export function hookRoutes(services: Services): RawRouteDefinition[] {
  const form = express.urlencoded({ extended: false, limit: '100kb' });
  const signed = requireSignature(services);
  const access = { public: 'The text provider proves itself by its signature.' };
  return [
    { method: 'post', path: '/hooks/sms/inbound', access, raw: [form, signed, inboundText(services)] },
    {
      method: 'post',
      path: '/hooks/sms/status/:shopId/:messageId/:attempt',
      access,
      raw: [form, signed, textStatus(services)],
    },
  ];
}

/** The signed address is made from our own public one: what a request says of its host proves nothing. */
function requireSignature({ env, log }: Services): RequestHandler {
  return (req, res, next) => {
    const signature = req.get('x-twilio-signature') ?? '';
    const url = `${env.PUBLIC_URL}${req.originalUrl}`;
    if (twilio.validateRequest(env.TWILIO_AUTH_TOKEN, signature, url, formOf(req))) return next();
    log.warn({ ip: req.ip }, 'a webhook without a right signature');
    res.status(403).type('text/plain').send('The signature is not right.');
  };
}

function formOf(req: Request): Record<string, unknown> {
  return (req.body ?? {}) as Record<string, unknown>;
}

/** A report on a text of ours. */
function textStatus(services: Services): RequestHandler {
  return async (req, res) => {
    const path = StatusPath.safeParse(req.params);
    if (!path.success || !(await Shop.findByPk(path.data.shopId))) return void res.status(404).end();
    const body = StatusBody.safeParse(formOf(req));
    if (!body.success) return void res.status(400).end();
    const { shopId, messageId } = path.data;
    const { MessageSid, MessageStatus: status, ErrorCode: errorCode = null } = body.data;
    const report = { messageId, providerId: MessageSid, status, errorCode };
    await withShop(shopId, () => recordStatus(taskCtx(services, shopId), report));
    res.status(204).end();
  };
}

/** A text from a customer, to one of our shops' numbers. */
function inboundText(services: Services): RequestHandler {
  return async (req, res) => {
    const body = InboundBody.safeParse(formOf(req));
    if (!body.success) return void res.status(400).end();
    const { MessageSid, From: from, To: to, Body } = body.data;
    const [sender] = await rows<{ shopId: string }>(
      'select shop_id as "shopId" from sender_numbers where phone = $1',
      [to],
    );
    if (!sender) return void res.status(404).end();
    const text = { providerId: MessageSid, from, to, body: Body };
    await withShop(sender.shopId, () => receiveText(taskCtx(services, sender.shopId), text));
    res.type('text/xml').send(NO_ANSWER);
  };
}
