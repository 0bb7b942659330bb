import type { Clock } from '../../ports/clock.ts';
import type { Ids } from '../../ports/ids.ts';
import type { Tx } from '../../transact.ts';

/**
 * What happened, by whom, in an order nobody can change afterwards: entries are only added, and each organisation's
 * entries form a chain of hashes. The database makes the links itself when the transaction commits.
 */
export class AuditLog {
  constructor(
    private readonly clock: Clock,
    private readonly ids: Ids,
  ) {}

  /** Written in the same transaction as the fact it records; `userId` null stands for the service itself. */
  async record(
    tx: Tx,
    actor: { orgId: string; userId: string | null },
    action: string,
    object: string,
    details: object = {},
  ): Promise<void> {
    await tx('audit_entries').insert({
      id: this.ids.next(),
      org_id: actor.orgId,
      at: this.clock.now(),
      actor_id: actor.userId,
      action,
      object,
      details: JSON.stringify(details),
    });
  }

  /** Number of the first link that doesn't hold in the organisation's chain, or null when it is whole. */
  async findBreak(tx: Tx): Promise<number | null> {
    const { rows } = await tx.raw<{ rows: { at: string | null }[] }>('select audit_broken_at() as at');
    const at = rows[0]?.at ?? null;
    return at === null ? null : Number(at);
  }
}
