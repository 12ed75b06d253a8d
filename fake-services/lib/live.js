/*
 * Keeps every [data-live] list fresh: asks its address once a second and exchanges only the items that changed, so
 * that focus, a selection and the reader's place stay where they are.
 */
const lists = [...document.querySelectorAll('[data-live]')];

function atFoot() {
  return window.innerHeight + window.scrollY >= document.documentElement.scrollHeight - 60;
}

function exchange(list, html) {
  const template = document.createElement('template');
  template.innerHTML = html;
  const present = new Map([...list.children].map((item) => [item.dataset.key, item]));
  const wanted = [...template.content.children].map((fresh) => {
    const old = present.get(fresh.dataset.key);
    return old && old.outerHTML === fresh.outerHTML ? old : fresh;
  });
  const unchanged =
    wanted.length === list.children.length && wanted.every((item, index) => item === list.children[index]);
  if (unchanged) return false;
  wanted.forEach((item, index) => {
    if (list.children[index] !== item) list.insertBefore(item, list.children[index] ?? null);
  });
  while (list.children.length > wanted.length) list.lastElementChild.remove();
  return true;
}

async function refresh(list) {
  const follow = list.dataset.follow === 'foot' && atFoot();
  try {
    const answer = await fetch(list.dataset.live, { headers: { Accept: 'text/html' } });
    if (!answer.ok) return;
    if (exchange(list, await answer.text()) && follow) toFoot();
  } catch {
    // The fake is being restarted; the next second asks again.
  }
}

function toFoot() {
  window.scrollTo(0, document.documentElement.scrollHeight);
}

async function poll(list) {
  for (;;) {
    await new Promise((resolve) => setTimeout(resolve, 1000));
    if (document.visibilityState === 'visible') await refresh(list);
  }
}

for (const list of lists) void poll(list);
if (lists.some((list) => list.dataset.follow === 'foot')) toFoot();

/* Answers go out without leaving the page. Without this script the form works as a plain one. */
for (const form of document.querySelectorAll('form[data-send]')) {
  form.addEventListener('submit', async (event) => {
    event.preventDefault();
    const button = form.querySelector('button');
    const status = form.querySelector('[role=status]');
    button.disabled = true;
    try {
      const answer = await fetch(form.action, {
        method: 'POST',
        body: new URLSearchParams(new FormData(form)),
      });
      status.textContent = answer.ok ? '' : await answer.text();
      if (answer.ok && form.dataset.send === 'reload') return void window.location.assign(answer.url);
      if (answer.ok) form.querySelector('textarea').value = '';
    } catch {
      status.textContent = 'The stand-in does not answer. Is it still running?';
    } finally {
      button.disabled = false;
    }
    await Promise.all(lists.map(refresh));
    toFoot();
  });
  // As on a phone: Enter sends, Shift and Enter make a new line.
  form.querySelector('textarea')?.addEventListener('keydown', (event) => {
    if (event.key !== 'Enter' || event.shiftKey || event.isComposing) return;
    event.preventDefault();
    form.requestSubmit();
  });
}
