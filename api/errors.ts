import type { ErrorCode, Fault } from '#contract/errors.ts';

interface Extras extends ErrorOptions {
  faults?: Fault[];
  /** Seconds after which trying again makes sense. */
  retryAfterS?: number;
}

/** A request that failed in a way its sender can act on; the message is written for the person who will read it. */
export class AppError extends Error {
  readonly faults: Fault[];
  readonly retryAfterS: number | null;

  constructor(
    readonly code: ErrorCode,
    message: string,
    { faults = [], retryAfterS, ...options }: Extras = {},
  ) {
    super(message, options);
    this.name = 'AppError';
    this.faults = faults;
    this.retryAfterS = retryAfterS ?? null;
  }
}

/** The same answer for what isn't there and for what belongs to somebody else. */
export const notFound = (what: string, id: string | number): AppError =>
  new AppError('not_found', `${what} ${id} wasn’t found in your organisation. Check the address.`);
