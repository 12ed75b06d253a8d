import express from 'express';
import type { Request, Response, Router } from 'express';
import { findSettingsProblem } from '#fakes/fake-sms/faults';
import type { SmsFaultSettings } from '#fakes/fake-sms/faults';
import type { Gateway } from '#fakes/fake-sms/gateway';

/** What no provider has: the harness reads, breaks and mends the gateway here. */
export function controlRoutes(gateway: Gateway): Router {
  const router = express.Router();
  router.use(express.json());
  router.get('/messages', (request, response) => listLog(gateway, request, response));
  router.post('/inbound', (request, response) => sendInbound(gateway, request, response));
  router.get('/faults', (_request, response) => void response.json(gateway.settings()));
  router.post('/faults', (request, response) => setFaults(gateway, request, response));
  router.delete('/faults', (_request, response) => {
    gateway.clear();
    response.status(204).end();
  });
  router.post('/hook', (request, response) => setHook(gateway, request, response));
  router.delete('/hook', (_request, response) => {
    gateway.hookUrl = undefined;
    response.status(204).end();
  });
  return router;
}

/** Every text, oldest first. `since` is an ISO instant on the fake's clock. */
function listLog(gateway: Gateway, request: Request, response: Response): void {
  const { to, from, since } = request.query;
  const messages = gateway.store.all().filter((message) => {
    if (typeof to === 'string' && message.to !== to) return false;
    if (typeof from === 'string' && message.from !== from) return false;
    return typeof since !== 'string' || Date.parse(message.createdAt) >= Date.parse(since);
  });
  response.json({ messages });
}

async function sendInbound(gateway: Gateway, request: Request, response: Response): Promise<void> {
  const { from, to, body } = (request.body ?? {}) as Record<string, unknown>;
  if (typeof from !== 'string' || typeof to !== 'string' || typeof body !== 'string') {
    response.status(400).json({ message: 'Send from, to and body as strings.' });
    return;
  }
  response.json(await gateway.receive(from, to, body));
}

function setFaults(gateway: Gateway, request: Request, response: Response): void {
  const settings = (request.body ?? {}) as SmsFaultSettings;
  const problem = findSettingsProblem(settings);
  if (problem) {
    response.status(400).json({ message: problem });
    return;
  }
  gateway.set(settings);
  response.json(gateway.settings());
}

function setHook(gateway: Gateway, request: Request, response: Response): void {
  const { url } = (request.body ?? {}) as Record<string, unknown>;
  if (typeof url !== 'string' || !URL.canParse(url)) {
    response.status(400).json({ message: 'Send url: the address to call between acceptance and answer.' });
    return;
  }
  gateway.hookUrl = url;
  response.status(204).end();
}
