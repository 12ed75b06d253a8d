/** Gate, Rail and job sheet: what staff read and what they do. */
import { z } from 'zod';
import { cents, code, optionalLine, optionalText, text, uuid } from './fields';
import {
  GUARD_KEYS,
  OUTCOMES,
  PARTS_REASONS,
  STAGES,
  type GuardKey,
  type Outcome,
  type PartsReason,
  type Stage,
} from '#shared/domain/stages';
import type { MachineKind } from '#shared/domain/machineKinds';
import type { Ability } from '#shared/policies/abilities';

const LINE_MAX = 300;

const SignedLineInput = z.strictObject({
  guard: z.enum(GUARD_KEYS),
  mode: z.enum(['met', 'without']),
  how: optionalText(LINE_MAX),
  leftOut: optionalText(LINE_MAX),
  why: optionalText(LINE_MAX),
  amountCents: cents.optional(),
});

/** What the gate asks when a machine comes in. */
const CheckInInput = z
  .strictObject({
    /** A blank tag of the shop's, hung in place of the one given at booking. */
    newTag: code.optional(),
    /** Who brought it: a person of the account, or a name. */
    broughtByPersonId: uuid.optional(),
    broughtByName: optionalLine(60),
    tankBled: z.boolean(),
    fuelOff: z.boolean(),
    leftWithIt: optionalText(200),
  })
  .refine((body) => body.broughtByPersonId ?? body.broughtByName, {
    message: 'errors.field.who_brought',
    path: ['broughtByName'],
  });

/** POST /api/shop/jobs/:tag/moves, with an Idempotency-Key. */
export const MoveBody = z
  .strictObject({
    /** The version of the job that the move was based on. */
    version: z.number().int().min(1),
    to: z.enum(STAGES),
    outcome: z.enum(OUTCOMES).nullable().default(null),
    partsReason: z.enum(PARTS_REASONS).nullable().default(null),
    lines: z.array(SignedLineInput).max(6).default([]),
    checkIn: CheckInInput.optional(),
    note: optionalText(500),
  })
  .superRefine((body, ctx) => {
    const unasked = (path: string) =>
      ctx.addIssue({ code: 'custom', path: [path], message: 'errors.field.unknown' });
    if (body.to !== 'awaiting_parts' && body.partsReason) unasked('partsReason');
    if (body.to !== 'checked_in') {
      if (body.checkIn) unasked('checkIn');
    } else if (!body.checkIn) {
      ctx.addIssue({ code: 'custom', path: ['checkIn'], message: 'errors.field.required' });
    } else if (!(body.checkIn.tankBled && body.checkIn.fuelOff) && body.note === '') {
      ctx.addIssue({ code: 'custom', path: ['note'], message: 'errors.field.why_not_made_safe' });
    }
  });
export type MoveBody = z.infer<typeof MoveBody>;

/** POST /api/shop/jobs/:tag/undo, with an Idempotency-Key: takes back the latest standing move within its grace. */
export const UndoBody = z.strictObject({ eventId: uuid });
export type UndoBody = z.infer<typeof UndoBody>;

/** POST /api/shop/jobs/:tag/corrections, with an Idempotency-Key. */
export const CorrectBody = z.strictObject({
  version: z.number().int().min(1),
  to: z.enum(STAGES),
  reason: text(300),
  /** Whether those who were already told get one text that says so. */
  tell: z.boolean(),
});
export type CorrectBody = z.infer<typeof CorrectBody>;

/** POST /api/shop/jobs/:tag/notes, with an Idempotency-Key. */
export const NoteBody = z.strictObject({ body: text(2000) });
export type NoteBody = z.infer<typeof NoteBody>;

export interface MachineView {
  id: string;
  kind: MachineKind;
  maker: string;
  model: string;
  fleetNumber: string;
  serial: string;
}

/** One tag on the Rail. */
export interface RailJob {
  id: string;
  /** Normalized current tag code. */
  tag: string;
  version: number;
  stage: Stage;
  stageSince: string;
  outcome: Outcome | null;
  partsReason: PartsReason | null;
  machine: MachineView;
  account: { id: string; name: string };
  complaint: string;
  words: string;
  arrivesAt: string;
  rush: boolean;
  /** The latest standing move while it can still be undone by the reader; else null. */
  undo: { eventId: string; until: string } | null;
  /** What the reader may do with the job as it stands. */
  abilities: Ability[];
}

