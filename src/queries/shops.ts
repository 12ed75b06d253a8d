import { useQuery } from '@pinia/colada';
import { toValue, type MaybeRefOrGetter } from 'vue';
import { getFleet } from '@/api/bookings';
import { getShop, getTimes } from '@/api/shops';

/** What anybody may read of a shop. */
export function useShopQuery(slug: MaybeRefOrGetter<string>) {
  return useQuery({
    key: () => ['shop', toValue(slug)],
    query: ({ signal }) => getShop(toValue(slug), signal),
    staleTime: 300_000,
    enabled: () => toValue(slug) !== '',
  });
}

/** The free times for a number of machines; invalidate `['shop', slug, 'times']` after a booking. */
export function useTimesQuery(slug: MaybeRefOrGetter<string>, machines: MaybeRefOrGetter<number>) {
  return useQuery({
    key: () => ['shop', toValue(slug), 'times', toValue(machines)],
    query: ({ signal }) => getTimes(toValue(slug), toValue(machines), signal),
    placeholderData: (previous) => previous,
    staleTime: 20_000,
  });
}

/** The signed-in customer's machines. */
export function useFleetQuery(enabled: MaybeRefOrGetter<boolean>) {
  return useQuery({
    key: ['fleet'],
    query: ({ signal }) => getFleet(signal),
    enabled: () => toValue(enabled),
  });
}
