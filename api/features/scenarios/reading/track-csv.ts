import { parse } from 'csv-parse/sync';
import type { z } from 'zod';
import type { Fault } from '#contract/errors.ts';
import type { Averaging, Fix } from '#contract/scenarios.ts';
import { METRES_PER_NAUTICAL_MILE, MS_PER_KMH, MS_PER_KNOT, MS_PER_MPH, PA_PER_HPA } from '#engine/units.ts';
import { coordinate, decimal, isMissing, pickStorm, quoted, type StormText } from './storm-text.ts';

type Line = { cells: string[]; line: number };
type Seconds = z.infer<typeof Averaging>;
type RadiusField = 'radius34KtM' | 'radius50KtM' | 'radius64KtM';
type NumberField = Exclude<keyof Fix, 'time' | 'latitude' | 'longitude' | RadiusField>;
type RadiusColumn = { field: RadiusField; quadrant: number; factor: number; conversion: string | null };
type Column = { field: NumberField; factor: number; conversion: string | null };

const SPEEDS: [suffix: string, factor: number, words: string][] = [
  ['ms', 1, ''],
  ['kt', MS_PER_KNOT, `knots × ${MS_PER_KNOT.toFixed(6)} = m/s (1 kt = 1852 m / 3600 s)`],
  ['mph', MS_PER_MPH, `miles an hour × ${MS_PER_MPH} = m/s`],
  ['kmh', MS_PER_KMH, 'km/h ÷ 3.6 = m/s'],
];
const LENGTHS: [suffix: string, factor: number, words: string][] = [
  ['m', 1, ''],
  ['km', 1000, 'km × 1000 = metres'],
  ['nm', METRES_PER_NAUTICAL_MILE, `nautical miles × ${METRES_PER_NAUTICAL_MILE} = metres`],
];
const PRESSURES: [suffix: string, factor: number, words: string][] = [
  ['hpa', 1, ''],
  ['mb', 1, 'millibars = hPa'],
  ['pa', 1 / PA_PER_HPA, `pascals ÷ ${PA_PER_HPA} = hPa`],
];
const QUADRANTS = ['ne', 'se', 'sw', 'nw'] as const;

const measured = (name: string, field: NumberField, label: string, units: typeof SPEEDS): [string, Column][] =>
  units.map(([suffix, factor, words]) => [
    `${name}_${suffix}`,
    { field, factor, conversion: words === '' ? null : `${label}: ${words}` },
  ]);
const bare = (field: NumberField): Column => ({ field, factor: 1, conversion: null });

/** Header name → what it fills; the unit is part of the name, so a number never travels without one. */
const COLUMNS = new Map<string, Column>([
  ...measured('central_pressure', 'centralPressureHpa', 'Central pressure', PRESSURES),
  ...measured('ambient_pressure', 'ambientPressureHpa', 'Pressure outside', PRESSURES),
  ...measured('max_wind', 'maxWindMs', 'Wind', SPEEDS),
  ...measured('radius_of_max_wind', 'radiusOfMaxWindM', 'Radius of maximum wind', LENGTHS),
  ['ring_width_fraction', bare('ringWidthFraction')],
  ['eye_vorticity_ratio', bare('eyeVorticityRatio')],
  ['hours_inland', bare('hoursInland')],
]);
const RADIUS_COLUMNS = new Map<string, RadiusColumn>(
  ([34, 50, 64] as const).flatMap((knots) =>
    QUADRANTS.flatMap((name, quadrant) =>
      LENGTHS.map(([suffix, factor, words]): [string, RadiusColumn] => [
        `radius_${knots}kt_${name}_${suffix}`,
        {
          field: `radius${knots}KtM`,
          quadrant,
          factor,
          conversion: words === '' ? null : `${knots}-kt radii: ${words}`,
        },
      ]),
    ),
  ),
);
const OTHERS = ['storm', 'time_utc', 'latitude', 'longitude', 'wind_averaging_s'];
const REQUIRED = ['time_utc', 'latitude', 'longitude'];

