import { createHash } from 'node:crypto';
import type { SiteBatch, SiteScores } from '#engine/footprint/site-peaks.ts';
import { DRAW_COUNT } from '#engine/ring/draws.ts';
import { SECTOR_COUNT } from '#engine/terrain/fetch.ts';
import { MINOR_PER_UNIT, toCents } from '../../compute/minor-units.ts';
import type { RunSite } from './run-ports.ts';

const numberOrNull = (value: number): number | null => (Number.isNaN(value) ? null : value);

/** A site's score as it is stored; nulls when the site is out of reach. */
export interface ScoredSite {
  siteNo: number;
  ref: string;
  tivMinor: number;
  /** 0 scored, 1 out of reach, 2 below the floor. */
  reach: number;
  plain: number | null;
  plainMean: number | null;
  seaWind: number | null;
  direction: number | null;
  peakTime: Date | null;
  secondsAbove25: number | null;
  secondsAbove33: number | null;
  enhancedMean: number | null;
  p5: number | null;
  p50: number | null;
  p90: number | null;
  p95: number | null;
  p99: number | null;
  damagePlain: number | null;
  damageMean: number | null;
  damageP5: number | null;
  damageP95: number | null;
  groundUpPlainMinor: number | null;
  groundUpMeanMinor: number | null;
  grossPlainMinor: number | null;
  grossMeanMinor: number | null;
  grossP5Minor: number | null;
  grossP50Minor: number | null;
  grossP95Minor: number | null;
}

/** The sites of a chunk as the engine takes them; whoever knows no overland distances leaves them to the land polygons. */
export const batchOf = (sites: readonly RunSite[]): SiteBatch => {
  const column = (pick: (site: RunSite) => number) => Float64Array.from(sites, pick);
  return {
    count: sites.length,
    latitude: column(({ latitude }) => latitude),
    longitude: column(({ longitude }) => longitude),
    roughnessM: column(({ roughnessM }) => roughnessM ?? NaN),
    fetchM: new Float64Array(SECTOR_COUNT * sites.length).fill(NaN),
    topographicFactor: new Float64Array(sites.length).fill(1),
    value: column(({ tivMinor }) => tivMinor / MINOR_PER_UNIT),
    deductible: column(({ deductibleMinor }) => deductibleMinor / MINOR_PER_UNIT),
    limit: column(({ limitMinor }) => (limitMinor === null ? Infinity : limitMinor / MINOR_PER_UNIT)),
  };
};

type Chunk = { sites: Pick<RunSite, 'siteNo' | 'ref' | 'tivMinor'>[]; scores: SiteScores };

/** Scores of an edition under one track, gathered chunk by chunk in whatever order they arrive. */
export class ScoredSites {
  readonly groundUp = new Float64Array(DRAW_COUNT);
  readonly gross = new Float64Array(DRAW_COUNT);
  /** Strongest gust at any site, per draw. */
  readonly peak = new Float64Array(DRAW_COUNT);
  /** Sites that reach each of the gusts asked for, per draw; gusts by draws. */
  readonly above: Float64Array;
  private readonly chunks: Chunk[] = [];

  constructor(gusts: number) {
    this.above = new Float64Array(gusts * DRAW_COUNT);
  }

  add(index: number, sites: readonly RunSite[], scores: SiteScores): void {
    this.chunks[index] = {
      sites: sites.map(({ siteNo, ref, tivMinor }) => ({ siteNo, ref, tivMinor })),
      scores,
    };
    // Exact sums of multiples of 1/1024: the same in any order.
    for (let d = 0; d < DRAW_COUNT; d++) {
      this.groundUp[d]! += scores.eventGroundUp[d]!;
      this.gross[d]! += scores.eventGross[d]!;
      this.peak[d] = Math.max(this.peak[d]!, scores.eventPeak[d]!);
    }
    scores.eventAbove.forEach((sitesAbove, i) => (this.above[i]! += sitesAbove));
  }

  /** Site by site in the edition's order. */
  *[Symbol.iterator](): Generator<ScoredSite> {
    for (const { sites, scores } of this.chunks) {
      for (let i = 0; i < sites.length; i++) yield scoredSite(sites[i]!, scores, i);
    }
  }

  /** Of every number the engine gave, bit by bit. */
  digest(): string {
    const hash = createHash('sha256');
    for (const { sites, scores } of this.chunks) {
      hash.update(Int32Array.from(sites, ({ siteNo }) => siteNo));
      const columns = Object.entries(scores).sort(([a], [b]) => (a < b ? -1 : 1));
      for (const [name, column] of columns) if (!name.startsWith('event')) hash.update(name).update(column);
    }
    return hash.update(this.groundUp).update(this.gross).update(this.peak).update(this.above).digest('hex');
  }
}

const scoredSite = (site: Chunk['sites'][number], scores: SiteScores, i: number): ScoredSite => {
  const timeS = scores.plainTimeS[i]!;
  return {
    ...site,
    reach: scores.reach[i]!,
    plain: numberOrNull(scores.plainGust[i]!),
    plainMean: numberOrNull(scores.plainMean[i]!),
    seaWind: numberOrNull(scores.plainSeaWind[i]!),
    direction: numberOrNull(scores.plainDirection[i]!),
    peakTime: Number.isNaN(timeS) ? null : new Date(Math.round(timeS * 1000)),
    secondsAbove25: numberOrNull(scores.secondsAbove25[i]!),
    secondsAbove33: numberOrNull(scores.secondsAbove33[i]!),
    enhancedMean: numberOrNull(scores.enhancedMean[i]!),
    p5: numberOrNull(scores.p5[i]!),
    p50: numberOrNull(scores.p50[i]!),
    p90: numberOrNull(scores.p90[i]!),
    p95: numberOrNull(scores.p95[i]!),
    p99: numberOrNull(scores.p99[i]!),
    damagePlain: numberOrNull(scores.damagePlain[i]!),
    damageMean: numberOrNull(scores.damageMean[i]!),
    damageP5: numberOrNull(scores.damageP5[i]!),
    damageP95: numberOrNull(scores.damageP95[i]!),
    groundUpPlainMinor: toCents(scores.groundUpPlain[i]!),
    groundUpMeanMinor: toCents(scores.groundUpMean[i]!),
    grossPlainMinor: toCents(scores.grossPlain[i]!),
    grossMeanMinor: toCents(scores.grossMean[i]!),
    grossP5Minor: toCents(scores.grossP5[i]!),
    grossP50Minor: toCents(scores.grossP50[i]!),
    grossP95Minor: toCents(scores.grossP95[i]!),
  };
};
