import express from 'express';
import type { Request, Response, Router } from 'express';
import type { Gateway } from '#fakes/fake-sms/gateway';
import type { SmsMessage } from '#fakes/fake-sms/message';
import { renderPage, renderTime } from '#fakes/lib/page';
import { escapeHtml, linkify } from '#fakes/lib/text';

const frame = { banner: 'Stand-in phones for development: no real text is sent', home: 'Phones' };
const E164 = /^\+[1-9]\d{6,14}$/;

/** The phones that texts went to, each to be read and answered as its owner would. */
export function phonePages(gateway: Gateway, zone: string): Router {
  const router = express.Router();
  router.get('/', (_request, response) => void response.send(renderPhones(gateway, zone)));
  router.get('/live/phones', (_request, response) => void response.send(renderPhoneItems(gateway, zone)));
  router.get('/open', openPhone);
  router.get('/phones/:phone', (request, response) => showPhone(gateway, zone, request, response));
  router.get('/live/phones/:phone', (request, response) => {
    const { phone } = request.params;
    response.send(renderBubbles(thread(gateway, phone, textOf(request.query.with)), phone, zone));
  });
  router.post('/phones/:phone', express.urlencoded({ extended: false }), (request, response) =>
    answerFromPhone(gateway, request, response),
  );
  return router;
}

function textOf(value: unknown): string {
  return typeof value === 'string' ? value : '';
}

function openPhone(request: Request, response: Response): void {
  const phone = textOf(request.query.number).replace(/[\s().-]/g, '');
  if (!E164.test(phone)) {
    response.status(400).send(renderNotice('That is not a phone number. Write it like +13035550142.'));
    return;
  }
  response.redirect(303, `/phones/${phone}`);
}

function renderNotice(text: string): string {
  const body = `<h1>No such phone</h1><p class="bad">${escapeHtml(text)}</p><p><a href="/">Back to all phones</a></p>`;
  return renderPage({ ...frame, title: 'Phones', body });
}

const phoneOf = (message: SmsMessage): string =>
  message.direction === 'inbound' ? message.from : message.to;
const senderOf = (message: SmsMessage): string =>
  message.direction === 'inbound' ? message.to : message.from;

/** The last text of each phone, newest first. */
function lastTexts(gateway: Gateway): Map<string, SmsMessage> {
  const last = new Map<string, SmsMessage>();
  for (const message of [...gateway.store.all()].reverse()) {
    if (!last.has(phoneOf(message))) last.set(phoneOf(message), message);
  }
  return last;
}

function renderPhones(gateway: Gateway, zone: string): string {
  const body = `<h1>Phones</h1>
<form class="row" action="/open" method="get">
<div><label for="number">Open a phone by its number</label>
<input id="number" name="number" type="tel" inputmode="tel" autocomplete="off" placeholder="+13035550142" required></div>
<button>Open phone</button>
</form>
<ul class="list" data-live="/live/phones" aria-label="Phones that have texts">${renderPhoneItems(gateway, zone)}</ul>
<p class="empty">No texts yet. Phones appear here with their first text.</p>`;
  return renderPage({ ...frame, title: 'Phones', body });
}

function renderPhoneItems(gateway: Gateway, zone: string): string {
  const items = [...lastTexts(gateway)].map(([phone, message]) => {
    const who = `<span class="who"><b>${escapeHtml(phone)}</b>${renderTime(message.createdAt, zone)}</span>`;
    const what = `<span class="what">${escapeHtml(message.body)}</span>`;
    return `<li data-key="${escapeHtml(phone)}"><a href="/phones/${escapeHtml(phone)}">${who}${what}</a></li>`;
  });
  return items.join('');
}

function thread(gateway: Gateway, phone: string, sender: string): SmsMessage[] {
  return gateway.store.all().filter((message) => phoneOf(message) === phone && senderOf(message) === sender);
}

/** Numbers that wrote to this phone, the latest first. */
function sendersTo(gateway: Gateway, phone: string): string[] {
  const texts = gateway.store.all().filter((message) => phoneOf(message) === phone);
  return [...new Set(texts.reverse().map(senderOf))];
}