const headerName = (cell: string) =>
  cell
    .trim()
    .toLowerCase()
    .replace(/[\s-]+/g, '_');
const firstLine = (text: string) =>
  text
    .replace(/^\uFEFF/, '')
    .split(/\r?\n/)
    .find((line) => line.trim() !== '' && !line.startsWith('#')) ?? '';

/** Whether a text begins like our track CSV: a header line with time_utc and latitude. */
export const looksLikeTrackCsv = (text: string): boolean => {
  const header = firstLine(text).toLowerCase();
  return header.includes('time_utc') && header.includes('latitude');
};

const timeOf = (cell: string): string | null => {
  const parts = /^(\d{4}-\d{2}-\d{2})[T ](\d{2}):?(\d{2})(?::(\d{2})(?:\.\d+)?)?\s*(Z|UTC|\+00:00)?$/i.exec(cell);
  if (!parts) return null;
  const iso = `${parts[1]}T${parts[2]}:${parts[3]}:${parts[4] ?? '00'}.000Z`;
  const at = new Date(iso);
  return Number.isNaN(at.getTime()) || at.toISOString() !== iso ? null : iso;
};

/**
 * Reads our own track CSV: one fix a line, the unit in each header name.
 *
 * Columns: `time_utc` (2026-09-04 18:00 or ISO 8601), `latitude`, `longitude` (degrees with sign or N/S/E/W; all three
 * required); `central_pressure_hpa|mb|pa`, `ambient_pressure_hpa|mb|pa`, `max_wind_kt|ms|mph|kmh`, `wind_averaging_s`
 * (60, 120, 180 or 600, the same on every line), `radius_of_max_wind_km|nm|m`, `radius_34kt_ne_nm|km|m` and likewise
 * `se`, `sw`, `nw` and 50 and 64 kt, `ring_width_fraction`, `eye_vorticity_ratio`, `hours_inland`, and `storm` where a file holds several.
 * Separator comma, semicolon or tab; lines that begin with # are remarks; an empty cell, -99 and -999 mean not given.
 */
