/** Booking a drop-off: the form's and the server's one schema. */
import { z } from 'zod';
import { instant, language, line, optionalEmail, optionalLine, optionalText, phone, uuid } from './fields';
import { sixDigits } from './session';
import { MACHINE_KINDS } from '#shared/domain/machineKinds';

export const MACHINES_MAX = 12;

const complaint = {
  complaintKindId: uuid,
  /** In the customer's own words. */
  words: optionalText(500),
};

/** A machine of the account's fleet. */
const FleetMachine = z.strictObject({ from: z.literal('fleet'), machineId: uuid, ...complaint });
/** A machine that the shop has not seen yet. */
export const NewMachine = z.strictObject({
  from: z.literal('new'),
  kind: z.enum(MACHINE_KINDS, 'errors.field.choose'),
  maker: optionalLine(40),
  model: optionalLine(40),
  /** The number painted on it, if any. */
  fleetNumber: optionalLine(12),
  serial: optionalLine(40),
  ...complaint,
});
export const BookingMachine = z.discriminatedUnion('from', [FleetMachine, NewMachine]);
export type BookingMachine = z.infer<typeof BookingMachine>;

/** Who books, when nobody is signed in. The phone is the one that the code proves. */
export const BookingGuest = z.strictObject({
  name: line(60),
  accountName: line(80),
  phone,
  email: optionalEmail,
  requestId: uuid,
  code: sixDigits,
  personId: uuid.optional(),
});

/** POST /api/shops/:slug/bookings, with an Idempotency-Key. `guest` is left out by whoever is signed in. */
export const BookBody = z
  .strictObject({
    arrivesAt: instant,
    machines: z
      .array(BookingMachine)
      .min(1, 'errors.field.machines')
      .max(MACHINES_MAX, 'errors.field.machines'),
    /** Anything the shop should know about the visit as a whole. */
    note: optionalText(500),
    language,
    /** Whether the person agrees to texts about the machines, with this booking; what was agreed earlier stays. */
    textConsent: z.boolean(),
    guest: BookingGuest.optional(),
  })
  .refine((body) => !body.guest || body.textConsent || body.guest.email !== '', {
    // Somebody who wants no texts and gives no address could not be told anything.
    path: ['guest', 'email'],
    message: 'errors.field.reach',
  });
export type BookBody = z.infer<typeof BookBody>;

export interface BookAnswer {
  visitId: string;
  /** Normalized stub code. */
  stubCode: string;
  /** Path of the stub: `/t/…`. */
  stubPath: string;
  arrivesAt: string;
  jobs: { tag: string; machine: string }[];
  /** How the person is told: which of the two go out. */
  toldBy: { text: boolean; email: boolean };
}

/** GET /api/fleet: the machines that the signed-in customer may book. */
export interface FleetView {
  machines: {
    id: string;
    kind: string;
    maker: string;
    model: string;
    fleetNumber: string;
    serial: string;
    /** An open job's stage, when it is booked or at the shop already. */
    openStage: string | null;
  }[];
}

/** POST /api/shops/:slug/stubs: finds a visit by its stub code and the last four digits of a phone of it. */
export const FindStubBody = z.strictObject({
  code: z.string().trim().min(1, 'errors.field.required').max(20, 'errors.field.code'),
  lastFour: z
    .string()
    .trim()
    .regex(/^\d{4}$/, 'errors.field.last_four'),
});
export type FindStubBody = z.infer<typeof FindStubBody>;
export interface FindStubAnswer {
  stubPath: string;
}