/** GET /api/shop/rail */
export interface RailView {
  now: string;
  zone: string;
  unpaidLimitCents: number;
  /** Room per stage in the shop, from the bench plan; null where it is not limited. */
  pegs: Partial<Record<Stage, number>>;
  jobs: RailJob[];
}

export interface PersonView {
  id: string;
  name: string;
  roles: string[];
  phone: string | null;
  email: string | null;
  language: string;
  /** How texts to this person stand. */
  texts: 'on' | 'no_consent' | 'opted_out' | 'no_phone';
}

/** One job expected at the gate. */
export interface GateJob {
  id: string;
  tag: string;
  version: number;
  stage: Stage;
  machine: MachineView;
  complaint: string;
  words: string;
  checkedInAt: string | null;
  undo: { eventId: string; until: string } | null;
  abilities: Ability[];
}
export interface GateVisit {
  id: string;
  stubCode: string;
  arrivesAt: string;
  account: { id: string; name: string };
  bookedBy: { id: string; name: string; phone: string | null } | null;
  /** People of the account, to pick from when asked who brought it. */
  people: { id: string; name: string }[];
  note: string;
  jobs: GateJob[];
}
export interface InboundTextView {
  id: string;
  at: string;
  from: string;
  personName: string | null;
  accountName: string | null;
  body: string;
  kind: 'stop' | 'start' | 'help' | 'maybe_stop' | 'answer' | 'other';
  /** Tag of the job it is shown on, if one is known. */
  tag: string | null;
}
/** GET /api/shop/gate: visits expected today, and texts that nobody can answer yet. */
export interface GateView {
  now: string;
  zone: string;
  date: string;
  visits: GateVisit[];
  unanswered: InboundTextView[];
}

export interface HistoryItem {
  id: string;
  at: string;
  kind: 'booked' | 'moved' | 'undone' | 'corrected' | 'tag_replaced' | 'signed' | 'notice' | 'told';
  from: Stage | null;
  to: Stage | null;
  outcome: Outcome | null;
  by: string;
  reason: string;
  /** When the public may know, for a move still in its grace. */
  visibleAt: string | null;
  /** Taken back by a later undo. */
  undone: boolean;
}
export interface SignedLineView {
  id: string;
  at: string;
  by: string;
  guard: GuardKey;
  mode: 'met' | 'without';
  how: string;
  leftOut: string;
  why: string;
  amountCents: number | null;
  /** An undone or corrected move voids its lines. */
  voided: boolean;
}
export interface NoticeView {
  id: string;
  kind: string;
  channel: 'text' | 'email';
  to: string;
  personName: string;
  state:
    | 'held'
    | 'waiting'
    | 'sending'
    | 'accepted'
    | 'sent'
    | 'delivered'
    | 'undelivered'
    | 'failed'
    | 'withdrawn'
    | 'overtaken'
    | 'not_sent_demo';
  /** Held: when it goes. */
  releaseAt: string | null;
  settledAt: string | null;
  /** What was or will be said; a code's words are never shown. */
  body: string | null;
  problem: string | null;
}

/** One person who has heard of what the job's events say. */
export interface ToldView {
  personId: string;
  name: string;
  channel: 'text' | 'email';
  at: string;
  /** The corrections that would make it wrong: back to these stages. */
  wrongAfter: Stage[];
}

/** GET /api/shop/jobs/:tag */
export interface JobSheet {
  now: string;
  zone: string;
  unpaidLimitCents: number;
  job: RailJob & {
    visit: { id: string; stubCode: string; note: string };
    billed: { id: string; name: string };
    broughtBy: string | null;
    leftWithIt: string;
    outcomeNote: string;
  };
  people: PersonView[];
  history: HistoryItem[];
  notes: { id: string; at: string; by: string; body: string }[];
  lines: SignedLineView[];
  notices: NoticeView[];
  texts: InboundTextView[];
  /** Who has been told of what a correction could take back; it offers one text to those whom it makes wrong. */
  told: ToldView[];
  /** Stages that the reader may correct it back to; empty where he may not. */
  correctTo: Stage[];
  /** What the reader may do at large; `job.abilities` says what with this job. */
  abilities: Ability[];
}

/** Answer of a move, undo or correction. */
export interface MoveAnswer {
  job: RailJob;
  /** Notices now held, for the line "texts Dana in 60 s". */
  held: { personName: string; channel: 'text' | 'email'; releaseAt: string }[];
}

/** Details of `moved_meanwhile`. */
export interface MovedMeanwhileDetails {
  stage: Stage;
  version: number;
  by: string;
  at: string;
}
