/** The gust scale "parchment to damson": lower edges of its steps [m/s]; below the first there is no fill. */
export const GUST_EDGES_MS = [20, 25, 30, 35, 40, 45, 50, 55, 60, 65, 70, 75, 80, 85] as const;
export const GUST_STEP_MS = 5;
/** Edges that carry a tick: each 10 m/s, and the open top step. */
export const GUST_TICKS_MS = [20, 30, 40, 50, 60, 70, 80] as const;

export const GUST_TOKENS = GUST_EDGES_MS.map((edge) => `--gust-${edge}`);
export const DIFFERENCE_TOKENS = Array.from({ length: 11 }, (_, index) => `--diff-${index + 1}`);
/** Position of the pale zero step among the eleven. */
const ZERO_STEP = 5;

/** Lower edges of the bands of a chance, in per cent. */
export const CHANCE_EDGES = [5, 10, 25, 50, 75, 90, 95] as const;
export const CHANCE_TOKENS = CHANCE_EDGES.map((edge) => `--chance-${edge}`);

/** Token of a chance’s colour by the lower edge of its band, in parts of one; null below the first. */
export const chanceToken = (chance: number): string | null =>
  CHANCE_TOKENS[CHANCE_EDGES.findLastIndex((edge) => edge <= Math.round(100 * chance))] ?? null;

/** Index of the step a gust falls in, -1 below the scale. */
const gustStep = (speedMs: number): number =>
  Math.min(GUST_EDGES_MS.length - 1, Math.floor((speedMs - GUST_EDGES_MS[0]) / GUST_STEP_MS));

/** Token of a gust's colour, null below the scale. */
export const gustToken = (speedMs: number): string | null => GUST_TOKENS[gustStep(speedMs)] ?? null;

/** The step that holds zero takes the pale colour; the others follow on both sides, the outermost staying open. */
export const differenceToken = (level: number, levels: readonly number[]): string => {
  const zero = levels.findLastIndex((edge) => edge <= 0);
  const step = levels.indexOf(level) - Math.max(0, zero) + ZERO_STEP;
  return DIFFERENCE_TOKENS[Math.min(DIFFERENCE_TOKENS.length - 1, Math.max(0, step))]!;
};
