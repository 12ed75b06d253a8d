/** What the parts of the booking page share: the shop, what is filled in, the machines' names, times and steps. */
import { computed, inject, provide, type InjectionKey } from 'vue';
import { useI18n } from 'vue-i18n';
import { fleetMachine, newMachine, useBookingDraft, type MachineDraft } from './useBookingDraft';
import { useBookingConfirm } from './useBookingConfirm';
import { useBookingSteps } from './useBookingSteps';
import { useBookingTimes } from './useBookingTimes';
import { useFleetQuery, useShopQuery } from '@/queries/shops';
import { useSessionStore } from '@/stores/session';
import { makerModel } from '#shared/domain/machineName';
import { parsePhone } from '#shared/domain/phone';
import { MACHINES_MAX } from '#shared/schemas/booking';

/** Makes the booking of one page and hands it to the components below. */
export function provideBooking(slug: string) {
  const { t } = useI18n();
  const session = useSessionStore();
  const shop = useShopQuery(slug);
  /** Signed in as a customer of this very shop; whoever else comes books as a guest. */
  const customer = computed(() =>
    session.isCustomer && session.person?.shop.slug === slug ? session.person : null,
  );
  const fleet = useFleetQuery(() => customer.value !== null);
  const draft = useBookingDraft(slug);
  const machines = computed(() => draft.visit.values.machines);
  const times = useBookingTimes(
    slug,
    () => machines.value.length,
    () => draft.visit.values.arrivesAt,
  );
  const confirm = useBookingConfirm(draft, () => customer.value === null);

  const hasProof = computed(() => {
    const { requestId, phone } = draft.proof;
    return requestId !== '' && draft.isWhoWhole.value && parsePhone(draft.who.values.phone) === phone;
  });
  const steps = useBookingSteps(
    () => {
      if (!draft.isVisitWhole.value) return 'machines';
      return customer.value || hasProof.value ? 'check' : 'who';
    },
    () => confirm.answer.value !== null,
  );

  const fleetOf = (id: string) => fleet.data.value?.machines.find((machine) => machine.id === id);
  const numbered = (fleetNumber: string) => t('common.number', { number: fleetNumber });

  /** "No. 27", or what stands in for a number. */
  function nameOf(machine: MachineDraft, index: number): string {
    const known = machine.from === 'fleet' ? fleetOf(machine.machineId) : machine;
    if (known?.fleetNumber) return numbered(known.fleetNumber);
    return (
      (known && makerModel({ maker: known.maker ?? '', model: known.model ?? '' })) ||
      t('book.machine', { n: index + 1 })
    );
  }
  /** What stands beside the name in small letters. */
  function modelOf(machine: MachineDraft): string {
    const known = machine.from === 'fleet' ? fleetOf(machine.machineId) : machine;
    if (!known) return '';
    const model = makerModel({ maker: known.maker ?? '', model: known.model ?? '' });
    return (known.fleetNumber && model) || t(`machine.kind.${known.kind}`);
  }

  const isFull = computed(() => machines.value.length >= MACHINES_MAX);
  function addFromFleet(id: string): void {
    if (!isFull.value) machines.value.push(fleetMachine(id));
  }
  function addNew(): void {
    if (!isFull.value) machines.value.push(newMachine());
  }
  function takeOff(index: number): void {
    machines.value.splice(index, 1);
  }

  const booking = {
    slug,
    shop,
    customer,
    fleet,
    draft,
    machines,
    times,
    confirm,
    steps,
    nameOf,
    modelOf,
    isFull,
    addFromFleet,
    addNew,
    takeOff,
  };
  provide(BOOKING, booking);
  return booking;
}

export type Booking = ReturnType<typeof provideBooking>;
const BOOKING: InjectionKey<Booking> = Symbol('booking');

/** The booking of the page that the component stands on. */
export function useBooking(): Booking {
  const booking = inject(BOOKING);
  if (!booking) throw new Error('useBooking: no booking provided');
  return booking;
}
