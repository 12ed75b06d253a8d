/** What somebody is typing, kept for this tab only. Storage may be switched off or full: then nothing is kept. */
const PREFIX = 'benchbell.draft.';

/** Puts a kept draft over the blank form; fields that the form no longer has are dropped. */
export function readDraft<Form extends object>(key: string | undefined, blank: Form): Form {
  if (!key) return blank;
  try {
    const kept = JSON.parse(sessionStorage.getItem(PREFIX + key) ?? '{}') as Partial<Form>;
    const known = Object.entries(kept).filter(([name]) => name in blank);
    return Object.assign(blank, Object.fromEntries(known));
  } catch {
    return blank;
  }
}

export function writeDraft(key: string | undefined, form: object): void {
  if (!key) return;
  try {
    sessionStorage.setItem(PREFIX + key, JSON.stringify(form));
  } catch {
    // Nothing to be done: the form itself still holds what was typed.
  }
}

export function clearDraft(key: string | undefined): void {
  if (key) sessionStorage.removeItem(PREFIX + key);
}
