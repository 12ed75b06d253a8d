import type { Ctx } from '#server/lib/context';
import type { Job, JobEvent } from '#server/models/index';
import { isSameDay } from '#shared/domain/hours';
import { PROGRESS, type Stage } from '#shared/domain/stages';
import { correctableTo } from '#shared/policies/abilities';

/** Stages that carry a fact: an outcome, what is waited for. */
const WITH_FACT: readonly Stage[] = ['ready', 'awaiting_parts'];

/**
 * The stages that the actor may correct a job back to: those before the present one, and those where the job stood,
 * for a wrong step may have led backwards too. One that carries a fact is offered only where the job stood there, since
 * a correction makes up no facts.
 */
export function correctStages(ctx: Ctx, job: Job, standing: readonly JobEvent[], zone: string): Stage[] {
  if (!ctx.actor) return [];
  const before = correctableTo(ctx.actor, job.stage, isSameDay(job.stageSince, ctx.now, zone));
  if (before.length === 0) return [];
  const stood = new Set(standing.map((event) => event.toStage));
  return PROGRESS.filter(
    (stage) =>
      stage !== job.stage && (stood.has(stage) || (before.includes(stage) && !WITH_FACT.includes(stage))),
  );
}
