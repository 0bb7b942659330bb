/** A number with its unit, as printed by `npm run bench`. */
export interface Measured {
  value: number;
  unit: string;
}

/** Something to be measured. */
export interface Bench {
  /** Names of the numbers it gives. */
  readonly keys: readonly string[];
  /** Gives them; `say` is for remarks, silent when only JSON is wanted. */
  readonly measure: (say: (line: string) => void) => Promise<Record<string, Measured>>;
}

/** Processor time of this process, all its threads together [s]: what a busy machine changes least. */
export const cpuSeconds = (): number => {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1e6;
};

/** The middle value; of an even number of values the mean of the two middle ones. */
export const median = (values: readonly number[]): number => {
  const sorted = [...values].sort((a, b) => a - b);
  const half = Math.floor(sorted.length / 2);
  return sorted.length % 2 === 1 ? sorted[half]! : (sorted[half - 1]! + sorted[half]!) / 2;
};

/** Cut to four significant digits: more would claim a precision no clock here has. */
export const rounded = (value: number): number => Number(value.toPrecision(4));
