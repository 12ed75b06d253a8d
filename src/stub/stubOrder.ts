/** What the stub says first, and in which order its coupons hang. Pure. */
import type { Stage } from '#shared/domain/stages';
import type { StubMachine } from '#shared/schemas/stub';

/** Groups that the heading counts, in the order in which it names them. */
export const GROUPS = [
  'ready',
  'ready_partly',
  'ready_unfaulted',
  'ready_other',
  'needs_you',
  'waiting_parts',
  'in_work',
  'booked',
  'collected',
  'not_coming',
  'disposed',
] as const;
export type Group = (typeof GROUPS)[number];

const GROUP_OF: Record<Stage, Group> = {
  booked: 'booked',
  checked_in: 'in_work',
  diagnosis: 'in_work',
  awaiting_approval: 'needs_you',
  awaiting_parts: 'waiting_parts',
  repair: 'in_work',
  test_run: 'in_work',
  ready: 'ready',
  collected: 'collected',
  no_show: 'not_coming',
  cancelled: 'not_coming',
  disposed: 'disposed',
};

/** Coupons: what needs the reader first, then what is in work, then what waits to be collected, then the rest. */
const COUPON_ORDER: readonly Group[] = [
  'needs_you',
  'in_work',
  'waiting_parts',
  'ready',
  'ready_partly',
  'ready_unfaulted',
  'ready_other',
  'booked',
  'collected',
  'not_coming',
  'disposed',
];

/** Only a repaired machine is plainly "ready"; every other outcome is named as what it is. */
export function groupOf(machine: Pick<StubMachine, 'stage' | 'outcome'>): Group {
  if (machine.stage !== 'ready') return GROUP_OF[machine.stage];
  if (machine.outcome === 'repaired') return 'ready';
  if (machine.outcome === 'partly_repaired') return 'ready_partly';
  return machine.outcome === 'no_fault_found' ? 'ready_unfaulted' : 'ready_other';
}

/** How many machines stand in each group, groups without any left out. */
export function countGroups(machines: readonly StubMachine[]): { group: Group; count: number }[] {
  const counted = GROUPS.map((group) => ({
    group,
    count: machines.filter((machine) => groupOf(machine) === group).length,
  }));
  return counted.filter(({ count }) => count > 0);
}

const byNumber = new Intl.Collator('en', { numeric: true });

/** The machines in the order of their coupons; equals by the number painted on them, No. 3 before No. 17. */
export function orderCoupons(machines: readonly StubMachine[]): StubMachine[] {
  const rank = (machine: StubMachine): number => COUPON_ORDER.indexOf(groupOf(machine));
  return machines.toSorted((a, b) => rank(a) - rank(b) || byNumber.compare(a.fleetNumber, b.fleetNumber));
}

/** When the first machine of the visit came in, or null while all are still expected. */
export function droppedOffAt(machines: readonly StubMachine[]): string | null {
  const arrivals = machines.flatMap((machine) =>
    machine.history.filter((step) => step.stage === 'checked_in').map((step) => step.at),
  );
  return arrivals.toSorted((a, b) => Date.parse(a) - Date.parse(b))[0] ?? null;
}
