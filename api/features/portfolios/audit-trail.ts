import type { Tx } from '../../transact.ts';

/** What this feature asks of the audit log: an entry in the transaction of the fact it records. */
export interface AuditTrail {
  record(
    tx: Tx,
    actor: { orgId: string; userId: string | null },
    action: string,
    object: string,
    details?: object,
  ): Promise<void>;
}
