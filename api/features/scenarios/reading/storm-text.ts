import type { Averaging, Fix, TrackFinding } from '#contract/scenarios.ts';
import type { Fault } from '#contract/errors.ts';
import type { z } from 'zod';

/** One storm as a text gave it, or every reason why it can't be read. */
export type StormText = {
  /** Label of every storm in the text, in its order. */
  storms: string[];
  name: string;
  windAveragingS: z.infer<typeof Averaging> | null;
  conversions: string[];
  fixes: Fix[];
  findings: TrackFinding[];
  /** One per line at fault; when there is any, the fixes aren't to be used. */
  faults: Fault[];
};

/** A plain decimal number, or null when the cell isn't one. */
export const decimal = (cell: string): number | null => (/^[+-]?(\d+\.?\d*|\.\d+)$/.test(cell) ? Number(cell) : null);

/** Codes that stand for "not given" in agency files; they are never numbers. */
const MISSING_WORDS = new Set(['', '-', 'na', 'n/a', 'nan', 'null']);
const MISSING_CODES = new Set<number | null>([-99, -999, -9999]);
export const isMissing = (cell: string): boolean =>
  MISSING_WORDS.has(cell.toLowerCase()) || MISSING_CODES.has(decimal(cell));

/** Longitude as −180…180, whatever the turn it was written in. */
const wrapLongitude = (longitude: number): number =>
  longitude >= -180 && longitude <= 180 ? longitude : ((((longitude + 180) % 360) + 360) % 360) - 180;

/** A coordinate in degrees with a sign, or with its letter behind it. */
export const coordinate = (cell: string, axis: 'latitude' | 'longitude'): number | null => {
  const parts = /^([+-]?\d+(?:\.\d*)?)\s*°?\s*([NSEW])?$/i.exec(cell);
  if (!parts) return null;
  const letter = parts[2]?.toUpperCase();
  if (letter && !(axis === 'latitude' ? 'NS' : 'EW').includes(letter)) return null;
  const size = Number(parts[1]);
  const signed = letter === 'S' || letter === 'W' ? -size : size;
  if (Math.abs(signed) > (axis === 'latitude' ? 90 : 360)) return null;
  return axis === 'latitude' ? signed : wrapLongitude(signed);
};

/** The storm asked for: by its label, id or name; the first when nothing is asked. */
export const pickStorm = (labels: string[], asked: string | undefined): number => {
  if (!asked) return labels.length > 0 ? 0 : -1;
  const wanted = asked.trim().toLowerCase();
  const exact = labels.findIndex((label) => label.toLowerCase() === wanted);
  return exact >= 0
    ? exact
    : labels.findIndex((label) =>
        label
          .toLowerCase()
          .split(/[ ()]+/)
          .includes(wanted),
      );
};

/** A quoted piece of the text, short enough for a message. */
export const quoted = (text: string): string => `‘${text.length > 40 ? `${text.slice(0, 40)}…` : text}’`;
