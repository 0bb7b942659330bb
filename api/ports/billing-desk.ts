import type { Tx } from '../transact.ts';

/** A price list in force. Unit price and tax rate are exact decimals as text, money is minor units. */
export type Tariff = {
  version: number;
  /** Price of one site–scenario in currency units, for example "0.004000". */
  unitPrice: string;
  minimumMinor: number;
  taxLabel: string;
  /** Share of the net, for example "0.070000". */
  taxRate: string;
  currency: string;
  quoteHours: number;
};

export type Price = {
  units: number;
  minimumApplied: boolean;
  netMinor: number;
  taxMinor: number;
  grossMinor: number;
};

/** How a run ended, as the price sees it. */
export type Outcome = {
  /** Site–scenarios within reach in tracks that were completed. */
  units: number;
  tracksCompleted: number;
  tracksFailed: number;
};

export type PricedRun = { id: string; number: string };

/** What runs ask of billing. Money moves only inside the caller's transaction, with the tenant's balance locked. */
export interface BillingDesk {
  tariffInForce(tx: Tx): Promise<Tariff>;
  /** A price list by its version, for settling what was quoted on it. */
  tariff(tx: Tx, version: number): Promise<Tariff>;
  price(tariff: Tariff, units: number): Price;
  /** Charge of a finished run, never above its quote. */
  settlement(tariff: Tariff, quotedUnits: number, outcome: Outcome): Price;
  freeMinor(tx: Tx, orgId: string): Promise<number>;
  /** Sets a quote's total aside; refused with `balance_too_low`. A second call for the run changes nothing. */
  reserve(
    tx: Tx,
    orgId: string,
    run: PricedRun,
    quoted: { grossMinor: number; currency: string; actorId: string },
  ): Promise<void>;
  /** Charges and gives back the rest; a second call for the run changes nothing. */
  settle(
    tx: Tx,
    orgId: string,
    run: PricedRun,
    charge: Pick<Price, 'netMinor' | 'taxMinor' | 'grossMinor'>,
  ): Promise<void>;
}
