import { readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import type { TrackFix } from '#engine/track/fixes.ts';
import { METRES_PER_NAUTICAL_MILE, msFromKnots, PA_PER_HPA } from '#engine/units.ts';
import { readBestTrack } from '../../features/scenarios/reading/best-track.ts';
import { engineFixes } from '../../features/scenarios/resolve-track.ts';

const NOAA_FILES = [
  'AL041992_ANDREW',
  'AL032004_CHARLEY',
  'AL092017_HARVEY',
  'AL112017_IRMA',
  'AL092021_IDA',
  'AL092022_IAN',
];
const JTWC_FILES = ['11P2011_YASI', '17P2006_LARRY'];

/** Best tracks by storm id, from a folder that holds the eight files. */
export const readTracks = (folder: URL): Map<string, TrackFix[]> => {
  const textOf = (name: string) => readFileSync(new URL(name, folder), 'utf8');
  const idOf = (file: string) => file.split('_')[0]!;
  return new Map([
    ...NOAA_FILES.map((file): [string, TrackFix[]] => [idOf(file), noaaFixes(textOf(`${file}.txt`))]),
    ...JTWC_FILES.map((file): [string, TrackFix[]] => [idOf(file), jtwcFixes(textOf(`${file}_jtwc.csv`))]),
  ]);
};

/** By the product's own reader, as if a person had pasted the text. */
const noaaFixes = (text: string): TrackFix[] => {
  const { fixes, faults } = readBestTrack(text);
  if (faults.length > 0) throw new Error(faults.map(({ message }) => message).join(' '));
  return engineFixes({ fixes, declarations: { windAveragingS: 60, source: 'NOAA best track', asOf: null } });
};

/** Six-hourly fixes: 1-min winds in knots, pressure in hPa, radius of maximum wind in nautical miles; nothing else is used. */
const jtwcFixes = (text: string): TrackFix[] => {
  const rows: Record<string, string>[] = parse(text, { columns: true, relax_column_count: true });
  const amount = (cell: string | undefined, unit: (value: number) => number) =>
    cell === undefined || cell === '' || cell === 'NaN' ? null : unit(Number(cell));
  return rows.map((row) => {
    const at = row.dtg!;
    return {
      timeS: Date.UTC(+at.slice(0, 4), +at.slice(4, 6) - 1, +at.slice(6, 8), +at.slice(8, 10)) / 1000,
      latitude: Number(row.rlat),
      longitude: Number(row.rlon),
      centralPressurePa: amount(row.pmin, (hPa) => hPa * PA_PER_HPA),
      ambientPressurePa: null,
      maxWindMs: amount(row.vmax, msFromKnots),
      windAveragingS: 60,
      radiusOfMaxWindM: amount(row.rmax, (miles) => miles * METRES_PER_NAUTICAL_MILE),
      radius34KtM: null,
      radius50KtM: null,
      radius64KtM: null,
      ringWidthFraction: null,
      eyeVorticityRatio: null,
      hoursInland: null,
    };
  });
};
