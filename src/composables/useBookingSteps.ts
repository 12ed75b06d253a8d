/** Which step is on screen. It stands in the address, so that the browser's back goes one step back. */
import { computed, nextTick, watch } from 'vue';
import { useRoute, useRouter } from 'vue-router';

export const STEPS = ['machines', 'who', 'check', 'done'] as const;
export type Step = (typeof STEPS)[number];

/**
 * @param furthest the last step before booking that what is filled in allows
 * @param isBooked whether there is a booking to confirm
 */
export function useBookingSteps(furthest: () => Exclude<Step, 'done'>, isBooked: () => boolean) {
  const route = useRoute();
  const router = useRouter();

  const step = computed<Step>(() => {
    const asked = STEPS.find((each) => each === route.query.step) ?? 'machines';
    if (asked === 'done') return isBooked() ? 'done' : 'machines';
    return STEPS[Math.min(STEPS.indexOf(asked), STEPS.indexOf(furthest()))] ?? 'machines';
  });

  async function go(to: Step, how: 'push' | 'replace' = 'push'): Promise<void> {
    await router[how]({ query: to === 'machines' ? {} : { step: to } });
  }

  // A new step is read from its top, by eye and by ear, or from the field that was wrong.
  watch(step, async () => {
    await nextTick();
    const page = document.querySelector('main') ?? document;
    const wrong = page.querySelector<HTMLElement>('[aria-invalid="true"]');
    if (wrong) return wrong.focus();
    window.scrollTo({ top: 0 });
    const heading = page.querySelector<HTMLElement>('h1');
    heading?.setAttribute('tabindex', '-1');
    heading?.focus({ preventScroll: true });
  });

  return { step, go };
}
