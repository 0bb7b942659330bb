import { minorPerUnit } from '../../lib/money.ts';

export const SMALLEST_MINOR = 1000;
export const LARGEST_MINOR = 10_000_000;

const AMOUNT = /^\d{1,3}(?:,?\d{3})*(?:\.(\d{1,2}))?$/;

/** "1,250.50" to whole minor units; null when it isn't an amount. */
export const minorFrom = (text: string, currency: string): number | null => {
  const trimmed = text.trim();
  if (!AMOUNT.test(trimmed)) return null;
  const [units = '', fraction = ''] = trimmed.replaceAll(',', '').split('.');
  const digits = Math.round(Math.log10(minorPerUnit(currency)));
  if (fraction.length > digits) return null;
  return Number(units) * minorPerUnit(currency) + Number(fraction.padEnd(digits, '0') || 0);
};
