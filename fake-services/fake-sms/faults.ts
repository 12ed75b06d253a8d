import type { Range } from '#fakes/lib/chance';
import type { FaultTrigger } from '#fakes/lib/faultBook';

/** One thing that goes wrong on a POST of a message. */
export type SmsFault = FaultTrigger &
  (
    | { kind: 'slow'; ms: Range }
    | { kind: '429' }
    | { kind: '500' }
    | { kind: '503' }
    | { kind: '500AfterAccept' }
    | { kind: 'dropAfterAccept' }
    | { kind: 'hangAfterAccept'; ms: Range }
    | { kind: 'undelivered'; errorCode?: number }
    | { kind: 'failed'; errorCode?: number }
  );

export const SMS_FAULT_KINDS: readonly SmsFault['kind'][] = [
  'slow',
  '429',
  '500',
  '503',
  '500AfterAccept',
  'dropAfterAccept',
  'hangAfterAccept',
  'undelivered',
  'failed',
];

/** How status changes come about and are reported. */
export interface CallbackPlan {
  /** Time from one status to the next. Default [50, 300]. */
  delayMs: Range;
  /** Share of callbacks that are never sent. Default 0. */
  drop: number;
  /** Share of callbacks that are sent twice. Default 0. */
  double: number;
  /** Reports come in any order: each waits up to three delays more. Default false. */
  shuffle: boolean;
  /** Statuses change, nothing is reported. Default false. */
  off: boolean;
}

export const DEFAULT_CALLBACKS: CallbackPlan = {
  delayMs: [50, 300],
  drop: 0,
  double: 0,
  shuffle: false,
  off: false,
};

/** What may be set at start and through the control API. What is left out stays as it is. */
export interface SmsFaultSettings {
  /** Added to those already set. */
  faults?: SmsFault[];
  /** Short for a `slow` fault on every request. */
  slowMs?: Range;
  /** Recipients that have opted out (21610), whoever sends. */
  optedOut?: string[];
  /** Recipients that cannot receive texts (21614). */
  notMobile?: string[];
  /** A new message shows in the list only after this time. */
  listLagMs?: Range;
  callbacks?: Partial<CallbackPlan>;
  /** Seed for shares and ranges. Default 1. */
  seed?: number;
}

const isShare = (value: unknown): boolean => typeof value === 'number' && value >= 0 && value <= 1;
const isRange = (value: unknown): boolean =>
  typeof value === 'number' ||
  (Array.isArray(value) && value.length === 2 && value.every((end) => typeof end === 'number'));

/** What is wrong with settings that came over HTTP, or nothing. A mistyped fault must not pass for a healthy run. */
export function findSettingsProblem(settings: SmsFaultSettings): string | undefined {
  const known = ['faults', 'slowMs', 'optedOut', 'notMobile', 'listLagMs', 'callbacks', 'seed'];
  const unknown = Object.keys(settings).find((key) => !known.includes(key));
  if (unknown) return `unknown setting: ${unknown}`;
  for (const fault of settings.faults ?? []) {
    if (!SMS_FAULT_KINDS.includes(fault.kind)) return `unknown fault kind: ${String(fault.kind)}`;
    if (fault.share !== undefined && !isShare(fault.share)) return 'share must be 0 to 1';
    if ('ms' in fault ? !isRange(fault.ms) : needsTime(fault)) return `${fault.kind} needs ms`;
  }
  return undefined;
}

function needsTime(fault: SmsFault): boolean {
  return fault.kind === 'slow' || fault.kind === 'hangAfterAccept';
}
