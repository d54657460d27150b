import type { PennyweightError } from '#contract/error.ts';
import type { Caller } from '../services/context.ts';

declare global {
  namespace Express {
    interface Request {
      caller?: Caller;
      /** why there is no caller, when credentials were sent: expired session, revoked token */
      callerProblem?: PennyweightError;
      requestId?: string;
    }
  }
}
