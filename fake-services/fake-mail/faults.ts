import type { Range } from '#fakes/lib/chance';
import type { FaultTrigger } from '#fakes/lib/faultBook';

/** One thing that goes wrong while a mail is handed over. */
export type MailFault = FaultTrigger &
  (
    | { kind: 'refuse'; code?: 451 | 550 }
    | { kind: 'slow'; ms: Range }
    | { kind: 'drop' }
    | { kind: 'dropAfterAccept' }
    | { kind: 'hangAfterAccept'; ms: Range }
  );

const KINDS: readonly string[] = ['refuse', 'slow', 'drop', 'dropAfterAccept', 'hangAfterAccept'];

export interface MailFaultSettings {
  /** Added to those already set. */
  faults?: MailFault[];
  /** Seed for shares and ranges. Default 1. */
  seed?: number;
}

/** What is wrong with settings that came over HTTP, or nothing. */
export function findMailFaultProblem(settings: MailFaultSettings): string | undefined {
  const unknown = Object.keys(settings).find((key) => key !== 'faults' && key !== 'seed');
  if (unknown) return `unknown setting: ${unknown}`;
  for (const fault of settings.faults ?? []) {
    if (!KINDS.includes(fault.kind)) return `unknown fault kind: ${String(fault.kind)}`;
    const timed = fault.kind === 'slow' || fault.kind === 'hangAfterAccept';
    if (timed && fault.ms === undefined) return `${fault.kind} needs ms`;
    if (fault.kind === 'refuse' && ![451, 550, undefined].includes(fault.code)) {
      return 'code must be 451 or 550';
    }
  }
  return undefined;
}
