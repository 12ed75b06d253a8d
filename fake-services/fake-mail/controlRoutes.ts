import express from 'express';
import type { Request, Response, Router } from 'express';
import { findMailFaultProblem } from '#fakes/fake-mail/faults';
import type { MailFault, MailFaultSettings } from '#fakes/fake-mail/faults';
import type { MailStore } from '#fakes/fake-mail/mailStore';
import type { FaultBook } from '#fakes/lib/faultBook';

/** What no mail server has: the harness reads, breaks and mends the sink here. */
export function controlRoutes(store: MailStore, faults: FaultBook<MailFault>): Router {
  const router = express.Router();
  router.use(express.json());
  router.get('/messages', (request, response) => listMails(store, request, response));
  router.get('/faults', (_request, response) => void response.json({ faults: faults.list() }));
  router.post('/faults', (request, response) => setFaults(faults, request, response));
  router.delete('/faults', (_request, response) => {
    faults.clear();
    response.status(204).end();
  });
  return router;
}

/** Every mail, oldest first. `since` is an ISO instant on the fake's clock. */
function listMails(store: MailStore, request: Request, response: Response): void {
  const { to, since } = request.query;
  const mails = typeof to === 'string' ? store.sentTo(to) : store.all();
  const from = typeof since === 'string' ? Date.parse(since) : -Infinity;
  response.json({ messages: mails.filter((mail) => Date.parse(mail.receivedAt) >= from) });
}

function setFaults(faults: FaultBook<MailFault>, request: Request, response: Response): void {
  const settings = (request.body ?? {}) as MailFaultSettings;
  const problem = findMailFaultProblem(settings);
  if (problem) {
    response.status(400).json({ message: problem });
    return;
  }
  if (settings.seed !== undefined) faults.reseed(settings.seed);
  faults.add(settings.faults ?? []);
  response.json({ faults: faults.list() });
}
