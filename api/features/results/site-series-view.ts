import type { SiteDetail } from '#contract/runs.ts';
import type { SiteSeries } from '#engine/footprint/site-series.ts';

const POINTS = 400;
const HALF_WINDOW_S = 18 * 3600;

export const NO_SERIES: SiteDetail['series'] = { time: [], plain: [], p5: [], p50: [], p95: [], directionDeg: [] };

/** The hours around the plain peak; thinned evenly where there are too many points, the peak itself always kept. */
export const seriesAroundPeak = (series: SiteSeries): SiteDetail['series'] => {
  const { timeS, plain } = series;
  let peak = 0;
  for (let i = 1; i < plain.length; i++) if (plain[i]! > plain[peak]!) peak = i;
  const near = Array.from(timeS.keys()).filter((i) => Math.abs(timeS[i]! - timeS[peak]!) <= HALF_WINDOW_S);
  const stride = Math.ceil(near.length / (POINTS - 1));
  const offset = near.indexOf(peak) % stride;
  const kept = near.filter((_, n) => n % stride === offset);
  const column = (values: Float64Array) => kept.map((i) => values[i]!);
  return {
    time: kept.map((i) => new Date(Math.round(timeS[i]! * 1000)).toISOString()),
    plain: column(plain),
    p5: column(series.p5),
    p50: column(series.p50),
    p95: column(series.p95),
    directionDeg: column(series.directionDeg),
  };
};
