import type { Actor } from '../../actor.ts';
import { AppError } from '../../errors.ts';
import type { Clock } from '../../ports/clock.ts';
import type { PaymentEvent, Payments, PaymentState } from '../../ports/payments.ts';
import type { Transact, Tx } from '../../transact.ts';
import type { LedgerService } from './ledger-service.ts';
import type { Payment, PaymentStore } from './payment-store.ts';

/** What happened to a message of the provider. */
export type Receipt = 'credited' | 'noted' | 'repeated' | 'unknown';

type Audit = {
  record(
    tx: Tx,
    actor: { orgId: string; userId: string | null },
    action: string,
    object: string,
    details: object,
  ): Promise<void>;
};

const UUID = /^[0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;

/**
 * Turns what the provider says into the state of a top-up, and credits it once.
 *
 * Messages may come twice, late and in any order: a payment that succeeded stays so, a declined attempt may be followed
 * by one that works, and the row lock on the payment makes the credit happen once whatever arrives together.
 */
export class PaymentSettlement {
  constructor(
    private readonly transact: Transact,
    private readonly store: PaymentStore,
    private readonly ledger: LedgerService,
    private readonly payments: Payments,
    private readonly clock: Clock,
    private readonly audit: Audit,
  ) {}

  /** A signed message over the raw bytes it came in. */
  async receive(rawBody: Buffer, signature: string): Promise<Receipt> {
    const event = this.payments.readEvent(rawBody, signature);
    if (!event) throw new AppError('webhook_signature', 'The signature doesn’t belong to this message.');
    const { orgId, topUpId } = event;
    // Not ours, or of another environment: taken without effect, or the provider would repeat it for days.
    if (!orgId || !topUpId || !UUID.test(orgId) || !UUID.test(topUpId)) return 'unknown';
    return this.transact(orgId, (tx) => this.take(tx, orgId, topUpId, event));
  }

  /** What the provider answered when it was asked. */
  async settle(orgId: string, topUpId: string, state: PaymentState): Promise<void> {
    await this.transact(orgId, async (tx) => {
      const payment = await this.store.lock(tx, orgId, topUpId);
      if (payment) await this.apply(tx, orgId, payment, state);
    });
  }

  async noteStart(tx: Tx, actor: Actor, payment: Payment): Promise<void> {
    await this.audit.record(tx, actor, 'top_up.started', `top-up ${payment.id}`, {
      amountMinor: payment.amountMinor,
      currency: payment.currency,
    });
  }

  private async take(tx: Tx, orgId: string, topUpId: string, event: PaymentEvent): Promise<Receipt> {
    const payment = await this.store.lock(tx, orgId, topUpId);
    if (!payment) return 'unknown';
    const isNew = await this.store.takeEvent(tx, orgId, { ...event, at: this.clock.now() });
    if (!isNew) return 'repeated';
    return this.apply(tx, orgId, payment, event);
  }

  private async apply(tx: Tx, orgId: string, payment: Payment, state: PaymentState): Promise<Receipt> {
    const { outcome, reason } = state;
    if (outcome === 'open' || payment.state === 'succeeded') return 'noted';
    const end = (name: Payment['state'], why: string | null) =>
      this.store.settle(tx, orgId, payment.id, { state: name, reason: why, at: this.clock.now() });
    const record = (action: string, details: object) =>
      this.audit.record(tx, { orgId, userId: null }, action, `top-up ${payment.id}`, details);
    if (outcome !== 'paid') {
      await end(outcome, reason);
      await record(`top_up.${outcome}`, { reason });
      return 'noted';
    }
    if (state.amountMinor !== payment.amountMinor || state.currency !== payment.currency) {
      await end('declined', 'The provider reports another amount than was asked. We are looking into it.');
      await record('top_up.amount_differs', {
        asked: payment.amountMinor,
        reported: state.amountMinor,
        currency: state.currency,
      });
      return 'noted';
    }
    await this.ledger.credit(tx, orgId, {
      topUpId: payment.id,
      amountMinor: payment.amountMinor,
      currency: payment.currency,
      actorId: payment.createdBy,
    });
    await end('succeeded', null);
    await record('top_up.credited', { amountMinor: payment.amountMinor, currency: payment.currency });
    return 'credited';
  }
}
