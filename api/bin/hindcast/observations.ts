import { readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import { ObservationRole, SourceClass, type ComparedObservation } from '#contract/validation.ts';
import { standardiseGust } from '#engine/calibration/standardise.ts';
import { GUST_AVERAGING } from '#engine/gust/gust-factor.ts';
import { seaRoughness } from '#engine/terrain/drag.ts';

/** An observation with its role, before anything is modelled. */
export type Observation = Omit<ComparedObservation, 'modelled'> & {
  stormId: string;
  /** The standardised gust written beside the role; null where none is. */
  writtenStandardisedMs: number | null;
};

const ASSUMED_HEIGHT_M = 10;
/** A wind above which the sea’s drag no longer rises. */
const STRONG_WIND = 40;

type Row = Record<string, string>;

const rowsOf = (file: URL): Row[] => parse(readFileSync(file, 'utf8'), { columns: true, bom: true });
const number = (cell: string): number | null => (cell === '' ? null : Number(cell));
const text = (cell: string): string | null => (cell === '' ? null : cell);

/** Observations and their roles from a folder that holds the two tables. */
export const readObservations = (folder: URL): Observation[] => {
  const roles = new Map(rowsOf(new URL('observation_roles.csv', folder)).map((row) => [row.obs_id!, row]));
  return rowsOf(new URL('observations.csv', folder)).map((row) => {
    const of = roles.get(row.obs_id!);
    if (!of) throw new Error(`Observation ${row.obs_id} has no role.`);
    const gustMs = number(row.gust_ms!);
    const heightM = number(row.anemometer_height_m!);
    const gustAveragingS = number(row.gust_avg_s!);
    const roughnessLengthM = number(of.roughness_length_m!);
    return {
      id: row.obs_id!,
      stormId: row.storm_id!,
      storm: row.storm!,
      station: row.station!,
      latitude: Number(row.lat),
      longitude: Number(row.lon),
      role: ObservationRole.parse(of.role),
      sourceClass: SourceClass.parse(row.source_class),
      how: row.how === 'found' ? 'found' : 'memory',
      placeBasis: row.coord_basis!,
      heightM,
      heightBasis: row.height_basis!,
      gustAveragingS,
      exposure: row.exposure!,
      roughnessLengthM,
      gustMs,
      standardisedMs:
        gustMs === null
          ? null
          : standardiseGust({
              wind: gustMs,
              height: heightM ?? ASSUMED_HEIGHT_M,
              roughness: roughnessLengthM ?? seaRoughness(STRONG_WIND),
              peakAveraging: gustAveragingS ?? GUST_AVERAGING,
            }),
      writtenStandardisedMs: number(of.standardised_gust_ms!),
      sustainedMs: number(row.sustained_ms!),
      timeUtc: text(row.time_utc!),
      timeBasis: row.time_basis!,
      compareUntilUtc: text(of.compare_until_utc!),
      source: row.source!,
      sourceUrl: text(row.source_url!),
      note: row.note!,
    };
  });
};
