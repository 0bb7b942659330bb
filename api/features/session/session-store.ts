import type { Knex } from 'knex';
import type { Role } from '#contract/roles.ts';
import type { Identity } from '../../actor.ts';
import type { Tx } from '../../transact.ts';

export interface SignInRecord {
  userId: string;
  orgId: string;
  passwordHash: string;
}
export interface RefreshRecord {
  id: string;
  sessionId: string;
  userId: string;
  expiresAt: Date;
  usedAt: Date | null;
  revoked: boolean;
}

/** People, their sessions and what they accepted. */
export class SessionStore {
  constructor(private readonly database: Knex) {}

  /** Before the organisation is known: the one look-up that passes row-level security. */
  async findForSignIn(address: string): Promise<SignInRecord | null> {
    const { rows } = await this.database.raw<{ rows: { user_id: string; password_hash: string; org_id: string }[] }>(
      'select user_id, password_hash, org_id from person_for_sign_in(?)',
      [address],
    );
    const row = rows[0];
    return row ? { userId: row.user_id, orgId: row.org_id, passwordHash: row.password_hash } : null;
  }

  async failuresSince(addressDigest: string, since: Date): Promise<{ failures: number; lastAt: Date } | null> {
    const row = await this.database('sign_in_failures')
      .where({ address_digest: addressDigest })
      .where('last_at', '>', since)
      .first<{ failures: number; last_at: Date } | undefined>('failures', 'last_at');
    return row ? { failures: row.failures, lastAt: row.last_at } : null;
  }

  /** Counts on from failures after `since`, else from one. */
  async addFailure(addressDigest: string, at: Date, since: Date): Promise<void> {
    await this.database.raw(
      `insert into sign_in_failures (address_digest, failures, last_at) values (?, 1, ?)
       on conflict (address_digest) do update set
         failures = case when sign_in_failures.last_at > ? then sign_in_failures.failures + 1 else 1 end,
         last_at = excluded.last_at`,
      [addressDigest, at, since],
    );
  }

  async clearFailures(addressDigest: string): Promise<void> {
    await this.database('sign_in_failures').where({ address_digest: addressDigest }).delete();
  }

  async startSession(tx: Tx, orgId: string, session: { id: string; userId: string; at: Date }): Promise<void> {
    await tx('sessions').insert({ id: session.id, org_id: orgId, user_id: session.userId, started_at: session.at });
  }

  /** The person behind a live session, with the membership's version; null once either has ended. */
  async findIdentity(
    tx: Tx,
    orgId: string,
    sessionId: string,
    noticeVersion: string,
  ): Promise<(Identity & { membershipVersion: number }) | null> {
    const row = await tx('sessions')
      .join('memberships', (on) =>
        on.on('memberships.org_id', 'sessions.org_id').andOn('memberships.user_id', 'sessions.user_id'),
      )
      .join('users', 'users.id', 'sessions.user_id')
      .join('organisations', 'organisations.id', 'sessions.org_id')
      .leftJoin('acceptances', (on) =>
        on
          .on('acceptances.org_id', 'sessions.org_id')
          .andOn('acceptances.user_id', 'sessions.user_id')
          .andOnVal('acceptances.version', noticeVersion),
      )
      .where({ 'sessions.id': sessionId, 'sessions.org_id': orgId })
      .whereNull('sessions.revoked_at')
      .whereNull('memberships.ended_at')
      .first<
        | {
            user_id: string;
            name: string;
            email: string;
            roles: Role[];
            is_approver: boolean;
            version: number;
            org_name: string;
            initials: string;
            accepted_at: Date | null;
          }
        | undefined
      >(
        'users.id as user_id',
        'users.name',
        'users.email',
        'memberships.roles',
        'memberships.is_approver',
        'memberships.version',
        'organisations.name as org_name',
        'organisations.initials',
        'acceptances.accepted_at',
      );
    if (!row) return null;
    return {
      actor: {
        userId: row.user_id,
        orgId,
        name: row.name,
        email: row.email,
        roles: row.roles,
        isApprover: row.is_approver,
      },
      organisation: { name: row.org_name, initials: row.initials },
      sessionId,
      acceptanceRequired: row.accepted_at ? null : noticeVersion,
      membershipVersion: row.version,
    };
  }

  async addRefreshToken(
    tx: Tx,
    orgId: string,
    token: { id: string; sessionId: string; digest: string; issuedAt: Date; expiresAt: Date },
  ): Promise<void> {
    await tx('refresh_tokens').insert({
      id: token.id,
      org_id: orgId,
      session_id: token.sessionId,
      digest: token.digest,
      issued_at: token.issuedAt,
      expires_at: token.expiresAt,
    });
  }

  /** The token's row, locked until the transaction ends, so that two uses at once are told apart. */
  async lockRefreshToken(tx: Tx, orgId: string, digest: string): Promise<RefreshRecord | null> {
    const row = await tx('refresh_tokens')
      .join('sessions', 'sessions.id', 'refresh_tokens.session_id')
      .where({ 'refresh_tokens.org_id': orgId, 'refresh_tokens.digest': digest })
      .forUpdate('refresh_tokens')
      .first<
        | {
            id: string;
            session_id: string;
            user_id: string;
            expires_at: Date;
            used_at: Date | null;
            revoked_at: Date | null;
          }
        | undefined
      >(
        'refresh_tokens.id',
        'refresh_tokens.session_id',
        'sessions.user_id',
        'refresh_tokens.expires_at',
        'refresh_tokens.used_at',
        'sessions.revoked_at',
      );
    if (!row) return null;
    return {
      id: row.id,
      sessionId: row.session_id,
      userId: row.user_id,
      expiresAt: row.expires_at,
      usedAt: row.used_at,
      revoked: row.revoked_at !== null,
    };
  }

  async markUsed(tx: Tx, orgId: string, tokenId: string, at: Date): Promise<void> {
    await tx('refresh_tokens').where({ org_id: orgId, id: tokenId }).update({ used_at: at });
  }

  async revokeSession(tx: Tx, orgId: string, sessionId: string, at: Date, because: string): Promise<void> {
    await tx('sessions')
      .where({ org_id: orgId, id: sessionId })
      .whereNull('revoked_at')
      .update({ revoked_at: at, revoked_because: because });
  }

  async accept(
    tx: Tx,
    orgId: string,
    acceptance: { userId: string; version: string; name: string; at: Date },
  ): Promise<void> {
    await tx('acceptances')
      .insert({
        org_id: orgId,
        user_id: acceptance.userId,
        version: acceptance.version,
        name: acceptance.name,
        accepted_at: acceptance.at,
      })
      .onConflict(['org_id', 'user_id', 'version'])
      .ignore();
  }
}
