import type { Footprint, FootprintQuery } from '#contract/runs.ts';
import type { Net } from '#engine/footprint/grid.ts';
import { AppError } from '../../errors.ts';
import type { FinishedTrack } from './result-service.ts';
import type { FootprintBands } from './stored-results.ts';

const FIELD =
  'over land in open country (roughness 0.03 m) with its own distance to the sea, over water at sea. Sites are scored with their own terrain, so a site and the field around it may differ.';
const GUST = `Peak 3-second gust at 10 m in m/s: ${FIELD}`;

const definitionOf = ({ view, draw, gustMs }: FootprintQuery): string => {
  switch (view) {
    case 'difference':
      return `Median with vortices less plain, m/s. ${GUST}`;
    case 'p99':
      return `99 % over 264 vortex draws of one track, place by place. ${GUST}`;
    case 'draw':
      return `Draw ${draw} of 264. Others differ; none is likelier for one street. ${GUST}`;
    case 'chance':
      return `Share of the weight of 264 vortex draws of one track in which the peak 3-second gust at 10 m reaches ${gustMs} m/s: ${FIELD} It is not the chance of the storm.`;
    default:
      return GUST;
  }
};

/** The bands of a view as they are answered; none of them, and the bounds of the track, where there is no footprint. */
export const footprintReply = (
  track: FinishedTrack,
  query: FootprintQuery,
  bands: FootprintBands | null,
  net: Net | null,
): Footprint =>
  ({
    view: query.view,
    draw: query.view === 'draw' ? query.draw! : null,
    gustMs: query.view === 'chance' ? query.gustMs! : null,
    levels: [...(bands?.levels ?? [])],
    bbox: bands?.bbox ?? boundsOf(track.path),
    computed: net && { bounds: boundsOfNet(net), isPartial: net.isPartial },
    bands: bands?.bands ?? { type: 'FeatureCollection', features: [] },
    definition: definitionOf(query),
    notices: track.notices,
  }) as Footprint;

/** What is worked out again from a run’s inputs must come from the engine that gave its results. */
export const requireSameEngine = ({ runNumber, engineVersion }: FinishedTrack, now: string): void => {
  if (engineVersion === now) return;
  throw new AppError(
    'result_not_ready',
    `Run ${runNumber} was computed with engine ${engineVersion}; this service now runs ${now}. The stored result stays as it is, but its steps can’t be worked out again. Run it again to see them.`,
  );
};

const boundsOfNet = ({ west, south, stepDeg, nx, ny }: Net): [number, number, number, number] => [
  west,
  south,
  west + (nx - 1) * stepDeg,
  south + (ny - 1) * stepDeg,
];

const boundsOf = (path: readonly [number, number][]): [number, number, number, number] => {
  const longitudes = path.map(([longitude]) => longitude);
  const latitudes = path.map(([, latitude]) => latitude);
  return [Math.min(...longitudes), Math.min(...latitudes), Math.max(...longitudes), Math.max(...latitudes)];
};
