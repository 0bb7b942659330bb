export const MINOR_PER_UNIT = 100;

/** Half-up to the minor unit; null where there is no loss to speak of. */
export const toCents = (amount: number): number | null =>
  Number.isNaN(amount) ? null : Math.floor(amount * MINOR_PER_UNIT + 0.5);
