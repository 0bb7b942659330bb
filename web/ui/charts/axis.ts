/** Where values stand on an axis, as a share of its length, and which round values are written along it. */
export interface Axis {
  low: number;
  high: number;
  /** 0 at the low end, 1 at the high end; held inside. */
  at: (value: number) => number;
  ticks: number[];
}

const NICE = [1, 2, 2.5, 5, 10];

const niceStep = (span: number, wanted: number): number => {
  const rough = span / Math.max(1, wanted);
  const power = 10 ** Math.floor(Math.log10(rough));
  return power * (NICE.find((factor) => factor * power >= rough * 0.999) ?? 10);
};

const hold = (share: number) => Math.min(1, Math.max(0, share));

/** A linear axis whose ends are round values around the given ones. */
export const linearAxis = (from: number, to: number, wanted = 5): Axis => {
  const span = to > from ? to - from : Math.max(1, Math.abs(to));
  const step = niceStep(span, wanted);
  const low = Math.floor(from / step + 1e-9) * step;
  const high = Math.max(Math.ceil(to / step - 1e-9) * step, low + step);
  const ticks = Array.from({ length: Math.round((high - low) / step) + 1 }, (_, index) => low + index * step);
  return { low, high, at: (value) => hold((value - low) / (high - low)), ticks };
};

/** A linear axis from 0 for things that are counted: only whole numbers along it. */
export const countAxis = (most: number, wanted: number): Axis => {
  const { ticks } = linearAxis(0, Math.max(1, most), wanted);
  const step = Math.max(1, Math.ceil(ticks[1]!));
  return linearAxis(0, step * Math.ceil(Math.max(1, most) / step), Math.ceil(Math.max(1, most) / step));
};

/** A logarithmic axis over whole decades, for lists that mix small and large accounts. */
export const logAxis = (from: number, to: number): Axis => {
  const low = 10 ** Math.floor(Math.log10(Math.max(from, 1)));
  const high = Math.max(10 ** Math.ceil(Math.log10(Math.max(to, 1))), low * 10);
  const decades = Math.round(Math.log10(high / low));
  const ticks = Array.from({ length: decades + 1 }, (_, index) => low * 10 ** index);
  return {
    low,
    high,
    at: (value) => hold(Math.log10(Math.max(value, low) / low) / Math.log10(high / low)),
    ticks,
  };
};

/** Decimals that tell the ticks of an axis apart, when each stands for this many of its units. */
export const tickDecimals = ({ ticks }: Axis, unit = 1): number => {
  const step = ((ticks[1] ?? 1) - (ticks[0] ?? 0)) / unit;
  return [0, 1, 2].find((decimals) => Math.abs(step * 10 ** decimals - Math.round(step * 10 ** decimals)) < 1e-6) ?? 2;
};

/** "12.5%" for attributes and styles. */
export const percentOf = (share: number): string => `${Math.round(share * 1e5) / 1e3}%`;
