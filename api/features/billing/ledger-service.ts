import { AppError } from '../../errors.ts';
import type { BillingDesk, Outcome, Price, PricedRun, Tariff } from '../../ports/billing-desk.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Ids } from '../../ports/ids.ts';
import type { Tx } from '../../transact.ts';
import type { LedgerStore } from './ledger-store.ts';
import { moneyWords } from './money-words.ts';
import { priceRun, settleRun } from './pricing.ts';
import type { TariffStore } from './tariff-store.ts';

export type Credit = { topUpId: string; amountMinor: number; currency: string; actorId: string };

/**
 * Moves prepaid money in double entry.
 *
 * Customer accounts are positive when the customer has money: a top-up is +free −provider, a reservation −free +reserved,
 * a charge −reserved +revenue +tax, a release −reserved +free. Every movement sums to zero.
 */
export class LedgerService implements BillingDesk {
  constructor(
    private readonly ledger: LedgerStore,
    private readonly tariffs: TariffStore,
    private readonly clock: Clock,
    private readonly ids: Ids,
  ) {}

  async tariffInForce(tx: Tx): Promise<Tariff> {
    const tariff = await this.tariffs.inForce(tx, this.clock.now());
    if (!tariff)
      throw new AppError('unavailable', 'No price list is in force, so nothing can be quoted. Try again later.');
    return tariff;
  }

  async tariff(tx: Tx, version: number): Promise<Tariff> {
    const tariff = await this.tariffs.find(tx, version);
    if (!tariff) throw new Error(`tariff ${version} is gone`);
    return tariff;
  }

  price(tariff: Tariff, units: number): Price {
    return priceRun(tariff, units);
  }

  settlement(tariff: Tariff, quotedUnits: number, outcome: Outcome): Price {
    return settleRun(tariff, quotedUnits, outcome);
  }

  async freeMinor(tx: Tx, orgId: string): Promise<number> {
    return (await this.ledger.held(tx, orgId))?.freeMinor ?? 0;
  }

  async reserve(
    tx: Tx,
    orgId: string,
    run: PricedRun,
    { grossMinor, currency, actorId }: { grossMinor: number; currency: string; actorId: string },
  ): Promise<void> {
    const held = await this.ledger.lock(tx, orgId, currency);
    if ((await this.ledger.forRun(tx, orgId, run.id)).known || grossMinor === 0) return;
    if (held.currency !== currency) {
      throw new AppError(
        'balance_too_low',
        `Your balance is in ${held.currency}, this run costs ${moneyWords(grossMinor, currency)}. Quote it again in ${held.currency}.`,
      );
    }
    if (held.freeMinor < grossMinor) {
      throw new AppError(
        'balance_too_low',
        `The run costs ${moneyWords(grossMinor, currency)} and ${moneyWords(held.freeMinor, currency)} is free. An account admin can top up the balance.`,
      );
    }
    await this.ledger.post(tx, orgId, {
      id: this.ids.next(),
      kind: 'reserve',
      entries: [
        { account: 'free', amountMinor: -grossMinor },
        { account: 'reserved', amountMinor: grossMinor },
      ],
      currency,
      runId: run.id,
      topUpId: null,
      actorId,
      text: `Reserved for ${run.number}`,
      at: this.clock.now(),
    });
  }

  async settle(
    tx: Tx,
    orgId: string,
    run: PricedRun,
    charge: Pick<Price, 'netMinor' | 'taxMinor' | 'grossMinor'>,
  ): Promise<void> {
    const { currency } = await this.ledger.lock(tx, orgId, (await this.tariffInForce(tx)).currency);
    const { reservedMinor, settled } = await this.ledger.forRun(tx, orgId, run.id);
    if (settled) return;
    const { netMinor, taxMinor, grossMinor } = charge;
    if (grossMinor < 0 || netMinor + taxMinor !== grossMinor || grossMinor > reservedMinor) {
      throw new RangeError(`charge ${grossMinor} for ${run.number} doesn’t fit its reservation of ${reservedMinor}`);
    }
    const common = { currency, runId: run.id, topUpId: null, actorId: null, at: this.clock.now() };
    if (grossMinor > 0) {
      await this.ledger.post(tx, orgId, {
        ...common,
        id: this.ids.next(),
        kind: 'charge',
        entries: [
          { account: 'reserved', amountMinor: -grossMinor },
          { account: 'revenue', amountMinor: netMinor },
          { account: 'tax', amountMinor: taxMinor },
        ],
        text: `Charged ${moneyWords(grossMinor, currency)} for ${run.number}`,
      });
    }
    const rest = reservedMinor - grossMinor;
    if (rest > 0) {
      await this.ledger.post(tx, orgId, {
        ...common,
        id: this.ids.next(),
        kind: 'release',
        entries: [
          { account: 'reserved', amountMinor: -rest },
          { account: 'free', amountMinor: rest },
        ],
        text: `Released from ${run.number}`,
      });
    }
  }

  /** Credits a payment that has arrived; the caller makes sure that it does so once. */
  async credit(tx: Tx, orgId: string, { topUpId, amountMinor, currency, actorId }: Credit): Promise<void> {
    await this.ledger.lock(tx, orgId, currency);
    await this.ledger.post(tx, orgId, {
      id: this.ids.next(),
      kind: 'top_up',
      entries: [
        { account: 'free', amountMinor },
        { account: 'provider', amountMinor: -amountMinor },
      ],
      currency,
      runId: null,
      topUpId,
      actorId,
      text: 'Top-up by card',
      at: this.clock.now(),
    });
  }
}
