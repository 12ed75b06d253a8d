/**
 * Everything that is typed while booking: the visit, who books, and the proof of the phone. Kept in this tab until
 * it is booked, so that no error, reload or step back loses a word.
 */
import { computed, reactive, watch } from 'vue';
import { z } from 'zod';
import { useZodForm } from './useZodForm';
import { ApiError } from '@/api/client';
import { clearDraft, readDraft, writeDraft } from '@/lib/draft';
import { BookBody, BookingGuest, type BookingMachine } from '#shared/schemas/booking';

const { arrivesAt, machines, note } = BookBody.shape;
export const VisitForm = z.strictObject({ arrivesAt, machines, note });

const { name, accountName, phone, email } = BookingGuest.shape;
export const WhoForm = z
  .strictObject({ name, accountName, phone, email, textConsent: z.boolean() })
  .refine((who) => who.textConsent || who.email !== '', { path: ['email'], message: 'errors.field.reach' });

/** The three things that a booking asks for; each is a form of its own. */
export type BookingPart = 'visit' | 'who' | 'code';

export type MachineDraft = z.input<typeof BookingMachine>;
interface VisitDraft {
  arrivesAt: string;
  machines: MachineDraft[];
  note: string;
}

/** A machine of the fleet, its complaint still to be chosen. */
export function fleetMachine(machineId: string): MachineDraft {
  return { from: 'fleet', machineId, complaintKindId: '', words: '' };
}

/** A machine that the shop has not seen; of the kind that comes most. */
export function newMachine(): MachineDraft {
  const blank = { maker: '', model: '', fleetNumber: '', serial: '', complaintKindId: '', words: '' };
  return { from: 'new', kind: 'wheelbarrow_compressor', ...blank };
}

/** The problems of an error whose path lies under `prefix`, as an error of its own; null where there are none. */
export function underPath(
  error: ApiError,
  prefix: string,
  takes: (path: string) => boolean,
): ApiError | null {
  const fields = error.fields
    .filter((field) => field.path.startsWith(prefix))
    .map((field) => ({ ...field, path: field.path.slice(prefix.length) }))
    .filter((field) => takes(field.path));
  if (fields.length === 0) return null;
  const { code, message, requestId } = error;
  return new ApiError(error.status, { code, message, requestId, fields });
}

/** What the phone's code request left behind; `phone` is the number that it was sent to. */
function useProof(draftKey: string) {
  const blank = { requestId: '', phone: '', personId: '' };
  const proof = reactive(readDraft(draftKey, { ...blank }));
  watch(proof, () => writeDraft(draftKey, { ...proof }));
  const forget = (): void => {
    Object.assign(proof, blank);
  };
  return { proof, forget };
}

/** The booking that this tab is filling in for one shop. */
export function useBookingDraft(slug: string) {
  const draftKey = (part: string): string => `book.${slug}.${part}`;
  const blankVisit: VisitDraft = { arrivesAt: '', machines: [], note: '' };
  const visit = useZodForm(VisitForm, blankVisit, { draftKey: draftKey('visit') });
  const blankWho = { name: '', accountName: '', phone: '', email: '', textConsent: false };
  const who = useZodForm(WhoForm, blankWho, { draftKey: draftKey('who') });
  const code = useZodForm(z.strictObject({ code: BookingGuest.shape.code }), { code: '' });
  const { proof, forget } = useProof(draftKey('proof'));

  const isVisitWhole = computed(() => VisitForm.safeParse(visit.values).success);
  const isWhoWhole = computed(() => WhoForm.safeParse(who.values).success);

  /** Puts the server's sentences beside their fields. @returns which part of the booking is at fault */
  function takeFault(error: ApiError): BookingPart | null {
    const parts = [
      { part: 'code' as const, form: code, found: underPath(error, 'guest.', (path) => path === 'code') },
      { part: 'who' as const, form: who, found: underPath(error, 'guest.', (path) => path !== 'code') },
      {
        part: 'visit' as const,
        form: visit,
        found: underPath(error, '', (path) => !path.startsWith('guest.')),
      },
    ];
    const wrong = parts.filter(({ found }) => found !== null);
    for (const { form, found } of wrong) form.fail(found);
    return wrong.at(-1)?.part ?? null;
  }

  /** It is booked: what was typed has served. */
  function clear(): void {
    visit.reset();
    who.reset();
    code.reset();
    forget();
    // A watcher writes the blank form once more after this; a blank draft is as good as none.
    for (const part of ['visit', 'who', 'proof', 'key']) clearDraft(draftKey(part));
  }

  return { slug, draftKey, visit, who, code, proof, isVisitWhole, isWhoWhole, takeFault, clear };
}

export type BookingDraft = ReturnType<typeof useBookingDraft>;
