/** The public status page of a visit. No zod here: the stub's own bundle reads these types only. */
import type { Outcome, Stage } from '#shared/domain/stages';
import type { Language } from '#shared/domain/when';

export interface StubMachine {
  tag: string;
  fleetNumber: string;
  kind: string;
  maker: string;
  model: string;
  complaint: { en: string; es: string };
  words: string;
  /** As the public may know it: moves still in their grace, or undone, are left out. */
  stage: Stage;
  outcome: Outcome | null;
  /** Every stage it has stood in, in order, the present one last. */
  history: { stage: Stage; at: string; outcome: Outcome | null }[];
}
/** GET /api/t/:token */
export interface StubView {
  now: string;
  /** When the answer will next differ by itself, or null. */
  nextChangeAt: string | null;
  language: Language;
  stubCode: string;
  arrivesAt: string;
  account: string;
  shop: {
    slug: string;
    name: string;
    zone: string;
    phone: string;
    address: string;
    gateNote: { en: string; es: string };
    hours: Record<string, { from: string; to: string }[]>;
  };
  machines: StubMachine[];
}

/** Details of the error `link_ended`: whom to turn to. */
export interface LinkEndedDetails {
  shop: { slug: string; name: string; phone: string };
}
