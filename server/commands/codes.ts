import { drawCode } from '#shared/domain/tagCode';
import { rows } from '#server/lib/db';
import { newId, pick } from '#server/lib/ids';
import type { Ctx } from '#server/lib/context';
import { Tag } from '#server/models/index';

async function drawFree(sql: string): Promise<string> {
  for (;;) {
    const code = drawCode(pick);
    if ((await rows(sql, [code])).length === 0) return code;
  }
}

/** A stub code that no visit of the shop has. */
export const newStubCode = (): Promise<string> => drawFree('select 1 from visits where stub_code = $1');

/** Hangs a freshly drawn tag on a job. @returns its code */
export async function hangNewTag(ctx: Ctx, jobId: string): Promise<string> {
  const code = await drawFree('select 1 from tags where code = $1');
  await Tag.create({ shopId: ctx.shopId, id: newId(), code, jobId, fromAt: ctx.now });
  return code;
}
