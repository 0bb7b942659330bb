import type { TopUp } from '#contract/billing.ts';
import { toMinor } from '../../db/mapping.ts';
import type { Tx } from '../../transact.ts';

export type Payment = {
  id: string;
  amountMinor: number;
  currency: string;
  state: TopUp['state'];
  reason: string | null;
  sessionId: string | null;
  checkoutUrl: string | null;
  createdBy: string;
  createdAt: Date;
};

type PaymentRow = {
  id: string;
  org_id: string;
  amount_minor: string;
  currency: string;
  state: TopUp['state'];
  reason: string | null;
  provider_session: string | null;
  checkout_url: string | null;
  created_by: string;
  created_at: Date;
};

const toPayment = (row: PaymentRow): Payment => ({
  id: row.id,
  amountMinor: toMinor(row.amount_minor),
  currency: row.currency,
  state: row.state,
  reason: row.reason,
  sessionId: row.provider_session,
  checkoutUrl: row.checkout_url,
  createdBy: row.created_by,
  createdAt: row.created_at,
});

/** Top-ups on their way, and which messages of the provider have been taken. */
export class PaymentStore {
  async insert(
    tx: Tx,
    orgId: string,
    payment: Pick<Payment, 'id' | 'amountMinor' | 'currency' | 'createdBy' | 'createdAt'>,
  ): Promise<Payment> {
    const [row] = await tx<PaymentRow>('payments')
      .insert({
        id: payment.id,
        org_id: orgId,
        amount_minor: String(payment.amountMinor),
        currency: payment.currency,
        state: 'pending',
        created_by: payment.createdBy,
        created_at: payment.createdAt,
      })
      .returning('*');
    return toPayment(row!);
  }

  async find(tx: Tx, orgId: string, id: string): Promise<Payment | null> {
    const row = await tx<PaymentRow>('payments').where({ org_id: orgId, id }).first();
    return row ? toPayment(row) : null;
  }

  /** The payment, locked until the transaction ends. */
  async lock(tx: Tx, orgId: string, id: string): Promise<Payment | null> {
    const row = await tx<PaymentRow>('payments').where({ org_id: orgId, id }).forUpdate().first();
    return row ? toPayment(row) : null;
  }

  async opened(tx: Tx, orgId: string, id: string, checkout: { sessionId: string; url: string }): Promise<Payment> {
    const [row] = await tx<PaymentRow>('payments')
      .where({ org_id: orgId, id })
      .update({ provider_session: checkout.sessionId, checkout_url: checkout.url })
      .returning('*');
    return toPayment(row!);
  }

  async settle(
    tx: Tx,
    orgId: string,
    id: string,
    end: { state: TopUp['state']; reason: string | null; at: Date },
  ): Promise<void> {
    await tx('payments')
      .where({ org_id: orgId, id })
      .update({ state: end.state, reason: end.reason, settled_at: end.at });
  }

  /** Notes a message of the provider; false when it was taken before. */
  async takeEvent(
    tx: Tx,
    orgId: string,
    event: { id: string; type: string; payloadDigest: string; at: Date },
  ): Promise<boolean> {
    const taken = await tx('provider_events')
      .insert({
        id: event.id,
        org_id: orgId,
        kind: event.type,
        payload_digest: event.payloadDigest,
        received_at: event.at,
      })
      .onConflict('id')
      .ignore()
      .returning('id');
    return taken.length > 0;
  }
}
