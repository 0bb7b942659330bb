import type { Context, Quality, SiteRow } from '../file-row.ts';
import { hasCorrection, pointOf } from '../file-row.ts';
import { degreesText } from '../coordinates.ts';
import { canLieIn, inSentence } from '../countries.ts';
import { countText, receivedText, rowsText } from '../numbers.ts';
import { pointKey } from '../point-key.ts';
import { rowRule, surveyRule, type Finding } from '../rule.ts';

/** The land polygons lack barrier islands, so a point a little way out is more often the map's fault than the file's. */
const OFFSHORE_NOTED_M = 2_000;
const OFFSHORE_HELD_M = 5_000;
const SHARED_POINT_SITES = 5;

const QUALITY_ORDER: readonly Quality[] = [
  'building',
  'parcel',
  'placed_by_hand',
  'street',
  'postcode',
  'town',
  'region',
  'unknown',
];
const worse = (a: Quality, b: Quality): Quality => (QUALITY_ORDER.indexOf(a) >= QUALITY_ORDER.indexOf(b) ? a : b);
const qualityText = (quality: Quality) => quality.replaceAll('_', ' ');

const same = (count: number, verb: string, single: string) => (count > 1 ? ` ${rowsText(count)} ${verb}.` : single);
const pairReceived = ({ received }: SiteRow) => `${received.latitude ?? ''} / ${received.longitude ?? ''}`;

/** Both coordinates as numbers, wherever they lie. */
const degreesOf = ({ latitude, longitude }: SiteRow): [number, number] | null =>
  latitude.kind === 'degrees' && longitude.kind === 'degrees' ? [latitude.degrees, longitude.degrees] : null;

const isNull = (row: SiteRow) => {
  const pair = degreesOf(row);
  return pair !== null && pair[0] === 0 && pair[1] === 0;
};
const looksMetric = (row: SiteRow) => {
  const pair = degreesOf(row);
  return pair !== null && Math.abs(pair[0]) > 1000 && Math.abs(pair[1]) > 1000;
};

/** Decimals of the sharper of the two coordinates; null when there are none to judge. */
const decimalsOf = ({ latitude, longitude }: SiteRow): number | null =>
  latitude.kind === 'degrees' && longitude.kind === 'degrees' ? Math.max(latitude.decimals, longitude.decimals) : null;

/** The quality a row may claim at best with the decimals it has. */
const ceilingOf = (decimals: number | null): Quality =>
  decimals === null || decimals > 2 ? 'building' : decimals === 2 ? 'postcode' : 'town';

/** Location quality as claimed, lowered where the coordinates can't carry it; never raised. */
export const qualityOf = (row: SiteRow, sharesPoint: boolean): Quality => {
  const lowered = worse(row.claimedQuality, ceilingOf(decimalsOf(row)));
  return sharesPoint ? worse(lowered, 'postcode') : lowered;
};

export const noCoordinates = rowRule({
  code: 'PLACE-01',
  severity: 'hold',
  title: 'No latitude or longitude',
  fix: { kind: 'exclude', label: (rows) => `Exclude ${rowsText(rows)}` },
  check: (row) =>
    row.latitude.kind === 'blank' || row.longitude.kind === 'blank'
      ? {
          field: row.latitude.kind === 'blank' ? 'latitude' : 'longitude',
          received: null,
          text: `Row ${row.row}: no ${
            row.latitude.kind !== 'blank'
              ? 'longitude'
              : row.longitude.kind !== 'blank'
                ? 'latitude'
                : 'latitude or longitude'
          }. The site can't be scored. Add coordinates, place it on the map, or exclude it with a reason.`,
        }
      : null,
});

export const swapped = rowRule({
  code: 'PLACE-02',
  severity: 'hold',
  title: 'Latitude and longitude look swapped',
  fix: { kind: 'swap_coordinates', label: (rows) => `Swap ${rowsText(rows)}` },
  check: (row, file) => {
    if (row.slip !== 'swapped') return null;
    const where = row.country
      ? `they fall in ${inSentence(row.country)} like the rest of this file`
      : file.home
        ? 'they fall among the other sites of this file'
        : 'they are a point on the globe';
    return {
      field: 'latitude',
      received: pairReceived(row),
      text: `Row ${row.row}: latitude ${receivedText(row.received.latitude ?? '')} and longitude ${receivedText(
        row.received.longitude ?? '',
      )} look swapped — reversed, ${where}. Swap them?${same(file.swapped, 'have the same pattern', '')}`,
    };
  },
});

