import express from 'express';
import type { Request, Response, Router } from 'express';
import { readCalendarFile } from '#fakes/fake-mail/calendarFile';
import type { MailAttachment, MailStore, StoredMail } from '#fakes/fake-mail/mailStore';
import { renderPage, renderTime } from '#fakes/lib/page';
import { escapeHtml, linkify } from '#fakes/lib/text';

const frame = { banner: 'Stand-in mailbox for development: no real mail is sent', home: 'Inbox' };

// A mail's own HTML runs nothing and loads nothing; its links open in the whole tab.
const SANDBOX = 'allow-top-navigation-by-user-activation';
const HTML_POLICY = `sandbox ${SANDBOX}; default-src 'none'; style-src 'unsafe-inline'; img-src data:; base-uri 'self'`;

/** The inbox of everybody, and each mail as its reader would see it. */
export function inboxPages(store: MailStore, zone: string): Router {
  const router = express.Router();
  router.get('/', (request, response) => void response.send(renderInbox(store, zone, addressOf(request))));
  router.get('/live/mails', (request, response) => {
    response.send(renderItems(store, zone, addressOf(request)));
  });
  router.get(
    '/mail/:id',
    withMail(store, (mail, _request, response) => response.send(renderMail(mail, zone))),
  );
  router.get('/mail/:id/html', withMail(store, sendHtml));
  router.get(
    '/mail/:id/raw',
    withMail(store, (mail, _request, response) => response.type('text').send(store.raw(mail.id))),
  );
  router.get('/mail/:id/attachments/:index', withMail(store, sendAttachment));
  return router;
}

type MailHandler = (mail: StoredMail, request: Request, response: Response) => void;

function withMail(store: MailStore, handle: MailHandler): (request: Request, response: Response) => void {
  return (request, response) => {
    const mail = store.find(String(request.params.id));
    if (mail) return handle(mail, request, response);
    const body = '<h1>No such mail</h1><p><a href="/">Back to the inbox</a></p>';
    response.status(404).send(renderPage({ ...frame, title: 'No such mail', body }));
  };
}

function addressOf(request: Request): string {
  return typeof request.query.to === 'string' ? request.query.to.trim() : '';
}

function renderInbox(store: MailStore, zone: string, address: string): string {
  const known = [...new Set(store.all().flatMap((mail) => mail.envelope.to))].sort();
  const options = known.map((to) => `<option value="${escapeHtml(to)}"></option>`).join('');
  const live = address ? `/live/mails?to=${encodeURIComponent(address)}` : '/live/mails';
  const body = `<h1>${address ? `Mail to ${escapeHtml(address)}` : 'All mail'}</h1>
<form class="row" action="/" method="get">
<div><label for="to">Only mail to this address</label>
<input id="to" name="to" type="email" list="known" autocomplete="off" value="${escapeHtml(address)}">
<datalist id="known">${options}</datalist></div>
<button>Show</button>
</form>
${address ? '<p><a href="/">Show all mail</a></p>' : ''}
<ul class="list" data-live="${escapeHtml(live)}" aria-label="Mails, newest first">${renderItems(store, zone, address)}</ul>
<p class="empty">No mail${address ? ' to this address' : ''} yet.</p>`;
  return renderPage({ ...frame, title: 'Inbox', body });
}

function renderItems(store: MailStore, zone: string, address: string): string {
  const mails = address ? store.sentTo(address) : store.all();
  return [...mails]
    .reverse()
    .map((mail) => renderItem(mail, zone))
    .join('');
}

function renderItem(mail: StoredMail, zone: string): string {
  const withFile = mail.attachments.length > 0 ? ' · with a file' : '';
  return `<li data-key="${mail.id}" data-mail="${mail.id}"><a href="/mail/${mail.id}"><span class="who"><b>${escapeHtml(
    mail.subject || '(no subject)',
  )}</b>${renderTime(mail.receivedAt, zone)}</span><span class="what">to ${escapeHtml(mail.envelope.to.join(', '))}${withFile}</span></a></li>`;
}

function renderMail(mail: StoredMail, zone: string): string {
  const title = mail.subject || '(no subject)';
  const body = `<h1>${escapeHtml(title)}</h1>
<dl class="facts"><dt>From</dt><dd>${escapeHtml(mail.from)}</dd><dt>To</dt><dd>${escapeHtml(
    mail.envelope.to.join(', '),
  )}</dd><dt>Received</dt><dd>${renderTime(mail.receivedAt, zone)}</dd></dl>
${renderText(mail)}${renderHtmlFrame(mail)}${renderAttachments(mail)}
<details><summary>Headers</summary><dl class="headers">${Object.entries(mail.headers)
    .map(([name, value]) => `<dt>${escapeHtml(name)}</dt><dd>${escapeHtml(value)}</dd>`)
    .join('')}</dl><p><a href="/mail/${mail.id}/raw">The mail as it came over the wire</a></p></details>
<p><a href="/">Back to the inbox</a></p>`;
  return renderPage({ ...frame, title, body });
}

function renderText(mail: StoredMail): string {
  if (!mail.text.trim()) return '<p class="quiet">This mail has no text part.</p>';
  return `<h2>Text</h2><div class="paper" data-mail-text>${linkify(mail.text.trim())}</div>`;
}

function renderHtmlFrame(mail: StoredMail): string {
  if (!mail.html) return '';
  return `<h2>Formatted</h2><iframe class="paper" title="Formatted mail" sandbox="${SANDBOX}" src="/mail/${mail.id}/html"></iframe>`;
}

function renderAttachments(mail: StoredMail): string {
  const shown = mail.attachments.map((file, index) => {
    const link = `<a href="/mail/${mail.id}/attachments/${index}" download="${escapeHtml(file.filename)}">Download ${escapeHtml(file.filename)}</a>`;
    return `<section class="file" data-attachment="${escapeHtml(file.filename)}">${
      file.contentType === 'text/calendar' ? renderCalendar(file) : ''
    }<p>${link} <span class="quiet">${escapeHtml(file.contentType)}, ${file.size} bytes</span></p></section>`;
  });
  return shown.length > 0 ? `<h2>Files</h2>${shown.join('')}` : '';
}

function renderCalendar(file: MailAttachment): string {
  const event = readCalendarFile(file.content);
  const facts: [string, string][] = [
    ['What', event.summary],
    ['Starts', event.start],
    ['Ends', event.end],
    ['Where', event.location],
    ['Notes', event.description],
    ['Method', event.method],
    ['Status', event.status],
    ['Version', event.sequence],
  ];
  const rows = facts.filter(([, value]) => value !== '');
  return `<h3>Calendar entry</h3><dl class="facts" data-calendar>${rows
    .map(([name, value]) => `<dt>${name}</dt><dd data-calendar-${name.toLowerCase()}>${linkify(value)}</dd>`)
    .join('')}</dl>`;
}

function sendHtml(mail: StoredMail, _request: Request, response: Response): void {
  response.set('Content-Security-Policy', HTML_POLICY);
  response.type('html').send(`<base target="_top">${mail.html ?? ''}`);
}

function sendAttachment(mail: StoredMail, request: Request, response: Response): void {
  const file = mail.attachments[Number(request.params.index)];
  if (!file) {
    response.status(404).type('text').send('No such file.');
    return;
  }
  response.attachment(file.filename).type(file.contentType).send(Buffer.from(file.content, file.encoding));
}
