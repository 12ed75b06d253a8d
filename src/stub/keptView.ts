/** The last answer, kept for the tab alone, so that a reload without signal still shows where the machines are. */
import type { StubView } from '#shared/schemas/stub';

const key = (token: string): string => `benchbell.stub.${token}`;

/** The answer kept for this link, or null. */
export function keptView(token: string): StubView | null {
  try {
    const kept = sessionStorage.getItem(key(token));
    return kept ? (JSON.parse(kept) as StubView) : null;
  } catch {
    return null;
  }
}

export function keepView(token: string, view: StubView): void {
  try {
    sessionStorage.setItem(key(token), JSON.stringify(view));
  } catch {
    // Full or forbidden storage: the answer still lives in memory.
  }
}

export function forgetView(token: string): void {
  try {
    sessionStorage.removeItem(key(token));
  } catch {
    // Nothing was kept where nothing can be removed.
  }
}
