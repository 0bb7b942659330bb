import { expect } from 'vitest';

/** Expects a number to agree with a printed one to the last digit printed, for example `'6.43554998e-4'`. */
export function expectPrinted(actual: number, printed: string): void {
  const [mantissa, exponent = '0'] = printed.split('e');
  const decimals = (mantissa!.split('.')[1] ?? '').length;
  const lastDigit = 10 ** (Number(exponent) - decimals);
  const off = Math.abs(actual - Number(printed)) / lastDigit;
  expect(off, `${actual} against ${printed}, in units of its last digit`).toBeLessThanOrEqual(0.501);
}
