import { createHash, createHmac, randomBytes } from 'node:crypto';
import { hash, verify } from '@node-rs/argon2';
import { NOTICE_VERSION } from '#contract/notices.ts';
import type { Session, SignIn } from '#contract/session.ts';
import type { Identity } from '../../actor.ts';
import { AppError } from '../../errors.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Ids } from '../../ports/ids.ts';
import type { Transact, Tx } from '../../transact.ts';
import { signAccessToken, type AccessClaims } from './access-token.ts';
import type { SessionStore } from './session-store.ts';

interface Audit {
  record(
    tx: Tx,
    actor: { orgId: string; userId: string },
    action: string,
    object: string,
    details: object,
  ): Promise<void>;
}
interface Secrets {
  tokenSecret: string;
  csrfSecret: string;
}

/** A person's session with the two tokens their browser keeps. */
export interface SignedIn {
  session: Session;
  accessToken: string;
  refreshToken: string;
}

export const REFRESH_DAYS = 14;
const DAY_MS = 24 * 3600 * 1000;
/** Two tabs, or a reply that got lost, may send one refresh token twice in quick succession; a thief comes later. */
const REUSE_LEEWAY_MS = 10_000;
const FAILURES_BEFORE_LOCK = 8;
const LOCK_MS = 15 * 60_000;

const sha256 = (text: string) => createHash('sha256').update(text).digest('hex');

/** Checked against when the address isn't known, so that the answer takes as long. */
const decoy = hash(randomBytes(16).toString('hex'));

/** Signing in and out, renewing, and accepting the standing notes. */
export class SessionService {
  constructor(
    private readonly transact: Transact,
    private readonly store: SessionStore,
    private readonly audit: Audit,
    private readonly clock: Clock,
    private readonly ids: Ids,
    private readonly secrets: Secrets,
  ) {}

  async signIn({ email, password }: SignIn): Promise<SignedIn> {
    const address = email.trim().toLowerCase();
    const addressDigest = sha256(address);
    await this.refuseWhenLocked(addressDigest);
    const found = await this.store.findForSignIn(address);
    const matches = await verify(found?.passwordHash ?? (await decoy), password);
    if (!found || !matches) {
      const now = this.clock.now();
      await this.store.addFailure(addressDigest, now, new Date(now.getTime() - LOCK_MS));
      throw new AppError(
        'wrong_sign_in',
        'The e-mail address and password don’t belong together. Check both and try again.',
      );
    }
    await this.store.clearFailures(addressDigest);
    return this.transact(found.orgId, async (tx) => {
      const sessionId = this.ids.next();
      await this.store.startSession(tx, found.orgId, { id: sessionId, userId: found.userId, at: this.clock.now() });
      const signedIn = await this.issue(tx, found.orgId, sessionId);
      await this.audit.record(tx, found, 'session.started', `session ${sessionId}`, {});
      return signedIn;
    });
  }

  /** Swaps a refresh token for a new pair. A token used again ends the whole session, for thief and owner alike. */
  async refresh(refreshToken: string): Promise<SignedIn> {
    const orgId = orgOf(refreshToken);
    if (orgId === null) throw sessionOver();
    const outcome = await this.transact(orgId, async (tx): Promise<SignedIn | 'over'> => {
      const token = await this.store.lockRefreshToken(tx, orgId, sha256(refreshToken));
      const now = this.clock.now();
      if (!token || token.revoked || token.expiresAt <= now) return 'over';
      if (token.usedAt && now.getTime() - token.usedAt.getTime() > REUSE_LEEWAY_MS) {
        await this.store.revokeSession(tx, orgId, token.sessionId, now, 'refresh token used twice');
        await this.audit.record(tx, { orgId, userId: token.userId }, 'session.revoked', `session ${token.sessionId}`, {
          because: 'refresh token used twice',
        });
        return 'over';
      }
      if (!token.usedAt) await this.store.markUsed(tx, orgId, token.id, now);
      return this.issue(tx, orgId, token.sessionId);
    });
    if (outcome === 'over') throw sessionOver();
    return outcome;
  }

