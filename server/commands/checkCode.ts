import { AppError } from '#server/errors';
import type { Ctx } from '#server/lib/context';
import { run, withShop } from '#server/lib/db';
import { CODE_CHECKS, codeHmac, fitsCode } from '#server/lib/loginCodes';
import type { LoginCode } from '#server/models/index';

/** A phone that its holder has proved, by the request whose code was right. */
export interface ProvedPhone {
  requestId: string;
  phone: string;
}

interface CodeProof {
  requestId: string;
  code: string;
  purpose: LoginCode['purpose'];
}

interface CodeRow {
  phone: string;
  code_hmac: string;
}

/**
 * Checks a code, in a unit of work of its own: a wrong try counts whatever becomes of the act. A right one stays good
 * until an act uses it up (`useCode`), so that a booking whose time was just taken needs no second text.
 * @throws AppError code_wrong, code_expired
 */
export async function proveCode(ctx: Ctx, proof: CodeProof): Promise<ProvedPhone> {
  const { requestId, code } = proof;
  const hmac = codeHmac(ctx.env.CODE_KEY, requestId, code);
  const row = await withShop(ctx.shopId, () => check(ctx, proof, hmac));
  if (!row) throw new AppError('code_expired');
  if (!fitsCode(row.code_hmac, hmac)) throw new AppError('code_wrong');
  return { requestId, phone: row.phone };
}

/**
 * Counts the try and reads the code in one statement, then takes a right try back: the row's lock puts simultaneous
 * guesses in a line. A used code of a booking still proves the phone: the double tap that lost the race goes on to be
 * given the first one's answer, and `useCode` lets nothing new pass.
 */
async function check(ctx: Ctx, proof: CodeProof, hmac: string): Promise<CodeRow | undefined> {
  const [row] = await run<CodeRow>(
    `update login_codes set checks = checks + 1
      where id = $1 and purpose = $2 and expires_at > $3 and checks < ${CODE_CHECKS}
        and (used_at is null or purpose = 'book')
      returning phone, code_hmac`,
    [proof.requestId, proof.purpose, ctx.now],
  );
  if (row && fitsCode(row.code_hmac, hmac)) {
    await run('update login_codes set checks = checks - 1 where id = $1 returning id', [proof.requestId]);
  }
  return row;
}

/**
 * Uses a proved code up, inside the unit of work of the act that it allows.
 * @throws AppError code_expired when another act was first
 */
export async function useCode(ctx: Pick<Ctx, 'now'>, requestId: string): Promise<void> {
  const used = await run(
    'update login_codes set used_at = $2 where id = $1 and used_at is null and expires_at > $2 returning id',
    [requestId, ctx.now],
  );
  if (used.length === 0) throw new AppError('code_expired');
}
