import type { Outcome, Price, Tariff } from '../../ports/billing-desk.ts';

export type PriceOptions = {
  /** A failure of ours waives the minimum for the whole run. */
  minimumWaived?: boolean;
};

const MINOR_PER_UNIT = 100n;

type Decimal = { digits: bigint; scale: bigint };

/** A non-negative decimal as an integer over a power of ten, so that no price passes through a double. */
const exact = (text: string): Decimal => {
  const parts = /^(\d+)(?:\.(\d+))?$/.exec(text);
  if (!parts) throw new RangeError(`${text} isn’t a decimal of zero or more`);
  const fraction = parts[2] ?? '';
  return { digits: BigInt(parts[1]! + fraction), scale: 10n ** BigInt(fraction.length) };
};

const halfUp = (dividend: bigint, divisor: bigint): bigint => (2n * dividend + divisor) / (2n * divisor);

const minor = (amount: bigint): number => {
  const value = Number(amount);
  if (!Number.isSafeInteger(value)) throw new RangeError(`${amount} minor units are beyond exact numbers`);
  return value;
};

/**
 * Price of a run: units × unit price, half-up to the cent on the net, at least the minimum; tax half-up on the net.
 *
 * Nothing within reach costs nothing, whatever the minimum.
 */
export const priceRun = (tariff: Tariff, units: number, { minimumWaived = false }: PriceOptions = {}): Price => {
  if (!Number.isSafeInteger(units) || units < 0) throw new RangeError(`${units} isn’t a count of site–scenarios`);
  if (units === 0) return { units, minimumApplied: false, netMinor: 0, taxMinor: 0, grossMinor: 0 };
  const unitPrice = exact(tariff.unitPrice);
  const used = halfUp(BigInt(units) * unitPrice.digits * MINOR_PER_UNIT, unitPrice.scale);
  const minimum = BigInt(tariff.minimumMinor);
  const minimumApplied = !minimumWaived && used < minimum;
  const net = minimumApplied ? minimum : used;
  const taxRate = exact(tariff.taxRate);
  const tax = halfUp(net * taxRate.digits, taxRate.scale);
  return { units, minimumApplied, netMinor: minor(net), taxMinor: minor(tax), grossMinor: minor(net + tax) };
};

/**
 * Charge of a finished run, never above its quote.
 *
 * Tracks that failed on our side are free and waive the minimum. Of a cancelled run the completed tracks are charged,
 * with the minimum as soon as there is one; without a completed track nothing is.
 */
export const settleRun = (tariff: Tariff, quotedUnits: number, outcome: Outcome): Price => {
  const quote = priceRun(tariff, quotedUnits);
  const used = priceRun(tariff, outcome.tracksCompleted === 0 ? 0 : outcome.units, {
    minimumWaived: outcome.tracksFailed > 0,
  });
  return used.grossMinor <= quote.grossMinor ? used : { ...quote, units: outcome.units };
};
