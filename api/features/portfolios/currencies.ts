import { AppError } from '../../errors.ts';

/**
 * Amounts are kept in hundredths throughout, so currencies without cents, or with thousandths, are refused at the door
 * rather than shown a hundred times too large.
 */
export function requireCents(currency: string): void {
  const { maximumFractionDigits } = new Intl.NumberFormat('en', { style: 'currency', currency }).resolvedOptions();
  if (maximumFractionDigits === 2) return;
  throw new AppError(
    'invalid_request',
    `Amounts in ${currency} don't come in hundredths, and this release keeps every amount in hundredths. Choose a currency with cents and convert the schedule before you upload it.`,
    { faults: [{ path: 'body.currency', message: `${currency} has no hundredths.` }] },
  );
}
