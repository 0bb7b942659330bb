/** The driver gives bigint and numeric as text; amounts stay within what a number holds exactly. */
export const toMinor = (value: string | number): number => {
  const amount = Number(value);
  if (!Number.isSafeInteger(amount)) throw new RangeError(`${value} isn’t a whole amount a number can hold`);
  return amount;
};
export const toMinorOrNull = (value: string | number | null): number | null => (value === null ? null : toMinor(value));

export const toInstant = (value: Date): string => value.toISOString();
export const toInstantOrNull = (value: Date | null): string | null => value?.toISOString() ?? null;
