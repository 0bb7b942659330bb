const LONGEST = 120;

/** A long beginning is cut, so that what was changed stays. */
const joined = (base: string, suffix: string): string => {
  const room = LONGEST - suffix.length;
  return base.length <= room ? base + suffix : `${base.slice(0, room - 1).trimEnd()}…${suffix}`;
};

/** "Varrow, 40 km right", or with the first number that makes it a name nobody uses: "Varrow, 40 km right (2)". */
export const variantName = (base: string, words: string, taken: ReadonlySet<string>): string => {
  let name = joined(base, `, ${words}`);
  for (let n = 2; taken.has(name); n++) name = joined(base, `, ${words} (${n})`);
  return name;
};
