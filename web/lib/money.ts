import { decimal, decimalsFor, range } from './numbers.ts';

/** Minor units in one unit of the currency (cents in a dollar; a yen has none). */
export const minorPerUnit = (currency: string): number => {
  try {
    const { maximumFractionDigits = 2 } = new Intl.NumberFormat('en', {
      style: 'currency',
      currency,
    }).resolvedOptions();
    return 10 ** maximumFractionDigits;
  } catch {
    // A code the runtime doesn't know: cents, as nearly every currency has.
    return 100;
  }
};

const SCALES = [
  { from: 1e9, divisor: 1e9, word: 'billion' },
  { from: 1e6, divisor: 1e6, word: 'million' },
  { from: 1e4, divisor: 1e3, word: 'thousand' },
  { from: 0, divisor: 1, word: '' },
] as const;

const scaleOf = (units: number) => SCALES.find(({ from }) => Math.abs(units) >= from) ?? SCALES[3];

/** One scale for a whole column: minor units in one of its units, and the word its header carries. */
export const columnScale = (largestMinor: number, currency: string) => {
  const per = minorPerUnit(currency);
  const { divisor, word } = scaleOf(largestMinor / per);
  return { minor: divisor * per, header: [currency, word].filter(Boolean).join(' ') };
};

/** A range in such a column: "4.1–12.6". */
export const columnRange = (lowMinor: number, highMinor: number, unitMinor: number): string =>
  figures(lowMinor / unitMinor, highMinor / unitMinor);

/** To the cent: prices, balances, charges. "USD 23.63" */
export const exactMoney = (minor: number, currency: string): string => `${currency} ${exactAmount(minor, currency)}`;
export const exactAmount = (minor: number, currency: string): string => {
  const per = minorPerUnit(currency);
  return decimal(minor / per, Math.round(Math.log10(per)));
};

/** Three figures with the scale in words. "USD 41.2 million" */
export const shortMoney = (minor: number, currency: string): string => {
  const units = minor / minorPerUnit(currency);
  const { divisor, word } = scaleOf(units);
  const value = units / divisor;
  return [currency, decimal(value, word === '' ? 0 : decimalsFor(value)), word].filter(Boolean).join(' ');
};

const MOST_DECIMALS = 6;
/** A range is never printed as one number while its ends differ: it gets as many decimals as that takes. */
const rangeWith = (low: number, high: number, decimals: number): string => {
  const isTooCoarse = low !== high && decimals < MOST_DECIMALS && decimal(low, decimals) === decimal(high, decimals);
  return isTooCoarse ? rangeWith(low, high, decimals + 1) : range(decimal(low, decimals), decimal(high, decimals));
};

/** Three figures at the high end, and at least two at the low end: "4.1–12.6", "0.41–12.60". */
const figures = (low: number, high: number): string => {
  const atHigh = decimalsFor(high);
  const enough = Math.abs(low) * 10 ** atHigh >= 9.5 || low === 0;
  return rangeWith(low, high, enough ? atHigh : 2);
};

/** Both ends on one scale, for the largest text of a page. { amount: "186–412", scale: "million" } */
export const moneyRangeParts = (lowMinor: number, highMinor: number, currency: string) => {
  const per = minorPerUnit(currency);
  const { divisor, word } = scaleOf(Math.max(Math.abs(lowMinor), Math.abs(highMinor)) / per);
  const amount =
    word === ''
      ? rangeWith(lowMinor / per, highMinor / per, 0)
      : figures(lowMinor / per / divisor, highMinor / per / divisor);
  return { currency, amount, scale: word };
};

/** "USD 186–412 million" */
export const moneyRange = (lowMinor: number, highMinor: number, currency: string): string => {
  const { amount, scale } = moneyRangeParts(lowMinor, highMinor, currency);
  return [currency, amount, scale].filter(Boolean).join(' ');
};

/** For columns whose header says "million": "4,812.6". */
export const millions = (minor: number, currency: string, decimals = 1): string =>
  decimal(minor / minorPerUnit(currency) / 1e6, decimals);
/** For columns whose header says "million": "4.1–12.6", three figures at the high end. */
export const millionsRange = (lowMinor: number, highMinor: number, currency: string): string => {
  const per = minorPerUnit(currency) * 1e6;
  return figures(lowMinor / per, highMinor / per);
};