function showPhone(gateway: Gateway, zone: string, request: Request, response: Response): void {
  const phone = String(request.params.phone);
  if (!E164.test(phone)) {
    response.status(404).send(renderNotice('Write the number like +13035550142.'));
    return;
  }
  const senders = sendersTo(gateway, phone);
  const chosen = typeof request.query.with === 'string' ? request.query.with : senders[0];
  const title = `Phone ${phone}`;
  const body = `<h1>${escapeHtml(title)}</h1>${renderSenders(phone, senders, chosen)}${
    chosen ? renderThread(gateway, phone, chosen, zone) : renderFirst(phone)
  }`;
  response.send(renderPage({ ...frame, title, body }));
}

function renderSenders(phone: string, senders: string[], chosen: string | undefined): string {
  if (senders.length < 2) return chosen ? `<p class="quiet">With ${escapeHtml(chosen)}</p>` : '';
  const links = senders.map((sender) => {
    const current = sender === chosen ? ' aria-current="page"' : '';
    return `<a href="/phones/${phone}?with=${encodeURIComponent(sender)}"${current}>${escapeHtml(sender)}</a>`;
  });
  return `<nav class="senders" aria-label="Texts with">${links.join('')}</nav>`;
}

function renderThread(gateway: Gateway, phone: string, sender: string, zone: string): string {
  const live = `/live/phones/${phone}?with=${encodeURIComponent(sender)}`;
  return `<div role="log" aria-label="Texts"><ol class="thread" data-live="${escapeHtml(live)}" data-follow="foot">${renderBubbles(
    thread(gateway, phone, sender),
    phone,
    zone,
  )}</ol></div>
<form class="answer" method="post" action="/phones/${phone}" data-send="stay">
<input type="hidden" name="to" value="${escapeHtml(sender)}">
<div class="row"><div><label for="body">Answer as ${escapeHtml(phone)}</label>
<textarea id="body" name="body" rows="1" required></textarea></div><button>Send</button></div>
<p class="bad" role="status"></p>
</form>`;
}

function renderFirst(phone: string): string {
  return `<p>No texts on this phone yet. Send the first one:</p>
<form class="first" method="post" action="/phones/${phone}" data-send="reload">
<div><label for="to">To</label><input id="to" name="to" type="tel" inputmode="tel" required></div>
<div><label for="body">Text</label><textarea id="body" name="body" rows="2" required></textarea></div>
<button>Send</button>
<p class="bad" role="status"></p>
</form>`;
}

function renderBubbles(messages: SmsMessage[], phone: string, zone: string): string {
  return messages.map((message) => renderBubble(message, phone, zone)).join('');
}

function renderBubble(message: SmsMessage, phone: string, zone: string): string {
  const mine = message.direction === 'inbound';
  const code = message.errorCode === null ? '' : ` (${message.errorCode})`;
  const status = mine ? 'sent from this phone' : `${message.status}${code}`;
  return `<li class="${mine ? 'mine' : 'theirs'}" data-message="${message.sid}" data-key="${message.sid}" data-direction="${
    message.direction
  }" data-status="${message.status}"><span class="who-says">${escapeHtml(mine ? phone : message.from)} says</span><p>${linkify(
    message.body,
  )}</p><span class="state">${escapeHtml(status)} · ${renderTime(message.createdAt, zone)}</span></li>`;
}

async function answerFromPhone(gateway: Gateway, request: Request, response: Response): Promise<void> {
  const phone = String(request.params.phone);
  const { to, body } = (request.body ?? {}) as Record<string, string | undefined>;
  const sender = (to ?? '').replace(/[\s().-]/g, '');
  if (!E164.test(phone) || !E164.test(sender) || !body?.trim()) {
    response.status(400).type('text').send('A number to answer and a text are needed.');
    return;
  }
  const { webhookStatus } = await gateway.receive(phone, sender, body.trim());
  if (webhookStatus === null && gateway.options.inboundUrl) {
    response.status(502).type('text').send('The text was sent, but the shop did not pick it up.');
    return;
  }
  response.redirect(303, `/phones/${phone}?with=${encodeURIComponent(sender)}`);
}