  /** Ends the session behind either token; fine when there is none. */
  async signOut(identity: Identity | undefined, refreshToken: string | undefined): Promise<void> {
    const now = this.clock.now();
    const orgId = identity?.actor.orgId ?? (refreshToken ? orgOf(refreshToken) : null);
    if (orgId === null) return;
    await this.transact(orgId, async (tx) => {
      const token = refreshToken ? await this.store.lockRefreshToken(tx, orgId, sha256(refreshToken)) : null;
      const ended = identity
        ? { sessionId: identity.sessionId, userId: identity.actor.userId }
        : token && !token.revoked
          ? { sessionId: token.sessionId, userId: token.userId }
          : null;
      if (!ended) return;
      await this.store.revokeSession(tx, orgId, ended.sessionId, now, 'signed out');
      await this.audit.record(tx, { orgId, userId: ended.userId }, 'session.ended', `session ${ended.sessionId}`, {});
    });
  }

  async accept(identity: Identity, { version, name }: { version: string; name: string }): Promise<Session> {
    if (version !== NOTICE_VERSION) {
      throw new AppError(
        'conflict',
        'The standing notes have changed since this page was loaded. Load it and read them again.',
      );
    }
    const { actor } = identity;
    await this.transact(actor, async (tx) => {
      await this.store.accept(tx, actor.orgId, { userId: actor.userId, version, name, at: this.clock.now() });
      await this.audit.record(tx, actor, 'notes.accepted', `standing notes ${version}`, { name });
    });
    return this.describe({ ...identity, acceptanceRequired: null });
  }

  /** Whom an access token stands for now; null once the session ended or the person's rights changed. */
  async identify(claims: AccessClaims): Promise<Identity | null> {
    const identity = await this.transact(claims.org, (tx) =>
      this.store.findIdentity(tx, claims.org, claims.sid, NOTICE_VERSION),
    );
    if (!identity || identity.actor.userId !== claims.sub || identity.membershipVersion !== claims.ver) return null;
    return identity;
  }

  describe(identity: Identity): Session {
    const { actor, organisation } = identity;
    return {
      person: { id: actor.userId, name: actor.name, email: actor.email },
      organisation: { id: actor.orgId, ...organisation },
      roles: [...actor.roles],
      isApprover: actor.isApprover,
      acceptanceRequired: identity.acceptanceRequired,
      csrfToken: this.csrfTokenFor(identity.sessionId),
    };
  }

  /** Bound to the session, so that a token planted by somebody else is of no use. */
  csrfTokenFor(sessionId: string): string {
    return createHmac('sha256', this.secrets.csrfSecret).update(sessionId).digest('base64url');
  }

  private async refuseWhenLocked(addressDigest: string): Promise<void> {
    const now = this.clock.now();
    const failed = await this.store.failuresSince(addressDigest, new Date(now.getTime() - LOCK_MS));
    if (!failed || failed.failures < FAILURES_BEFORE_LOCK) return;
    throw new AppError(
      'too_many_requests',
      'Too many wrong tries for this address. Wait a quarter of an hour, then try again.',
      { retryAfterS: (failed.lastAt.getTime() + LOCK_MS - now.getTime()) / 1000 },
    );
  }

  private async issue(tx: Tx, orgId: string, sessionId: string): Promise<SignedIn> {
    const identity = await this.store.findIdentity(tx, orgId, sessionId, NOTICE_VERSION);
    if (!identity) throw sessionOver();
    // The organisation stands in front, so that the token can be looked up under its row-level security.
    const refreshToken = `${orgId}.${randomBytes(32).toString('base64url')}`;
    const now = this.clock.now();
    await this.store.addRefreshToken(tx, orgId, {
      id: this.ids.next(),
      sessionId,
      digest: sha256(refreshToken),
      issuedAt: now,
      expiresAt: new Date(now.getTime() + REFRESH_DAYS * DAY_MS),
    });
    const accessToken = signAccessToken(
      { sub: identity.actor.userId, org: orgId, sid: sessionId, ver: identity.membershipVersion },
      this.secrets.tokenSecret,
    );
    return { session: this.describe(identity), accessToken, refreshToken };
  }
}

const sessionOver = () => new AppError('not_signed_in', 'Your session is over. Sign in again to go on.');

const TOKEN_FORM = /^([0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12})\.[\w-]{43}$/;
const orgOf = (refreshToken: string): string | null => TOKEN_FORM.exec(refreshToken)?.[1] ?? null;
