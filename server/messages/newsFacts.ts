/** The facts from which words are made: everything that a text or an e-mail may say, and nothing more. */
import type { MachineKind } from '#shared/domain/machineKinds';
import type { Outcome, Stage } from '#shared/domain/stages';
import type { Language } from '#shared/domain/when';
import type { NoticeKind } from '#server/models/Notice';

/** One machine's news. */
export interface MachineNews {
  kind: Exclude<NoticeKind, 'booked'>;
  machine: NamedMachine;
  outcome: Outcome | null;
  /** Where a corrected job stands now. */
  stage: Stage | null;
}

export interface NamedMachine {
  kind: MachineKind;
  maker: string;
  model: string;
  fleetNumber: string;
  /** Normalized tag code. */
  tag: string;
}

export interface NewsFacts {
  language: Language;
  shop: {
    name: string;
    /** The short name that texts begin with. */
    textName: string;
    zone: string;
    phone: string;
    address: string;
    gateNote: string;
  };
  personName: string;
  visit: { id: string; stubCode: string; arrivesAt: Date };
  /** The machines of the visit that are not cancelled. */
  machines: NamedMachine[];
  /** How many machines the visit was booked with. */
  total: number;
  /** Whether the booking itself is told. */
  isBooked: boolean;
  news: MachineNews[];
  /** Address of the stub. */
  link: string;
  /** Whether this is the first text to that phone. */
  isFirst: boolean;
}
