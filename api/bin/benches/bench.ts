/** A number with its unit, as printed by `npm run bench`. */
export interface Measured {
  value: number;
  unit: string;
}

/** Measures something and gives its numbers by name; `say` is for remarks, silent when only JSON is wanted. */
export type Bench = (say: (line: string) => void) => Promise<Record<string, Measured>>;

/** The middle value; of an even number of values the mean of the two middle ones. */
export const median = (values: readonly number[]): number => {
  const sorted = [...values].sort((a, b) => a - b);
  const half = Math.floor(sorted.length / 2);
  return sorted.length % 2 === 1 ? sorted[half]! : (sorted[half - 1]! + sorted[half]!) / 2;
};

/** Cut to four significant digits: more would claim a precision no clock here has. */
export const rounded = (value: number): number => Number(value.toPrecision(4));