export const signLost = rowRule({
  code: 'PLACE-03',
  severity: 'hold',
  title: 'Longitude has the wrong sign',
  fix: {
    kind: 'negate_longitude',
    label: (rows) => (rows === 1 ? 'Change 1 sign' : `Change ${countText(rows)} signs`),
  },
  check: (row, file) => {
    if (row.slip !== 'sign lost') return null;
    const longitude = row.longitude.kind === 'degrees' ? row.longitude.degrees : 0;
    const side = longitude > 0 ? 'east' : 'west';
    const against = row.country
      ? `the country is ${row.received.country?.trim() ?? row.country.code}`
      : `the rest of this file lies ${longitude > 0 ? 'west' : 'east'} of it`;
    return {
      field: 'longitude',
      received: row.received.longitude ?? null,
      text: `Row ${row.row}: longitude ${degreesText(longitude)} is ${side} of Greenwich, but ${against}. Did it ${
        longitude > 0 ? 'lose its' : 'gain a'
      } minus sign?${same(file.signLost, 'match', '')}`,
    };
  },
});

export const nullIsland = rowRule({
  code: 'PLACE-04',
  severity: 'hold',
  title: 'Coordinates are 0, 0',
  fix: { kind: 'exclude', label: (rows) => `Exclude ${rowsText(rows)}` },
  check: (row) =>
    isNull(row)
      ? {
          field: 'latitude',
          received: pairReceived(row),
          text: `Row ${row.row}: coordinates are 0, 0. That usually means 'not found'. The site is held.`,
        }
      : null,
});

export const sexagesimal = rowRule({
  code: 'PLACE-05',
  severity: 'note',
  title: 'Degrees, minutes and seconds were read as decimal degrees',
  check: (row) => {
    for (const field of ['latitude', 'longitude'] as const) {
      const coordinate = row[field];
      if (coordinate.kind !== 'degrees' || !coordinate.sexagesimal) continue;
      const received = row.received[field] ?? '';
      return {
        field,
        received,
        text: `Row ${row.row}: '${receivedText(received)}' was read as ${degreesText(coordinate.degrees)}. Check the value shown.`,
      };
    }
    return null;
  },
});

export const metres = rowRule({
  code: 'PLACE-06',
  severity: 'hold',
  title: 'Coordinates look like metres, not degrees',
  check: (row) =>
    looksMetric(row)
      ? {
          field: 'latitude',
          received: pairReceived(row),
          text: `Row ${row.row}: ${row.received.longitude} / ${row.received.latitude} look like metres on a map grid, not degrees. Tell us the grid or give degrees.`,
        }
      : null,
});

/** Metres off the coast when the row stands as a usable point; null where another rule already doubts the point. */
const offshoreOf = (row: SiteRow, { offshoreM }: Pick<Context, 'offshoreM'>) => {
  const point = pointOf(row);
  if (!point || Math.abs(point[0]) > 60 || isNull(row) || row.slip) return null;
  const metresOff = offshoreM(...point);
  return metresOff > OFFSHORE_NOTED_M ? metresOff : null;
};
const kilometres = (metresOff: number) =>
  metresOff === Infinity ? 'more than 100 km' : `${(metresOff / 1000).toFixed(1)} km`;

export const farOffshore = rowRule({
  code: 'PLACE-07',
  severity: 'hold',
  title: 'Point is more than 5 km offshore',
  fix: { kind: 'keep_all', label: (rows) => `Confirm ${rowsText(rows)} at sea` },
  check: (row, file) => {
    const off = offshoreOf(row, file);
    if (off === null || off <= OFFSHORE_HELD_M || hasCorrection(row, 'keep_all', 'PLACE-07')) return null;
    return {
      field: 'latitude',
      received: pairReceived(row),
      text: `Row ${row.row}: this point is ${kilometres(off)} offshore. Held until you confirm — is it a rig, a pier, or a typing slip?`,
    };
  },
});

export const nearOffshore = rowRule({
  code: 'PLACE-12',
  severity: 'note',
  title: 'Point is 2 to 5 km off the mapped coast',
  check: (row, file) => {
    const off = offshoreOf(row, file);
    if (off === null || off > OFFSHORE_HELD_M) return null;
    return {
      field: 'latitude',
      received: pairReceived(row),
      text: `Row ${row.row}: this point is ${kilometres(off)} off the coast we have on the map, which leaves out small barrier islands. We scored it. Check the point.`,
    };
  },
});