export const readTrackCsv = (text: string, asked?: string): StormText => {
  const faults: Fault[] = [];
  const nothing = { storms: [], name: '', windAveragingS: null, conversions: [], fixes: [], findings: [], faults };
  const header = firstLine(text);
  const delimiter = [',', ';', '\t'].reduce((best, mark) =>
    header.split(mark).length > header.split(best).length ? mark : best,
  );
  let records: Line[];
  try {
    const parsed: unknown = parse(text, {
      bom: true,
      delimiter,
      comment: '#',
      comment_no_infix: true,
      trim: true,
      skip_empty_lines: true,
      relax_column_count: true,
      info: true,
    });
    // The parser's types don't know its `info` option, which wraps each record with its line number.
    records = (parsed as { record: string[]; info: { lines: number } }[]).map(({ record, info }) => ({
      cells: record,
      line: info.lines,
    }));
  } catch (error) {
    faults.push({ path: 'text', message: `The text isn’t a readable table: ${(error as Error).message}.` });
    return nothing;
  }
  const names = (records.shift()?.cells ?? []).map(headerName);
  for (const name of REQUIRED.filter((required) => !names.includes(required))) {
    faults.push({ path: 'header', message: `There is no column ${name}. A track needs ${REQUIRED.join(', ')}.` });
  }
  const filledBy = new Map<string, string>();
  names.forEach((name, at) => {
    const radius = RADIUS_COLUMNS.get(name);
    const target =
      COLUMNS.get(name)?.field ?? (radius ? `${radius.field} ${radius.quadrant}` : OTHERS.includes(name) ? name : null);
    if (target === null) {
      faults.push({
        path: 'header',
        message: `Column ${at + 1}, ${quoted(name)}, isn’t one of ours. The unit is part of the name, for example max_wind_kt or radius_of_max_wind_km. Rename or remove it.`,
      });
    } else if (filledBy.has(target)) {
      faults.push({
        path: 'header',
        message: `Columns ${quoted(filledBy.get(target)!)} and ${quoted(name)} say the same thing. Keep one.`,
      });
    } else filledBy.set(target, name);
  });
  if (records.length === 0) faults.push({ path: 'text', message: 'There is no fix below the header line.' });
  if (faults.length > 0) return nothing;

  const stormAt = names.indexOf('storm');
  const storms = stormAt < 0 ? [] : [...new Set(records.map(({ cells }) => cells[stormAt] ?? ''))].filter(Boolean);
  const picked = pickStorm(storms, asked);
  if (asked && picked < 0) {
    faults.push({
      path: 'storm',
      message: `There is no storm ${quoted(asked)} in this text. It holds: ${storms.join(', ') || 'one without a name'}.`,
    });
    return { ...nothing, storms };
  }
  const name = storms[picked] ?? '';
  const chosen = stormAt < 0 ? records : records.filter(({ cells }) => (cells[stormAt] ?? '') === name);
  const conversions = new Set<string>();
  const averaging = new Map<Seconds, number>();
  const fixes: Fix[] = [];
  for (const { cells, line } of chosen) {
    const fault = (column: string, cell: string, why: string) =>
      faults.push({ path: `line ${line}`, message: `Line ${line}: ${column} ${quoted(cell)} ${why}` });
    const cellOf = (column: string) => cells[names.indexOf(column)] ?? '';
    const time = timeOf(cellOf('time_utc'));
    if (time === null) fault('time_utc', cellOf('time_utc'), 'isn’t a date and hour such as 2026-09-04 18:00.');
    const latitude = coordinate(cellOf('latitude'), 'latitude');
    if (latitude === null) fault('latitude', cellOf('latitude'), 'isn’t degrees between −90 and 90.');
    const longitude = coordinate(cellOf('longitude'), 'longitude');
    if (longitude === null) fault('longitude', cellOf('longitude'), 'isn’t degrees between −180 and 360.');
    const fix: Fix = {
      time: time ?? '',
      latitude: latitude ?? 0,
      longitude: longitude ?? 0,
      centralPressureHpa: null,
      ambientPressureHpa: null,
      maxWindMs: null,
      radiusOfMaxWindM: null,
      radius34KtM: null,
      radius50KtM: null,
      radius64KtM: null,
      ringWidthFraction: null,
      eyeVorticityRatio: null,
      hoursInland: null,
    };
    names.forEach((column, at) => {
      const target = COLUMNS.get(column);
      const radius = RADIUS_COLUMNS.get(column);
      const cell = cells[at] ?? '';
      if ((!target && !radius) || isMissing(cell)) return;
      const value = decimal(cell);
      if (value === null || value < 0) {
        fault(column, cell, 'isn’t a number we accept. Leave the cell empty when it isn’t known.');
        return;
      }
      const { factor, conversion } = target ?? radius!;
      if (conversion) conversions.add(conversion);
      if (target) fix[target.field] = value * factor;
      else (fix[radius!.field] ??= [0, 0, 0, 0])[radius!.quadrant] = value * factor;
    });
    const declared = cellOf('wind_averaging_s');
    if (!isMissing(declared)) {
      const seconds = decimal(declared);
      if (seconds === 60 || seconds === 120 || seconds === 180 || seconds === 600) {
        averaging.set(seconds, averaging.get(seconds) ?? line);
      } else fault('wind_averaging_s', declared, 'isn’t 60, 120, 180 or 600.');
    }
    fixes.push(fix);
  }
  if (averaging.size > 1) {
    const [first, second] = [...averaging];
    faults.push({
      path: `line ${second![1]}`,
      message: `Line ${second![1]}: wind_averaging_s is ${second![0]}, but line ${first![1]} says ${first![0]}. One track has one averaging period. Convert the winds or split the track.`,
    });
  }
  return {
    storms,
    name,
    windAveragingS: averaging.size === 1 ? [...averaging.keys()][0]! : null,
    conversions: [...conversions],
    fixes,
    findings: [],
    faults,
  };
};
