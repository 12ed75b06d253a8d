/** Gate, Rail and job sheet. The shop comes from the session. */
import type { z } from 'zod';
import { addNote } from '#server/commands/addNote';
import { correctJob } from '#server/commands/correctJob';
import { jobIdByTag } from '#server/commands/loadJob';
import { moveJob } from '#server/commands/moveJob';
import { undoMove } from '#server/commands/undoMove';
import { AppError } from '#server/errors';
import { withShop } from '#server/lib/db';
import { stopTexts } from '#server/messages/optOut';
import { Person } from '#server/models/index';
import { presentGate } from '#server/presenters/gate';
import { presentJobSheet } from '#server/presenters/jobSheet';
import { presentRail } from '#server/presenters/rail';
import { rolesWith, type Ability } from '#shared/policies/abilities';
import { CorrectBody, MoveBody, NoteBody, UndoBody } from '#shared/schemas/job';
import { uuid } from '#shared/schemas/fields';
import { route, type LoadInput, type Route, type RouteInput } from './route';

const needs = (ability: Ability) => ({ roles: rolesWith(ability) });
const jobOfTag = ({ ctx, params }: LoadInput): Promise<string> => jobIdByTag(ctx.shopId, params.tag);
const keyOf = ({ headers }: Pick<RouteInput<never, never, never>, 'headers'>): string =>
  String(headers['idempotency-key']);

/** An act on one job: found by its tag, once per key. */
function jobAct<Body>(
  path: string,
  ability: Ability,
  body: z.ZodType<Body>,
  handle: (input: RouteInput<Body, unknown, string>) => Promise<unknown>,
): Route {
  return route({
    method: 'post',
    path: `/api/shop/jobs/:tag/${path}`,
    access: needs(ability),
    load: jobOfTag,
    body,
    idempotent: true,
    handle,
  });
}

export const shopFloorRoutes: Route[] = [
  route({
    method: 'get',
    path: '/api/shop/gate',
    access: needs('gate.view'),
    handle: ({ ctx }) => withShop(ctx.shopId, () => presentGate(ctx)),
  }),
  route({
    method: 'get',
    path: '/api/shop/rail',
    access: needs('rail.view'),
    handle: ({ ctx }) => withShop(ctx.shopId, () => presentRail(ctx)),
  }),
  route({
    method: 'get',
    path: '/api/shop/jobs/:tag',
    access: needs('job.view'),
    load: jobOfTag,
    handle: ({ ctx, row }) => withShop(ctx.shopId, () => presentJobSheet(ctx, row)),
  }),
  jobAct('moves', 'job.move', MoveBody, (input) =>
    moveJob(input.ctx, { jobId: input.row, body: input.body, key: keyOf(input) }),
  ),
  jobAct('undo', 'job.move', UndoBody, (input) =>
    undoMove(input.ctx, { jobId: input.row, eventId: input.body.eventId, key: keyOf(input) }),
  ),
  jobAct('corrections', 'job.correct', CorrectBody, (input) =>
    correctJob(input.ctx, { jobId: input.row, body: input.body, key: keyOf(input) }),
  ),
  jobAct('notes', 'job.note', NoteBody, (input) =>
    addNote(input.ctx, { jobId: input.row, body: input.body.body, key: keyOf(input) }),
  ),
  route({
    method: 'post',
    path: '/api/shop/people/:id/stop-texts',
    access: needs('person.stop_texts'),
    load: loadPerson,
    handle: ({ ctx, row }) => withShop(ctx.shopId, () => stopTexts(ctx, row)),
  }),
];

async function loadPerson({ ctx, params }: LoadInput): Promise<string> {
  const id = uuid.safeParse(params.id);
  const person = id.success ? await withShop(ctx.shopId, () => Person.findByPk(id.data)) : null;
  if (!person) throw new AppError('not_found');
  return person.id;
}
