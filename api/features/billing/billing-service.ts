import type { Balance, Charge, Movement, TopUp } from '#contract/billing.ts';
import { holdsOneOf, type Actor } from '../../actor.ts';
import { decodeMomentCursor, decodeNumberCursor, encodeCursor, pageFrom } from '../../db/cursor.ts';
import { AppError, notFound } from '../../errors.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Ids } from '../../ports/ids.ts';
import type { Payments } from '../../ports/payments.ts';
import type { Transact } from '../../transact.ts';
import type { ChargesReader } from './charges-reader.ts';
import type { LedgerService } from './ledger-service.ts';
import type { LedgerStore } from './ledger-store.ts';
import type { Payment, PaymentStore } from './payment-store.ts';
import type { PaymentSettlement } from './payment-settlement.ts';

type Page<T> = { items: T[]; nextCursor: string | null };
type PageRequest = { cursor?: string | undefined; limit: number };

/** After this the provider is asked itself, in case its message got lost. */
const PATIENCE_MS = 15_000;

const startOfMonth = (now: Date) => new Date(Date.UTC(now.getUTCFullYear(), now.getUTCMonth(), 1));
const monthLabel = (now: Date) => now.toLocaleDateString('en-GB', { month: 'long', year: 'numeric', timeZone: 'UTC' });

const toTopUp = (payment: Payment): TopUp => ({
  id: payment.id,
  amountMinor: payment.amountMinor,
  currency: payment.currency,
  state: payment.state,
  reason: payment.reason,
  checkoutUrl: payment.state === 'pending' || payment.state === 'declined' ? payment.checkoutUrl : null,
  createdAt: payment.createdAt.toISOString(),
});

/** What account admins see of the money, and their top-ups. */
export class BillingService {
  constructor(
    private readonly transact: Transact,
    private readonly desk: LedgerService,
    private readonly stores: { ledger: LedgerStore; payments: PaymentStore; charges: ChargesReader },
    private readonly payments: Payments,
    private readonly settlement: PaymentSettlement,
    private readonly context: { clock: Clock; ids: Ids; publicUrl: string },
  ) {}

  balance(actor: Actor): Promise<Balance> {
    return this.transact(actor, async (tx) => {
      const now = this.context.clock.now();
      const held = (await this.stores.ledger.held(tx, actor.orgId)) ?? {
        freeMinor: 0,
        reservedMinor: 0,
        currency: (await this.desk.tariffInForce(tx)).currency,
      };
      return {
        balanceMinor: held.freeMinor + held.reservedMinor,
        reservedMinor: held.reservedMinor,
        freeMinor: held.freeMinor,
        currency: held.currency,
        month: {
          label: monthLabel(now),
          ...(await this.stores.ledger.chargedSince(tx, actor.orgId, startOfMonth(now))),
        },
      };
    });
  }

  movements(actor: Actor, { cursor, limit }: PageRequest): Promise<Page<Movement>> {
    const before = decodeNumberCursor(cursor);
    return this.transact(actor, async (tx) => {
      const rows = await this.stores.ledger.movements(tx, actor.orgId, { before, limit: limit + 1 });
      return pageFrom(rows, limit, ({ entryId }) => encodeCursor(entryId));
    });
  }

  /** Admins and auditors see every run's charge, others those of the runs they accepted. */
  charges(actor: Actor, { cursor, limit }: PageRequest): Promise<Page<Charge>> {
    const before = decodeMomentCursor(cursor);
    return this.transact(actor, async (tx) => {
      const rows = await this.stores.charges.charges(tx, actor.orgId, {
        only: holdsOneOf(actor, ['admin', 'auditor']) ? null : actor.userId,
        before,
        limit: limit + 1,
      });
      return pageFrom(rows, limit, ({ acceptedAt, runId }) => encodeCursor(acceptedAt, runId));
    });
  }

  /** Notes the top-up first, then opens the provider's page for it, so that no payment can arrive unknown. */
  async createTopUp(actor: Actor, amountMinor: number): Promise<TopUp> {
    const id = this.context.ids.next();
    const noted = await this.transact(actor, async (tx) => {
      const currency =
        (await this.stores.ledger.held(tx, actor.orgId))?.currency ?? (await this.desk.tariffInForce(tx)).currency;
      const payment = await this.stores.payments.insert(tx, actor.orgId, {
        id,
        amountMinor,
        currency,
        createdBy: actor.userId,
        createdAt: this.context.clock.now(),
      });
      await this.settlement.noteStart(tx, actor, payment);
      return payment;
    });
    try {
      const back = `${this.context.publicUrl}/billing?topUp=${id}`;
      const checkout = await this.payments.openCheckout({
        topUpId: id,
        orgId: actor.orgId,
        amountMinor,
        currency: noted.currency,
        description: 'Gustloom prepaid balance',
        email: actor.email,
        successUrl: back,
        cancelUrl: `${back}&left=1`,
      });
      return toTopUp(await this.transact(actor, (tx) => this.stores.payments.opened(tx, actor.orgId, id, checkout)));
    } catch (cause) {
      await this.settlement.settle(actor.orgId, id, {
        outcome: 'abandoned',
        reason: 'The payment provider couldn’t be reached.',
        amountMinor: null,
        currency: null,
      });
      throw new AppError(
        'payment_unavailable',
        'The payment provider couldn’t be reached, so nothing was charged. Try again in a few minutes.',
        { cause, retryAfterS: 60 },
      );
    }
  }

  /** The top-up as we know it; one that stays open is asked about at the provider. */
  async topUp(actor: Actor, id: string): Promise<TopUp> {
    const find = () => this.transact(actor, (tx) => this.stores.payments.find(tx, actor.orgId, id));
    const payment = await find();
    if (!payment) throw notFound('Top-up', id);
    const waitedMs = this.context.clock.now().getTime() - payment.createdAt.getTime();
    if (payment.state !== 'pending' || payment.sessionId === null || waitedMs < PATIENCE_MS) return toTopUp(payment);
    try {
      await this.settlement.settle(actor.orgId, id, await this.payments.findPayment(payment.sessionId));
    } catch {
      // The provider can't be asked just now; what we know is still true, and its message may yet come.
      return toTopUp(payment);
    }
    return toTopUp((await find()) ?? payment);
  }
}
