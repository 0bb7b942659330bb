import type { ScenarioResult } from '#contract/runs.ts';
import type { LossRange } from '#contract/common.ts';
import { eventSummary, SITE_BELOW_FLOOR, SITE_OUT_OF_REACH } from '#engine/footprint/site-peaks.ts';
import { DRAW_COUNT } from '#engine/ring/draws.ts';
import type { ResolvedFix } from '#engine/track/fixes.ts';
import type { Storm } from '#engine/track/storm.ts';
import { toCents } from '../../compute/minor-units.ts';
import type { ScoredSite, ScoredSites } from './scored-sites.ts';

const BIN_MS = 5;
const FIRST_BIN_MS = 20;
const BINS = 14;
const WIDE_RANGE = 1.3;

type Notice = ScenarioResult['engineNotices'][number];

const binOf = (gust: number) => Math.min(Math.floor((gust - FIRST_BIN_MS) / BIN_MS), BINS - 1);

const count = (n: number, one: string, many = `${one}s`) => `${n.toLocaleString('en')} ${n === 1 ? one : many}`;

/** The fix that reaches the largest maximum wind. */
const strongest = (fixes: readonly ResolvedFix[]): ResolvedFix =>
  fixes.reduce((best, fix) => (fix.maxWindMs > best.maxWindMs ? fix : best));

const anchorOf = (fixes: readonly ResolvedFix[]): ScenarioResult['anchor'] => {
  const peak = fixes.filter(({ anchor }) => anchor === 'peak').length;
  return peak === 0 ? 'mean' : peak === fixes.length ? 'peak' : 'mixed';
};

/** 5, 50 and 95 % over the draws of a figure of the whole event: sites' own percentiles are never combined. */
const spreadOf = (draws: Float64Array): { p5: number; p50: number; p95: number } => {
  const { p5, p50, p95 } = eventSummary(draws);
  return { p5, p50, p95 };
};

interface Summing {
  storm: Storm;
  gustThresholdsMs: readonly number[];
  /** What the run adds to the engine's own remarks. */
  remarks: readonly Notice[];
}

/** Sums a track up: every loss is the sum of the sites' cents, every range comes from the event's own draws. */
export const scenarioResult = (scored: ScoredSites, { storm, gustThresholdsMs, remarks }: Summing): ScenarioResult => {
  const sums = { tiv: 0, groundUpPlain: 0, groundUpMean: 0, grossPlain: 0, grossMean: 0 };
  const reach = { scored: 0, outOfReach: 0, belowFloor: 0 };
  let plainPeak = 0;
  const above = gustThresholdsMs.map((gustMs, i) => ({
    gustMs,
    plain: 0,
    ...spreadOf(scored.above.subarray(i * DRAW_COUNT, (i + 1) * DRAW_COUNT)),
    tivMinor: 0,
  }));
  const histogram = { p50: new Array<number>(BINS).fill(0), plain: new Array<number>(BINS).fill(0) };
  let isTouched = false;
  let wide = 0;
  for (const site of scored) {
    sums.tiv += site.tivMinor;
    if (site.reach === SITE_OUT_OF_REACH) {
      reach.outOfReach += 1;
      continue;
    }
    reach.scored += 1;
    if (site.reach === SITE_BELOW_FLOOR) reach.belowFloor += 1;
    sums.groundUpPlain += site.groundUpPlainMinor ?? 0;
    sums.groundUpMean += site.groundUpMeanMinor ?? 0;
    sums.grossPlain += site.grossPlainMinor ?? 0;
    sums.grossMean += site.grossMeanMinor ?? 0;
    const { plain, p5, p50, p99 } = site as ScoredSite & Record<'plain' | 'p5' | 'p50' | 'p99', number>;
    if (p5 !== plain || p99 !== plain) isTouched = true;
    if (p99 > WIDE_RANGE * plain) wide += 1;
    plainPeak = Math.max(plainPeak, plain);
    for (const level of above) {
      if (plain >= level.gustMs) level.plain += 1;
      if (p50 >= level.gustMs) level.tivMinor += site.tivMinor;
    }
    if (plain >= FIRST_BIN_MS) histogram.plain[binOf(plain)]! += 1;
    if (p50 >= FIRST_BIN_MS) histogram.p50[binOf(p50)]! += 1;
  }
  const acts = storm.wavenumber !== null && isTouched;
  const rangeOf = (draws: Float64Array, mean: number): LossRange | null => {
    if (!acts) return null;
    const { p5, p50, p95 } = eventSummary(draws);
    return { p5: toCents(p5)!, p50: toCents(p50)!, p95: toCents(p95)!, mean };
  };
  const notices: Notice[] = [...storm.notices, ...remarks];
  if (storm.wavenumber !== null && !isTouched) {
    notices.push({
      code: 'vortices-miss-sites',
      text: 'No site lies within two radii of maximum wind of the centre: vortices act on none, so enhanced equals plain.',
    });
  }
  if (wide > 0) {
    notices.push({
      code: 'wide-vortex-range',
      text: `At ${count(wide, 'site')} the 99th percentile exceeds 1.3 times the plain gust, more than observations we know of show.`,
    });
  }
  const strong = strongest(storm.fixes);
  return {
    sitesScored: reach.scored,
    outOfReach: reach.outOfReach,
    belowFloor: reach.belowFloor,
    tivMinor: sums.tiv,
    groundUpPlainMinor: sums.groundUpPlain,
    grossPlainMinor: sums.grossPlain,
    groundUp: rangeOf(scored.groundUp, sums.groundUpMean),
    gross: rangeOf(scored.gross, sums.grossMean),
    peakGustMs: { plain: plainPeak, ...spreadOf(scored.peak) },
    above,
    histogram,
    wavenumber: storm.wavenumber,
    maxima: {
      reportedMs: strong.reportedMaxWindMs,
      pressureImpliedMs: strong.pressureImpliedMaxWindMs,
      used: strong.intensitySource,
    },
    anchor: anchorOf(storm.fixes),
    engineNotices: notices,
  };
};

/** What was filled in on the way from the track to the storm: field, relation and fixes, for the run slip. */
export const filledWords = (fixes: readonly ResolvedFix[]): string[] => {
  const where = new Map<string, number[]>();
  fixes.forEach(({ filled }, i) => {
    for (const [field, relation] of Object.entries(filled)) {
      const key = `${field}: ${relation}`;
      where.set(key, [...(where.get(key) ?? []), i + 1]);
    }
  });
  return [...where].map(([key, numbers]) =>
    numbers.length === fixes.length ? `${key} (every fix)` : `${key} (fix ${numbers.join(', ')})`,
  );
};
