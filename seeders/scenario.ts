/**
 * The demo: two invented shops and what happened at them around the shop's current working day. Days count working
 * days from that day (0): -2 is two working days ago. Steps that lie in the future have not happened yet.
 */
import type { MachineKind } from '#shared/domain/machineKinds';
import type { CustomerRole, StaffRole } from '#shared/domain/roles';
import type { Outcome, PartsReason, Stage } from '#shared/domain/stages';

export interface DemoPerson {
  key: string;
  name: string;
  phone?: string;
  email?: string;
  roles: CustomerRole[];
  crew?: string;
  language?: 'en' | 'es';
  /** Whether the person agreed to texts. */
  texts?: boolean;
}
export interface DemoMachine {
  number: string;
  kind: MachineKind;
  maker: string;
  model: string;
  serial: string;
  crew?: string;
  tankLitres?: number;
}
export interface DemoAccount {
  name: string;
  crews: { key: string; name: string; lead: string }[];
  people: DemoPerson[];
  machines: DemoMachine[];
}
export interface DemoStaff {
  name: string;
  email: string;
  roles: StaffRole[];
}
export interface DemoStep {
  to: Stage;
  day: number;
  time: string;
  by: string;
  outcome?: Outcome;
  partsReason?: PartsReason;
  /** What stands in the signed lines of this step, by guard, where the usual words would not do. */
  says?: string;
  note?: string;
}
export interface DemoJob {
  number: string;
  complaint: string;
  words: string;
  steps: DemoStep[];
}
export interface DemoVisit {
  by: string;
  booked: { day: number; time: string };
  arrives: { day: number; time: string };
  note?: string;
  jobs: DemoJob[];
}
export interface DemoShop {
  slug: string;
  name: string;
  textName: string;
  zone: string;
  phone: string;
  sender: string;
  email: string;
  address: string;
  gateNote: { en: string; es: string };
  about: { en: string; es: string };
  placesPerHalfDay: number;
  pegs: Partial<Record<Stage, number>>;
  staff: DemoStaff[];
  accounts: DemoAccount[];
  visits: DemoVisit[];
  unansweredTexts: { from: string; day: number; time: string; body: string }[];
}

/** A step of a job, in one line. */
export function step(
  to: Stage,
  day: number,
  time: string,
  by: string,
  more: Partial<DemoStep> = {},
): DemoStep {
  return { to, day, time, by, ...more };
}
