import type { Actor } from '#shared/domain/roles';

declare global {
  namespace Express {
    // What passport attaches to a request.
    interface User extends Actor {}
    interface Request {
      /** Names the request in logs and in error answers. */
      id: string;
      /** The nonce of this answer's content security policy. */
      cspNonce: string;
      /** Why the body could not be read. Told only to whoever may send one. */
      bodyProblem?: Error;
    }
  }
}
