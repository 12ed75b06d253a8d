const ENTITIES: Record<string, string> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};

/** Text made safe for HTML, in elements and in quoted attributes. */
export function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (sign) => ENTITIES[sign] ?? sign);
}

// With a scheme, or as texts shorten it: a host with a path behind it.
const LINK = /https?:\/\/[^\s<>"]+|\b(?:localhost|(?:[a-z0-9-]+\.)+[a-z0-9]+)(?::\d+)?\/[^\s<>"]+/gi;
const LOOPBACK = /^(?:localhost|127\.)/i;

/** Escaped text whose addresses can be followed, as a phone or a mail program shows them. */
export function linkify(text: string): string {
  let html = '';
  let read = 0;
  for (const match of text.matchAll(LINK)) {
    const shown = match[0].replace(/[.,;:!?)\]]+$/, '');
    html += escapeHtml(text.slice(read, match.index));
    html += `<a href="${escapeHtml(targetOf(shown))}" rel="noreferrer">${escapeHtml(shown)}</a>`;
    read = match.index + shown.length;
  }
  return html + escapeHtml(text.slice(read));
}

function targetOf(shown: string): string {
  if (/^https?:/i.test(shown)) return shown;
  return `${LOOPBACK.test(shown) ? 'http' : 'https'}://${shown}`;
}
