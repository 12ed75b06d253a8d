/**
 * Reads the visit behind the link and keeps it fresh: every ten seconds while somebody looks, on return to the
 * page, and at the moment the answer names as its next change. A lost signal keeps the last answer on screen.
 */
import { onScopeDispose, shallowReadonly, shallowRef, type Ref } from 'vue';
import { keptView, keepView, forgetView } from './keptView';
import type { ErrorAnswer } from '#shared/errors';
import type { LinkEndedDetails, StubView } from '#shared/schemas/stub';

const EVERY = 10_000;
/** The answer must already have changed when we ask for the change. */
const AFTER_CHANGE = 250;
const GIVE_UP = 15_000;

/** Why the last attempt brought nothing new. */
export type StubTrouble = 'no_signal' | 'no_answer';
export type StubEnd = { code: 'not_found' | 'link_ended'; shop: LinkEndedDetails['shop'] | null };

export interface Stub {
  view: Readonly<Ref<StubView | null>>;
  trouble: Readonly<Ref<StubTrouble | null>>;
  /** Set when the link opens nothing any more. */
  end: Readonly<Ref<StubEnd | null>>;
  refresh: () => Promise<void>;
}

type Reading = { view: StubView } | { end: StubEnd } | { trouble: StubTrouble };

/** When to ask again, in milliseconds from now. */
export function untilNextRead(view: StubView | null): number {
  if (!view?.nextChangeAt) return EVERY;
  const wait = Date.parse(view.nextChangeAt) - Date.parse(view.now);
  return wait <= 0 ? EVERY : Math.min(EVERY, wait + AFTER_CHANGE);
}

function isEnd(code: string): code is StubEnd['code'] {
  return code === 'not_found' || code === 'link_ended';
}

async function readError(response: Response): Promise<Reading> {
  const body = (await response.json().catch(() => null)) as Partial<ErrorAnswer> | null;
  const code = body?.error?.code ?? '';
  if (!isEnd(code)) return { trouble: 'no_answer' };
  const details = body?.error?.details as Partial<LinkEndedDetails> | undefined;
  return { end: { code, shop: details?.shop ?? null } };
}

async function read(token: string): Promise<Reading> {
  const url = `/api/t/${encodeURIComponent(token)}`;
  try {
    const response = await fetch(url, { cache: 'no-store', signal: AbortSignal.timeout(GIVE_UP) });
    return response.ok ? { view: (await response.json()) as StubView } : await readError(response);
  } catch {
    return { trouble: 'no_signal' };
  }
}

/** Follows the visit behind `token` until the surrounding scope ends. */
export function useStub(token: string): Stub {
  const view = shallowRef<StubView | null>(keptView(token));
  const trouble = shallowRef<StubTrouble | null>(null);
  const end = shallowRef<StubEnd | null>(null);
  let timer: ReturnType<typeof setTimeout> | undefined;
  let reading: Promise<void> | null = null;

  function take(result: Reading): void {
    trouble.value = 'trouble' in result ? result.trouble : null;
    if ('view' in result) {
      view.value = result.view;
      keepView(token, result.view);
    } else if ('end' in result) {
      end.value = { ...result.end, shop: result.end.shop ?? view.value?.shop ?? null };
      view.value = null;
      forgetView(token);
    }
  }

  function plan(): void {
    clearTimeout(timer);
    if (end.value || document.visibilityState !== 'visible') return;
    timer = setTimeout(() => void refresh(), trouble.value ? EVERY : untilNextRead(view.value));
  }

  function refresh(): Promise<void> {
    if (end.value) return Promise.resolve();
    // Focus and visibility often fire together: one question at a time answers both.
    reading ??= read(token).then((result) => {
      reading = null;
      take(result);
      plan();
    });
    return reading;
  }

  const onReturn = (): void => {
    if (document.visibilityState === 'visible') void refresh();
    else clearTimeout(timer);
  };
  window.addEventListener('focus', onReturn);
  window.addEventListener('online', onReturn);
  document.addEventListener('visibilitychange', onReturn);
  onScopeDispose(() => {
    clearTimeout(timer);
    end.value ??= { code: 'not_found', shop: null };
    window.removeEventListener('focus', onReturn);
    window.removeEventListener('online', onReturn);
    document.removeEventListener('visibilitychange', onReturn);
  });
  void refresh();

  return {
    view: shallowReadonly(view),
    trouble: shallowReadonly(trouble),
    end: shallowReadonly(end),
    refresh,
  };
}
