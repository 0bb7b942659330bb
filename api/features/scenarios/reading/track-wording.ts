/** "Fix 3 is" or "Fixes 3–5 and 9 are". */
export const fixList = (numbers: readonly number[]): string => {
  const runs: string[] = [];
  for (let i = 0; i < numbers.length;) {
    let end = i;
    while (end + 1 < numbers.length && numbers[end + 1] === numbers[end]! + 1) end++;
    runs.push(end > i ? `${numbers[i]}–${numbers[end]}` : `${numbers[i]}`);
    i = end + 1;
  }
  if (numbers.length === 1) return `Fix ${runs[0]} is`;
  const last = runs.pop()!;
  return `Fixes ${runs.length > 0 ? `${runs.join(', ')} and ${last}` : last} are`;
};

const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];

/** "4 Sep 2026 18:00 UTC". */
export const momentWords = (time: string): string => {
  const at = new Date(time);
  return `${at.getUTCDate()} ${MONTHS[at.getUTCMonth()]} ${at.getUTCFullYear()} ${at.toISOString().slice(11, 16)} UTC`;
};

/** A number without noise: at most the given decimals, no trailing zeros. */
export const plain = (value: number, decimals = 1): string => String(Number(value.toFixed(decimals)));
