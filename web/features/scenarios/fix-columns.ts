import type { ResolvedFix } from '#contract/scenarios.ts';
import { clock, shortDay } from '../../lib/dates.ts';
import { decimal } from '../../lib/numbers.ts';
import { fromMetresPerSecond, toMetresPerSecond, WIND_UNIT_LABELS, type WindUnit } from '../../lib/wind-units.ts';
import type { DraftFix } from './track-draft.ts';

export type Parsed = { value: Partial<DraftFix> } | { fault: string };

/** One editable column of the fix table: how it reads, how it is typed, and where a filled value comes from. */
export interface FixColumn {
  key: 'time' | 'latitude' | 'longitude' | 'maxWindMs' | 'centralPressureHpa' | 'radiusOfMaxWindM';
  label: (unit: WindUnit) => string;
  /** As shown. */
  text: (fix: DraftFix, unit: WindUnit) => string | null;
  /** As put into the editor. */
  editText: (fix: DraftFix, unit: WindUnit) => string;
  parse: (text: string, unit: WindUnit) => Parsed;
  /** The value used where none was entered. */
  filled?: (fix: ResolvedFix, unit: WindUnit) => string;
  optional: boolean;
}

const NUMBER = /^[+-]?\d+(?:[.,]\d+)?$/;
const numberIn = (text: string): number | null => {
  const trimmed = text.trim().replace('−', '-');
  return NUMBER.test(trimmed) ? Number(trimmed.replace(',', '.')) : null;
};

interface NumberColumn {
  key: Exclude<FixColumn['key'], 'time'>;
  name: string;
  label: FixColumn['label'];
  decimals: number;
  low: number;
  high: number;
  optional: boolean;
  /** Factor from stored to shown. */
  shown?: (stored: number, unit: WindUnit) => number;
  stored?: (shown: number, unit: WindUnit) => number;
  used?: (fix: ResolvedFix) => number;
}

const same = (value: number) => value;

const numberColumn = ({
  key,
  name,
  label,
  decimals,
  low,
  high,
  optional,
  shown = same,
  stored = same,
  used,
}: NumberColumn): FixColumn => ({
  key,
  label,
  optional,
  text: (fix, unit) => {
    const value = fix[key];
    return value === null ? null : decimal(shown(value, unit), decimals).replaceAll(',', '');
  },
  editText: (fix, unit) => {
    const value = fix[key];
    return value === null ? '' : shown(value, unit).toFixed(decimals);
  },
  parse: (text, unit) => {
    if (text.trim() === '')
      return optional ? { value: { [key]: null } } : { fault: `Every fix needs its ${name}. Type a number.` };
    const value = numberIn(text);
    if (value === null) return { fault: `“${text}” isn’t a number. Type the ${name} as figures, for example 62.5.` };
    const kept = stored(value, unit);
    if (kept < low || kept > high)
      return {
        fault: `${text} is outside what a ${name} can be (${shown(low, unit).toFixed(0)} to ${shown(high, unit).toFixed(0)}).`,
      };
    return { value: { [key]: kept } };
  },
  ...(used && {
    filled: (fix: ResolvedFix, unit: WindUnit) => decimal(shown(used(fix), unit), decimals).replaceAll(',', ''),
  }),
});

const TIME = /^(\d{4})-(\d{1,2})-(\d{1,2})[ T](\d{1,2}):?(\d{2})(?::\d{2}(?:\.\d+)?)?Z?$/;

/** "2026-09-03 06:00", always UTC. */
export const parseTime = (text: string): string | null => {
  const match = TIME.exec(text.trim());
  if (!match) return null;
  const [year, month, day, hour, minute] = match.slice(1).map(Number) as [number, number, number, number, number];
  const time = new Date(Date.UTC(year, month - 1, day, hour, minute));
  const isReal = time.getUTCMonth() === month - 1 && time.getUTCDate() === day && hour < 24 && minute < 60;
  return isReal ? time.toISOString() : null;
};

const timeColumn: FixColumn = {
  key: 'time',
  label: () => 'Time, UTC',
  optional: false,
  text: ({ time }) => (time === null ? null : `${shortDay(time)} ${clock(time)}`),
  editText: ({ time }) => (time === null ? '' : time.slice(0, 16).replace('T', ' ')),
  parse: (text) => {
    const time = parseTime(text);
    return time === null
      ? { fault: `“${text}” isn’t a time we read. Type it in UTC as 2026-09-03 06:00.` }
      : { value: { time } };
  },
};

export const FIX_COLUMNS: readonly FixColumn[] = [
  timeColumn,
  numberColumn({
    key: 'latitude',
    name: 'latitude',
    label: () => 'Lat',
    decimals: 2,
    low: -90,
    high: 90,
    optional: false,
  }),
  numberColumn({
    key: 'longitude',
    name: 'longitude',
    label: () => 'Lon',
    decimals: 2,
    low: -180,
    high: 180,
    optional: false,
  }),
  numberColumn({
    key: 'maxWindMs',
    name: 'wind',
    label: (unit) => `Wind, ${WIND_UNIT_LABELS[unit]}`,
    decimals: 1,
    low: 0,
    high: 150,
    optional: true,
    shown: fromMetresPerSecond,
    stored: toMetresPerSecond,
    used: (fix) => fix.maxWindMs,
  }),
  numberColumn({
    key: 'centralPressureHpa',
    name: 'pressure',
    label: () => 'Pressure, hPa',
    decimals: 0,
    low: 0,
    high: 200_000,
    optional: true,
    used: (fix) => fix.centralPressureHpa,
  }),
  numberColumn({
    key: 'radiusOfMaxWindM',
    name: 'radius',
    label: () => 'Radius, km',
    decimals: 0,
    low: 0,
    high: 1_000_000,
    optional: true,
    shown: (metres) => metres / 1000,
    stored: (km) => km * 1000,
    used: (fix) => fix.radiusOfMaxWindM,
  }),
];
