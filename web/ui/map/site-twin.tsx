import { useMemo } from 'react';
import { clock, shortDay } from '../../lib/dates.ts';
import { count, decimal } from '../../lib/numbers.ts';
import { useUnits } from '../../lib/units.tsx';
import { EmptyRow, Table, Td, Th, Tr } from '../table.tsx';
import { longitudeNear, placeByTrack, type Bounds, type LonLat } from './geography.ts';
import { byGust, sitesInView, type MapSites, type MapTrack } from './map-data.ts';

interface SiteTwinProps {
  sites: MapSites;
  track: MapTrack;
  /** Null: all of them. */
  view: Bounds | null;
  chosenSite: number | null;
  onChooseSite?: ((index: number) => void) | undefined;
  /** What the picture shows that is no column otherwise. */
  shown?: TwinColumn | undefined;
}

export interface TwinColumn {
  title: string;
  text: (index: number) => string;
}

const MOST_ROWS = 200;

const nearestTime = (track: MapTrack, [longitude, latitude]: LonLat): string | null => {
  let nearest: string | null = null;
  let least = Infinity;
  for (const at of track.times) {
    const distance = Math.hypot(
      (longitudeNear(at.longitude, longitude) - longitude) * Math.cos((latitude * Math.PI) / 180),
      at.latitude - latitude,
    );
    if (distance < least) [least, nearest] = [distance, at.time];
  }
  return nearest;
};

/** The map as a table: what is in view, strongest gust first. */
export function SiteTwin({ sites, track, view, chosenSite, onChooseSite, shown: column }: SiteTwinProps) {
  const { gust, gustRange, label } = useUnits();
  const order = useMemo(
    () => byGust(sites, view ? sitesInView(sites, view) : sites.siteNo.map((_, index) => index)),
    [sites, view],
  );
  const shown = order.slice(0, MOST_ROWS);
  return (
    <div className="absolute inset-0 flex flex-col overflow-hidden bg-sheet pt-13">
      <p className="border-b border-rule px-4 pb-2 text-12 text-ink-2">
        {count(order.length)} sites in view
        {order.length > shown.length && `; the ${MOST_ROWS} with the strongest gusts are listed`}
      </p>
      <Table label="Sites in view, strongest gust first" className="min-h-0 flex-1 overflow-y-auto">
        <thead className="sticky top-0 z-1 bg-sheet">
          <tr>
            <Th>Site</Th>
            {column && <Th numeric>{column.title}</Th>}
            <Th numeric priority={2}>
              Plain, {label}
            </Th>
            <Th numeric>5–95 %, {label}</Th>
            <Th numeric>From the track</Th>
            <Th numeric priority={2}>
              Nearest, UTC
            </Th>
          </tr>
        </thead>
        <tbody>
          {shown.length === 0 && (
            <EmptyRow columns={column ? 6 : 5}>
              No site in view. Zoom out on the map, or pan with the arrow keys.
            </EmptyRow>
          )}
          {shown.map((index) => {
            const point: LonLat = [sites.longitude[index]!, sites.latitude[index]!];
            const place = placeByTrack(track.path, point);
            const time = nearestTime(track, point);
            const plain = sites.plainMs[index];
            const low = sites.p5Ms[index];
            const high = sites.p95Ms[index];
            return (
              <Tr
                key={sites.siteNo[index]}
                selected={index === chosenSite}
                onClick={onChooseSite && (() => onChooseSite(index))}
              >
                <Td>
                  {onChooseSite ? (
                    <button type="button" className="font-bold text-link underline-offset-2 hover:underline">
                      {sites.ref[index]}
                    </button>
                  ) : (
                    sites.ref[index]
                  )}
                </Td>
                {column && <Td numeric>{column.text(index)}</Td>}
                <Td numeric priority={2}>
                  {plain === null || plain === undefined ? 'not scored' : gust(plain)}
                </Td>
                <Td numeric>
                  {low !== null && low !== undefined && high !== null && high !== undefined
                    ? gustRange(low, high)
                    : 'no range'}
                </Td>
                <Td numeric>{place ? `${decimal(place.distanceKm, 0)} km ${place.side}` : 'none'}</Td>
                <Td numeric priority={2}>
                  {time ? `${shortDay(time)} ${clock(time)}` : ''}
                </Td>
              </Tr>
            );
          })}
        </tbody>
      </Table>
    </div>
  );
}
