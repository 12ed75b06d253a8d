import { computed, type Ref } from 'vue';
import { useNow } from '@/lib/clock';

const MINUTE = 60_000;

/** The server's time in whole minutes: what shows ages and "today" is drawn anew once a minute, not every second. */
export function useMinute(now: Readonly<Ref<Date>> = useNow()): Readonly<Ref<Date>> {
  const minute = computed(() => Math.floor(now.value.getTime() / MINUTE));
  return computed(() => new Date(minute.value * MINUTE));
}