export const otherCountry = rowRule({
  code: 'PLACE-08',
  severity: 'note',
  title: 'Coordinates and country disagree',
  check: (row) => {
    const point = pointOf(row);
    if (!point || !row.country || isNull(row) || row.slip) return null;
    if (canLieIn(row.country, ...point)) return null;
    return {
      field: 'country',
      received: row.received.country ?? null,
      text: `Row ${row.row}: the coordinates are outside ${inSentence(row.country)}; the country says ${row.received.country?.trim()}. We kept the coordinates. Check the address.`,
    };
  },
});

export const coarse = rowRule({
  code: 'PLACE-10',
  severity: 'note',
  title: 'Two decimals or fewer, about 1 km',
  check: (row) => {
    const decimals = decimalsOf(row);
    if (decimals === null || decimals > 2 || isNull(row) || looksMetric(row)) return null;
    const precise = [
      'no decimals is accurate to about 100 km',
      'one decimal is accurate to about 10 km',
      'two decimals is accurate to about 1 km',
    ];
    const lowered = worse(row.claimedQuality, ceilingOf(decimals));
    const outcome =
      lowered === row.claimedQuality
        ? `Location quality stays ${qualityText(lowered)}.`
        : `Location quality lowered from ${qualityText(row.claimedQuality)} to ${qualityText(lowered)}.`;
    return { field: 'latitude', received: pairReceived(row), text: `Row ${row.row}: ${precise[decimals]}. ${outcome}` };
  },
});

export const unusable = rowRule({
  code: 'PLACE-11',
  severity: 'hold',
  title: 'Coordinates can’t be used as they stand',
  fix: { kind: 'exclude', label: (rows) => `Exclude ${rowsText(rows)}` },
  check: (row) => {
    for (const [field, limit] of [
      ['latitude', 60],
      ['longitude', 180],
    ] as const) {
      const coordinate = row[field];
      const received = row.received[field] ?? '';
      if (coordinate.kind === 'unreadable') {
        return {
          field,
          received,
          text: `Row ${row.row}: ${field} '${receivedText(received)}' isn't a number we can read. The site can't be scored. Write decimal degrees, for example ${
            field === 'latitude' ? '25.76667' : '−80.19180'
          }.`,
        };
      }
      if (coordinate.kind !== 'degrees' || Math.abs(coordinate.degrees) <= limit || looksMetric(row) || row.slip)
        continue;
      return {
        field,
        received,
        text: `Row ${row.row}: ${field} ${degreesText(coordinate.degrees)} is outside −${limit} to ${limit}. The site can't be scored. Check the value.`,
      };
    }
    return null;
  },
});

export const sharedPoint = surveyRule({
  code: 'PLACE-09',
  severity: 'note',
  title: 'Sites with different addresses share a point',
  survey: (rows, { aside, repeats }) => {
    const takesPart = (index: number) => !aside.has(index) && !repeats.has(index) && rows[index]!.received.street;
    const counts = new Map<number, number>();
    const points = Float64Array.from(rows, ({ received }, index) => {
      const point = takesPart(index) ? pointKey(received) : null;
      if (point !== null) counts.set(point, (counts.get(point) ?? 0) + 1);
      return point ?? Number.NaN;
    });
    const byPoint = new Map<number, number[]>();
    points.forEach((point, index) => {
      if ((counts.get(point) ?? 0) < SHARED_POINT_SITES) return;
      const sharing = byPoint.get(point);
      if (sharing) sharing.push(index);
      else byPoint.set(point, [index]);
    });
    const found = new Map<number, Finding>();
    for (const sharing of byPoint.values()) {
      const addresses = new Set(sharing.map((index) => rows[index]!.received.street!.trim().toLowerCase()));
      if (addresses.size < SHARED_POINT_SITES) continue;
      const first = rows[sharing[0]!]!.row;
      const last = rows[sharing.at(-1)!]!.row;
      for (const index of sharing) {
        found.set(index, {
          field: 'latitude',
          received: `${rows[index]!.received.latitude} / ${rows[index]!.received.longitude}`,
          text: `Rows ${first}–${last}: ${countText(sharing.length)} sites with different addresses share one point. We treat them as postcode quality; gusts are shown as a range.`,
        });
      }
    }
    return found;
  },
});
