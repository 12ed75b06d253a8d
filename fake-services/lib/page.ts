import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import express from 'express';
import type { Express } from 'express';
import { DateTime } from 'luxon';
import { escapeHtml } from '#fakes/lib/text';

const SHARED_CSS = readFileSync(new URL('./page.css', import.meta.url), 'utf8');
const LIVE_SCRIPT = readFileSync(new URL('./live.js', import.meta.url), 'utf8');

const PAGE_POLICY = [
  "default-src 'none'",
  "style-src 'self'",
  "script-src 'self'",
  "connect-src 'self'",
  "img-src 'self' data:",
  "frame-src 'self'",
  "form-action 'self'",
  "base-uri 'none'",
].join('; ');

export interface Page {
  title: string;
  /** Said on top of every page, so that nobody takes the stand-in for the real thing. */
  banner: string;
  /** Where the name in the header leads, and that name. */
  home: string;
  body: string;
}

/** A whole HTML document in the fakes' common frame. */
export function renderPage({ title, banner, home, body }: Page): string {
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="referrer" content="no-referrer">
<title>${escapeHtml(title)}</title>
<link rel="icon" href="data:,">
<link rel="stylesheet" href="/static/page.css">
<link rel="stylesheet" href="/static/own.css">
<script src="/static/live.js" type="module"></script>
</head>
<body>
<a class="skip" href="#main">Skip to content</a>
<header>
<p class="banner"><strong>${escapeHtml(banner)}</strong></p>
<div class="top"><a href="/">${escapeHtml(home)}</a></div>
</header>
<main id="main">${body}</main>
</body>
</html>`;
}

/** The stylesheet and the script that refreshes lists, and the headers of every page. */
export function servePageFiles(app: Express, ownFolder: URL): void {
  app.use((_request, response, next) => {
    response.set({
      'Content-Security-Policy': PAGE_POLICY,
      'X-Content-Type-Options': 'nosniff',
      'Referrer-Policy': 'no-referrer',
      'Cache-Control': 'no-store',
    });
    next();
  });
  app.get('/static/page.css', (_request, response) => void response.type('css').send(SHARED_CSS));
  app.get('/static/live.js', (_request, response) => void response.type('js').send(LIVE_SCRIPT));
  app.use('/static', express.static(fileURLToPath(ownFolder)));
}

/** Day and time in the zone, with its abbreviation, as one `<time>` element. */
export function renderTime(iso: string, zone: string): string {
  const at = DateTime.fromISO(iso, { zone });
  return `<time datetime="${escapeHtml(iso)}">${escapeHtml(at.toFormat('ccc d LLL, HH:mm:ss ZZZZ'))}</time>`;
}
