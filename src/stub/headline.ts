/** The answer to "is it ready yet?", as the page's heading. */
import { countGroups } from './stubOrder';
import type { Params } from './translate';
import { formatDay, formatTime, type Language } from '#shared/domain/when';
import type { StubView } from '#shared/schemas/stub';

type Translate = (key: string, params?: Params) => string;

/** "One ready. Two in work."; a visit that is only booked says when it is due. */
export function headline(view: StubView, t: Translate, language: Language): string {
  const groups = countGroups(view.machines);
  const onlyGroup = groups.length === 1 ? groups[0]?.group : undefined;
  if (onlyGroup === 'booked') {
    const { arrivesAt, shop } = view;
    return t('stub.head.due', {
      day: formatDay(arrivesAt, shop.zone, language),
      time: formatTime(arrivesAt, shop.zone, language),
    });
  }
  return groups
    .map(({ group, count }) => t(`stub.head.${group}`, { n: count, count: t(`stub.number.${count}`) }))
    .join(' ');
}
