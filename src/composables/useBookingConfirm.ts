/** Asks for the phone's code and books, with one key for one intent however often it is tried. */
import { useQueryCache } from '@pinia/colada';
import { computed, shallowRef } from 'vue';
import type { z } from 'zod';
import type { BookingDraft, BookingPart, WhoForm } from './useBookingDraft';
import { ApiError } from '@/api/client';
import { book } from '@/api/bookings';
import { askCode } from '@/api/session';
import { currentLanguage } from '@/i18n';
import { clearDraft, readDraft, writeDraft } from '@/lib/draft';
import { randomId } from '@/lib/randomId';
import type { BookAnswer, BookBody } from '#shared/schemas/booking';
import type { WhichPersonDetails } from '#shared/schemas/session';
import type { TimesFullDetails } from '#shared/schemas/shop';

type People = WhichPersonDetails['people'];

/** The key of this intent, kept with the draft: a reload between two tries must not book twice. */
function keyOfIntent(draftKey: string, body: BookBody): string {
  const guest = body.guest && { ...body.guest, requestId: '', code: '' };
  const intent = JSON.stringify({ ...body, guest });
  const kept = readDraft(draftKey, { intent: '', key: '' });
  if (kept.intent === intent && kept.key) return kept.key;
  const key = randomId();
  writeDraft(draftKey, { intent, key });
  return key;
}

/** @param isGuest whether the booking carries a guest and the code that proves the phone */
export function useBookingConfirm(draft: BookingDraft, isGuest: () => boolean) {
  const cache = useQueryCache();
  const isBusy = shallowRef(false);
  const failure = shallowRef<unknown>(null);
  const nextTimes = shallowRef<string[]>([]);
  const people = shallowRef<People>([]);
  const faultIn = shallowRef<BookingPart | null>(null);
  const answerKey = draft.draftKey('done');
  const answer = shallowRef<BookAnswer | null>(readAnswer(answerKey));
  const failureCode = computed(() => (failure.value instanceof ApiError ? failure.value.code : null));

  async function guarded<Result>(act: () => Promise<Result>): Promise<Result | undefined> {
    if (isBusy.value) return undefined;
    isBusy.value = true;
    failure.value = null;
    faultIn.value = null;
    try {
      return await act();
    } catch (error) {
      fail(error);
      return undefined;
    } finally {
      isBusy.value = false;
    }
  }

  function fail(error: unknown): void {
    failure.value = error;
    if (!(error instanceof ApiError)) return;
    if (error.code === 'which_person') people.value = (error.details as WhichPersonDetails).people;
    if (error.code === 'times_full') takeFullTime(error.details as TimesFullDetails);
    faultIn.value = draft.takeFault(error);
  }

  function takeFullTime(details: TimesFullDetails): void {
    nextTimes.value = details.next;
    void cache.invalidateQueries({ key: ['shop', draft.slug, 'times'] });
  }

  /** Sends a code to the guest's phone, unless one is under way to it. @returns whether one is */
  async function sendCode(again = false): Promise<boolean> {
    const guest = draft.who.validate();
    if (!guest) return false;
    if (!again && draft.proof.phone === guest.phone && draft.proof.requestId) return true;
    const sent = await guarded(() =>
      askCode(draft.slug, {
        phone: guest.phone,
        purpose: 'book',
        language: currentLanguage(),
        consent: guest.textConsent,
      }),
    );
    if (!sent) return false;
    Object.assign(draft.proof, { requestId: sent.requestId, phone: guest.phone, personId: '' });
    people.value = [];
    draft.code.reset();
    return true;
  }

  function bodyOf(code: string): BookBody | undefined {
    const visit = draft.visit.validate();
    const guest = isGuest() ? draft.who.validate() : null;
    if (!visit || guest === undefined) return undefined;
    const body = { ...visit, language: currentLanguage(), textConsent: draft.who.values.textConsent };
    return guest ? { ...body, guest: guestOf(guest, code) } : body;
  }

  function guestOf(who: z.output<typeof WhoForm>, code: string): BookBody['guest'] {
    const { requestId, personId } = draft.proof;
    const { name, accountName, phone, email } = who;
    return { name, accountName, phone, email, requestId, code, ...(personId ? { personId } : {}) };
  }

  /** @returns whether it is booked */
  async function confirm(): Promise<boolean> {
    const code = isGuest() ? draft.code.validate()?.code : '';
    const body = code === undefined ? undefined : bodyOf(code);
    if (!body) return false;
    const booked = await guarded(() => book(draft.slug, body, keyOfIntent(draft.draftKey('key'), body)));
    if (!booked) return false;
    answer.value = booked;
    writeDraft(answerKey, booked);
    draft.clear();
    void cache.invalidateQueries({ key: ['shop', draft.slug, 'times'] });
    void cache.invalidateQueries({ key: ['fleet'] });
    return true;
  }

  /** Another of the free times, after the chosen one filled up. */
  function takeTime(at: string): void {
    draft.visit.values.arrivesAt = at;
    nextTimes.value = [];
    failure.value = null;
  }

  function startAnother(): void {
    answer.value = null;
    clearDraft(answerKey);
  }

  return {
    isBusy,
    failure,
    failureCode,
    faultIn,
    nextTimes,
    people,
    answer,
    sendCode,
    confirm,
    takeTime,
    startAnother,
  };
}

export type BookingConfirm = ReturnType<typeof useBookingConfirm>;

function readAnswer(key: string): BookAnswer | null {
  const blank = {
    visitId: '',
    stubCode: '',
    stubPath: '',
    arrivesAt: '',
    jobs: [],
    toldBy: { text: false, email: false },
  };
  const kept: BookAnswer = readDraft(key, blank);
  return kept.stubPath ? kept : null;
}
