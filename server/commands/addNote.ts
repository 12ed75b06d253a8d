import { signedInActor } from './appendJobEvent';
import type { Ctx } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { once } from '#server/lib/idempotency';
import { JobNote } from '#server/models/index';

export interface NoteInput {
  jobId: string;
  body: string;
  key: string;
}

/** Adds a note that only the shop reads. */
export async function addNote(ctx: Ctx, { jobId, body, key }: NoteInput) {
  const { personId, name } = signedInActor(ctx);
  return withShop(ctx.shopId, () =>
    once(ctx, { key, act: `note ${jobId}`, body }, async () => {
      const note = { id: newId(), jobId, body, at: ctx.now, personId, byName: name };
      await JobNote.create({ shopId: ctx.shopId, ...note });
      return { id: note.id, at: note.at.toISOString(), by: name, body };
    }),
  );
}
