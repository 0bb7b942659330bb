import type { Draw, Draws, DrawSites } from '#contract/draws.ts';
import type { Footprint, FootprintQuery } from '#contract/runs.ts';
import type { SiteBatch } from '#engine/footprint/site-peaks.ts';
import { DRAW_COUNT, DRAW_WEIGHT_TOTAL, DRAW_WEIGHT_UNITS, PHASE_COUNT } from '#engine/ring/draws.ts';
import { amplitudeNodes } from '#engine/ring/regimes.ts';
import { SECTOR_COUNT } from '#engine/terrain/fetch.ts';
import type { Actor } from '../../actor.ts';
import { layerArea, type DrawView } from '../../compute/draws.ts';
import { toCents } from '../../compute/minor-units.ts';
import type { EnginePool } from '../../compute/pool.ts';
import { CHUNK_SITES } from '../../compute/protocol.ts';
import type { Transact, Tx } from '../../transact.ts';
import type { DrawStore, EventDraws, GustSite } from './draw-store.ts';
import { footprintReply, requireSameEngine } from './footprint-view.ts';
import { Recent } from './recent.ts';
import type { At, FinishedTrack, FinishedTracks, MeasuredFetches } from './result-service.ts';
import type { FootprintBands } from './stored-results.ts';

/** Lets so much work pass at a time; a few wait, the rest are asked to come again. */
interface Gate {
  pass<T>(signal: AbortSignal, work: () => Promise<T>): Promise<T>;
}

export interface DrawParts {
  transact: Transact;
  draws: DrawStore;
  tracks: FinishedTracks;
  fetches: MeasuredFetches;
  pool: EnginePool;
  engineVersion: () => string;
  gate: Gate;
}

/** Pictures kept; one holds at most a few megabytes. */
const KEPT = 32;
/** Half a minute of two threads. */
const MOST_SITES = 250_000;

/** Looks into the 264 vortex draws behind a track’s ranges: worked out when asked for, stored nowhere. */
export class DrawService {
  private readonly pictures = new Recent<FootprintBands>(KEPT);
  private readonly gusts = new Recent<Pick<DrawSites, 'siteNo' | 'gustMs' | 'reason'>>(KEPT);

  constructor(private readonly parts: DrawParts) {}

  list(actor: Actor, at: At): Promise<Draws> {
    return this.read(actor, at, async (tx, track) => {
      const { currency, gustThresholdsMs, notices } = track;
      const common = { currency, gustThresholdsMs: [...gustThresholdsMs], notices };
      const reason = noDrawsReason(track);
      if (reason !== null) return { ...common, draws: [], named: null, reason };
      const strengths = amplitudeNodes(track.options.regime);
      const draws = ranked(
        await this.parts.draws.event(tx, actor.orgId, track.runScenarioId),
        gustThresholdsMs.length,
        strengths,
      );
      return {
        ...common,
        draws,
        named: { p5: drawAt(draws, 0.05), p50: drawAt(draws, 0.5), p95: drawAt(draws, 0.95) },
        reason,
      };
    });
  }

  async footprint(actor: Actor, at: At, query: FootprintQuery, signal: AbortSignal): Promise<Footprint> {
    const { draws, engineVersion, gate, pool } = this.parts;
    const { track, net } = await this.read(actor, at, async (tx, found) => ({
      track: found,
      net: await draws.net(tx, actor.orgId, found.runScenarioId),
    }));
    requireSameEngine(track, engineVersion());
    if (net === null) return footprintReply(track, query, null, null);
    const view = viewOf(query);
    const key = `${track.runScenarioId} ${JSON.stringify(view)}`;
    const { fixes, observations, options } = track;
    const bands =
      this.pictures.get(key) ??
      (await gate.pass(signal, async () => {
        // Somebody else may have asked for it while this one waited.
        const kept = this.pictures.get(key);
        return kept ?? pool.run('drawBands', { fixes, observations, options, net, view }, signal);
      }));
    this.pictures.set(key, bands);
    return footprintReply(track, query, bands, net);
  }

  async sites(actor: Actor, at: At, draw: number, signal: AbortSignal): Promise<DrawSites> {
    const track = await this.read(actor, at, (_tx, found) => Promise.resolve(found));
    requireSameEngine(track, this.parts.engineVersion());
    const key = `${track.runScenarioId} ${draw}`;
    const found =
      this.gusts.get(key) ?? (await this.parts.gate.pass(signal, () => this.score(actor, track, draw, signal)));
    this.gusts.set(key, found);
    return { draw, ...found, notices: track.notices };
  }

