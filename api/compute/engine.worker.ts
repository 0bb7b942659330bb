import { move, transferableSymbol, valueSymbol } from 'piscina';
import { DomainError } from '#engine/errors.ts';
import { footprintGrid } from '#engine/footprint/grid.ts';
import { scoreSites, type SiteBatch } from '#engine/footprint/site-peaks.ts';
import { gustLadder, siteSeries, staysInEye } from '#engine/footprint/site-series.ts';
import { fetchBySector } from '#engine/geo/land.ts';
import { SECTOR_COUNT } from '#engine/terrain/fetch.ts';
import { prepareStorm } from '#engine/track/storm.ts';
import { footprintBands } from './bands.ts';
import { landIndex } from './land.ts';
import type { Answer, ExplainTask, FootprintTask, ScoreTask, StopFlag, StormTask, Tasks } from './protocol.ts';

/** Hands the arrays of a reply over instead of copying them. */
const moved = <Reply extends object>(reply: Reply): Answer<Reply> => {
  const buffers = Object.values(reply).flatMap((value: unknown) => (ArrayBuffer.isView(value) ? [value.buffer] : []));
  return move({
    [transferableSymbol]: buffers,
    [valueSymbol]: { reply },
  } as unknown as ArrayBuffer) as unknown as Answer<Reply>;
};

const STOPPED = { stopped: true } as const;
const isStopped = (stop: StopFlag) => Atomics.load(stop, 0) !== 0;

const answer = <Reply>(work: () => Answer<Reply>): Answer<Reply> => {
  try {
    return work();
  } catch (error) {
    if (error instanceof DomainError) return { refused: error.message };
    throw error;
  }
};

export const storm = ({ fixes, options }: StormTask): Answer<Tasks['storm']['reply']> =>
  answer(() => moved(prepareStorm(fixes, options, landIndex())));

/** Overland distances from the land polygons, for the sites on land that come without. */
const fillFetch = ({ count, roughnessM, latitude, longitude, fetchM }: SiteBatch): void => {
  for (let i = 0; i < count; i++) {
    const at = SECTOR_COUNT * i;
    if (!Number.isNaN(fetchM[at]!)) continue;
    if (Number.isNaN(roughnessM[i]!)) fetchM.fill(0, at, at + SECTOR_COUNT);
    else fetchBySector(landIndex(), latitude[i]!, longitude[i]!, fetchM, at);
  }
};

export const score = ({ storm: prepared, sites, curve, stop }: ScoreTask): Answer<Tasks['score']['reply']> =>
  answer(() => {
    if (isStopped(stop)) return STOPPED;
    fillFetch(sites);
    const scores = scoreSites(prepared, sites, curve, { shouldStop: () => isStopped(stop) });
    return isStopped(stop) ? STOPPED : moved(scores);
  });

export const footprint = ({ storm: prepared, focus, stop }: FootprintTask): Answer<Tasks['footprint']['reply']> =>
  answer(() => {
    if (isStopped(stop)) return STOPPED;
    const grid = footprintGrid(prepared, landIndex(), { focus }, { shouldStop: () => isStopped(stop) });
    if (isStopped(stop)) return STOPPED;
    return { reply: grid && { grid, bands: footprintBands(grid) } };
  });

export const explain = ({ fixes, options, site }: ExplainTask): Answer<Tasks['explain']['reply']> =>
  answer(() => {
    const prepared = prepareStorm(fixes, options, landIndex());
    const fetch = new Float64Array(SECTOR_COUNT);
    if (site.roughnessM !== null) fetchBySector(landIndex(), site.latitude, site.longitude, fetch);
    const fetchM = [...fetch];
    const whole = { ...site, fetchM };
    return {
      reply: {
        fetchM,
        series: siteSeries(prepared, whole),
        ladder: gustLadder(prepared, whole),
        staysInEye: staysInEye(prepared, whole),
        wavenumber: prepared.wavenumber,
        notices: prepared.notices,
      },
    };
  });

/** Loads the land polygons before the first task needs them. */
export const warm = (): void => {
  landIndex();
};
