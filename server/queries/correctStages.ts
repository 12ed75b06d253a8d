import { DateTime } from 'luxon';
import type { Ctx } from '#server/lib/context';
import type { Job, JobEvent } from '#server/models/index';
import type { Stage } from '#shared/domain/stages';
import { correctableTo } from '#shared/policies/abilities';

/**
 * The stages that the actor may correct a job back to. Stages that carry a fact (an outcome, what is waited for) are
 * offered only where the job stood there, since a correction makes up no facts.
 */
export function correctStages(ctx: Ctx, job: Job, standing: readonly JobEvent[], zone: string): Stage[] {
  if (!ctx.actor) return [];
  const day = (at: Date) => DateTime.fromJSDate(at, { zone }).toISODate();
  const stages = correctableTo(ctx.actor, job.stage, day(job.stageSince) === day(ctx.now));
  const stood = new Set(standing.map((event) => event.toStage));
  return stages.filter((stage) => stood.has(stage) || (stage !== 'ready' && stage !== 'awaiting_parts'));
}