  private async score(actor: Actor, track: FinishedTrack, draw: number, signal: AbortSignal) {
    const { transact, draws, fetches, pool } = this.parts;
    const { fixes, observations, options, editionId } = track;
    const storm = await pool.run('storm', { fixes, observations, options }, signal);
    const area = layerArea(storm);
    const none = { siteNo: [], gustMs: [], reason: null };
    if (area === null) return none;
    const sites = await transact(actor, (tx) => draws.sitesWithin(tx, actor.orgId, editionId, area, MOST_SITES + 1));
    if (sites.length > MOST_SITES) {
      const reason = `More than ${MOST_SITES.toLocaleString('en')} sites lie where vortices reach. The map shows the draw; site by site it isn’t worked out for so many.`;
      return { ...none, reason };
    }
    const siteNo: number[] = [];
    const gustMs: number[] = [];
    for (let first = 0; first < sites.length; first += CHUNK_SITES) {
      const chunk = sites.slice(first, first + CHUNK_SITES);
      const known = await transact(actor, (tx) =>
        fetches.read(tx, actor.orgId, editionId, chunk[0]!.siteNo, chunk.at(-1)!.siteNo),
      );
      const scored = await pool.run('drawSites', { storm, sites: batchOf(chunk, known), draw: draw - 1 }, signal);
      for (const index of scored.site) siteNo.push(chunk[index]!.siteNo);
      gustMs.push(...scored.gustMs);
    }
    return { siteNo, gustMs, reason: null };
  }

  private read<T>(
    actor: Actor,
    { runId, runScenarioId }: At,
    work: (tx: Tx, track: FinishedTrack) => Promise<T>,
  ): Promise<T> {
    return this.parts.transact(actor, async (tx) =>
      work(tx, await this.parts.tracks.require(tx, actor.orgId, runId, runScenarioId)),
    );
  }
}

const noDrawsReason = ({ options, hasVortexRange }: FinishedTrack): string | null => {
  if (!options.mesovortices)
    return 'The mesovortex layer is off in this run, so there are no draws: plain is all there is.';
  if (hasVortexRange) return null;
  return 'Vortices change no site of this run, so every draw is plain.';
};

const viewOf = ({ view, draw, gustMs }: FootprintQuery): DrawView => {
  if (view === 'draw') return { kind: 'draw', draw: draw! - 1 };
  return view === 'chance' ? { kind: 'chance', gust: gustMs! } : { kind: 'p99' };
};

const ranked = ({ gross, strongest, sitesAbove }: EventDraws, gusts: number, strengths: readonly number[]): Draw[] =>
  gross
    .map((amount, d) => ({ amount, d }))
    .sort((a, b) => a.amount - b.amount || a.d - b.d)
    .map(({ amount, d }, i) => ({
      draw: d + 1,
      rank: i + 1,
      grossMinor: toCents(amount)!,
      weight: DRAW_WEIGHT_UNITS[d]! / DRAW_WEIGHT_TOTAL,
      strongestMs: strongest?.[d] ?? null,
      sitesAbove: sitesAbove && Array.from({ length: gusts }, (_, k) => sitesAbove[k * DRAW_COUNT + d]!),
      strength: strengths[Math.floor(d / PHASE_COUNT)]!,
      phaseDeg: (360 / PHASE_COUNT) * ((d % PHASE_COUNT) + 0.5),
    }));

/** First draw in their order at which the weights reach a share: counted in whole units, as the event’s percentiles are. */
const drawAt = (draws: readonly Draw[], share: number): number => {
  let units = 0;
  const target = (share - 1e-12) * DRAW_WEIGHT_TOTAL;
  return draws.find(({ draw }) => (units += DRAW_WEIGHT_UNITS[draw - 1]!) >= target)!.draw;
};

const batchOf = (sites: readonly GustSite[], known: ReadonlyMap<number, readonly number[]>): SiteBatch => {
  const column = (pick: (site: GustSite) => number) => Float64Array.from(sites, pick);
  const fetchM = new Float64Array(SECTOR_COUNT * sites.length).fill(NaN);
  sites.forEach(({ siteNo }, i) => {
    const measured = known.get(siteNo);
    if (measured) fetchM.set(measured, SECTOR_COUNT * i);
  });
  return {
    count: sites.length,
    latitude: column(({ latitude }) => latitude),
    longitude: column(({ longitude }) => longitude),
    roughnessM: column(({ roughnessM }) => roughnessM ?? NaN),
    fetchM,
    topographicFactor: new Float64Array(sites.length).fill(1),
    value: new Float64Array(sites.length).fill(NaN),
    deductible: new Float64Array(sites.length),
    limit: new Float64Array(sites.length).fill(Infinity),
  };
};
