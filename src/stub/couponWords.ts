/** What one coupon says about its machine, in the customer's words. */
import type { Params } from './translate';
import type { StubMachine } from '#shared/schemas/stub';

type Translate = (key: string, params?: Params) => string;

export interface CouponWords {
  /** "No. 17", or the kind of machine where no number is painted on it. */
  name: string;
  heading: string;
  /** What happens next, or what the reader can do. */
  next: string;
}

function nameOf(machine: StubMachine, t: Translate): string {
  if (machine.fleetNumber) return `${t('stub.number_short')} ${machine.fleetNumber}`;
  return t(`machine.kind.${machine.kind}`);
}

/** A stage in the customer's words; a machine that is ready or gone is named by how its stay ended. */
export function stageWords(
  step: Pick<StubMachine, 'stage' | 'outcome'>,
  t: Translate,
): Pick<CouponWords, 'heading' | 'next'> {
  const { stage, outcome } = step;
  if (!outcome || (stage !== 'ready' && stage !== 'collected')) {
    return { heading: t(`stub.stage.${stage}`), next: t(`stub.next.${stage}`) };
  }
  if (stage === 'ready') {
    return { heading: t(`stub.ready.${outcome}`), next: t(`stub.next_ready.${outcome}`) };
  }
  return { heading: t('stub.stage.collected'), next: t(`stub.collected.${outcome}`) };
}

/** All words of one coupon. */
export function couponWords(machine: StubMachine, t: Translate): CouponWords {
  return { name: nameOf(machine, t), ...stageWords(machine, t) };
}
