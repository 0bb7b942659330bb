/** One comparison: observed and modelled gust [m/s], what it counts for, and its storm. */
export type Pair = { observedMs: number; modelledMs: number; storm: string };
export type Weighted = Pair & { weight: number };

export type Measures = {
  /** Mean of (modelled - observed) / observed. */
  bias: number;
  biasMs: number;
  rmseMs: number;
  /** Mean of |modelled - observed| / observed. */
  meanAbsolute: number;
  /** Standard deviation of the relative error about the bias, as of a population. */
  scatter: number;
  /** Pearson's, NaN where either side does not vary. */
  correlation: number;
};

const relative = ({ observedMs, modelledMs }: Pair) => modelledMs / observedMs - 1;

/** Error measures of weighted pairs; the weights need not sum to 1. */
export const measuresOf = (pairs: readonly Weighted[]): Measures => {
  const total = pairs.reduce((sum, { weight }) => sum + weight, 0);
  const mean = (of: (pair: Weighted) => number) => pairs.reduce((sum, pair) => sum + pair.weight * of(pair), 0) / total;
  const bias = mean(relative);
  const observed = mean(({ observedMs }) => observedMs);
  const modelled = mean(({ modelledMs }) => modelledMs);
  const together = mean((pair) => (pair.observedMs - observed) * (pair.modelledMs - modelled));
  const ofObserved = mean(({ observedMs }) => (observedMs - observed) ** 2);
  const ofModelled = mean(({ modelledMs }) => (modelledMs - modelled) ** 2);
  return {
    bias,
    biasMs: modelled - observed,
    rmseMs: Math.sqrt(mean(({ observedMs, modelledMs }) => (modelledMs - observedMs) ** 2)),
    meanAbsolute: mean((pair) => Math.abs(relative(pair))),
    scatter: Math.sqrt(mean((pair) => (relative(pair) - bias) ** 2)),
    correlation: ofObserved > 1e-9 && ofModelled > 1e-9 ? together / Math.sqrt(ofObserved * ofModelled) : NaN,
  };
};

/** Every observation alike, or every storm alike whatever the number of its observations. */
export const weighted = (groups: readonly (readonly Pair[])[], by: 'observation' | 'storm'): Weighted[] =>
  groups.flatMap((group) => group.map((pair) => ({ ...pair, weight: by === 'storm' ? 1 / group.length : 1 })));

/** Pairs by storm, storms in the order in which they come. */
export const byStorm = <T extends { storm: string }>(pairs: readonly T[]): T[][] => {
  const groups = new Map<string, T[]>();
  for (const pair of pairs) groups.set(pair.storm, [...(groups.get(pair.storm) ?? []), pair]);
  return [...groups.values()];
};
