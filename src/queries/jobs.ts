import { useQuery } from '@pinia/colada';
import { toValue, type MaybeRefOrGetter } from 'vue';
import { getGate, getJob, getRail } from '@/api/jobs';

/** All staff reads lie under `['shop-floor']`: invalidate that after a move. */
export const FLOOR_KEY = ['shop-floor'] as const;

export function useGateQuery() {
  return useQuery({
    key: [...FLOOR_KEY, 'gate'],
    query: ({ signal }) => getGate(signal),
    staleTime: 5_000,
  });
}

export function useRailQuery() {
  return useQuery({
    key: [...FLOOR_KEY, 'rail'],
    query: ({ signal }) => getRail(signal),
    staleTime: 5_000,
  });
}

export function useJobQuery(tag: MaybeRefOrGetter<string>) {
  return useQuery({
    key: () => [...FLOOR_KEY, 'job', toValue(tag)],
    query: ({ signal }) => getJob(toValue(tag), signal),
    staleTime: 5_000,
  });
}
