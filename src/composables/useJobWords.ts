import { useI18n } from 'vue-i18n';
import type { GuardKey, Outcome, PartsReason, Stage } from '#shared/domain/stages';
import type { MachineView } from '#shared/schemas/job';

/** The words for stages, outcomes and machines, from the catalogues that customers read too. */
export function useJobWords() {
  const { t } = useI18n();
  const stage = (key: Stage): string => t(`stages.${key}.word`);
  const outcome = (key: Outcome): string => t(`outcomes.${key}.word`);
  const reason = (key: PartsReason): string => t(`partsReasons.${key}`);
  /** What a guard asks, and what its two buttons and their lines are called. */
  const guard = (key: GuardKey) => ({
    ask: t(`guards.${key}.ask`),
    met: t(`guards.${key}.met`),
    how: t(`guards.${key}.how`),
    without: t(`guards.${key}.without`),
    leftOut: t(`guards.${key}.left_out`),
    why: t(`guards.${key}.why`),
  });
  const kind = (machine: MachineView): string =>
    [machine.maker, machine.model].filter(Boolean).join(' ') || t(`machine.kind.${machine.kind}`);
  /** Fleet number as painted on the machine: "No. 14"; the serial where it has none; else nothing. */
  const number = (machine: MachineView): string => {
    if (machine.fleetNumber) return `No. ${machine.fleetNumber}`;
    return machine.serial ? `serial ${machine.serial}` : '';
  };
  /** "Ironvale TW-8, No. 14". */
  const machine = (view: MachineView): string => [kind(view), number(view)].filter(Boolean).join(', ');
  return { stage, outcome, reason, guard, kind, number, machine, t };
}

export type JobWords = ReturnType<typeof useJobWords>;
