import type { Identity } from '../actor.ts';

declare module 'express-serve-static-core' {
  interface Request {
    /** Set by the sign-in check; absent for strangers. */
    identity?: Identity;
    requestId: string;
  }
}
