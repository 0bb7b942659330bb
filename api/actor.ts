import type { Role } from '#contract/roles.ts';

/** Who is asking, and for which organisation. */
export interface Actor {
  userId: string;
  orgId: string;
  name: string;
  email: string;
  roles: readonly Role[];
  isApprover: boolean;
}

/** A signed-in person with what the frame around every page needs to know. */
export interface Identity {
  actor: Actor;
  organisation: { name: string; initials: string };
  sessionId: string;
  /** Version of the standing notes still to accept, or null. */
  acceptanceRequired: string | null;
}

export const holdsOneOf = (actor: Actor, roles: readonly Role[]): boolean =>
  actor.roles.some((role) => roles.includes(role));
