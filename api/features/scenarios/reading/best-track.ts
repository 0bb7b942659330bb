import type { Fault } from '#contract/errors.ts';
import type { Fix, TrackFinding } from '#contract/scenarios.ts';
import { METRES_PER_NAUTICAL_MILE, MS_PER_KNOT, msFromKnots } from '#engine/units.ts';
import { fixList } from './track-wording.ts';
import { coordinate, decimal, isMissing, pickStorm, quoted, type StormText } from './storm-text.ts';

type Line = { number: number; cells: string[] };
type Block = { id: string; name: string; declared: number | null; line: number; lines: Line[] };

const HEADER = /^[A-Z]{2}\d{6}$/;
/** Where the four quadrants of each wind begin. */
const RADII = [
  { field: 'radius34KtM', knots: 34, from: 8 },
  { field: 'radius50KtM', knots: 50, from: 12 },
  { field: 'radius64KtM', knots: 64, from: 16 },
] as const;
type Radii = Pick<Fix, (typeof RADII)[number]['field']>;
const QUADRANTS = ['north-east', 'south-east', 'south-west', 'north-west'] as const;
const STATUS_WORDS: Record<string, string> = {
  EX: 'extratropical',
  SS: 'subtropical',
  SD: 'subtropical',
  LO: 'a low without tropical character',
  WV: 'a wave',
  DB: 'a disturbance',
};

/** Whether a text begins like a NOAA best track: a storm header such as `AL092022, NAME, 40,`. */
export const looksLikeBestTrack = (text: string): boolean => {
  const first = text.split(/\r?\n/).find((line) => line.trim() !== '') ?? '';
  return HEADER.test(first.split(',')[0]!.trim());
};

const metres = (miles: number | null) => (miles ?? 0) * METRES_PER_NAUTICAL_MILE;

const asName = (name: string) =>
  name === 'UNNAMED' || name === '' ? 'Unnamed storm' : name.charAt(0) + name.slice(1).toLowerCase();

/** Splits the text into storms; lines that are neither header nor fix are faults. */
const blocksOf = (text: string, faults: Fault[]): Block[] => {
  const blocks: Block[] = [];
  text.split(/\r?\n/).forEach((raw, index) => {
    if (raw.trim() === '') return;
    const cells = raw.split(',').map((cell) => cell.trim());
    if (HEADER.test(cells[0]!)) {
      blocks.push({
        id: cells[0]!,
        name: asName(cells[1] ?? ''),
        declared: decimal(cells[2] ?? ''),
        line: index + 1,
        lines: [],
      });
    } else if (blocks.length > 0 && /^\d{8}$/.test(cells[0]!)) {
      blocks.at(-1)!.lines.push({ number: index + 1, cells });
    } else {
      faults.push({
        path: `line ${index + 1}`,
        message: `Line ${index + 1}: ${quoted(raw.trim())} is neither a storm header (AL092022, NAME, 40,) nor a fix that starts with a date (20220928). Remove it or restore the line.`,
      });
    }
  });
  return blocks;
};

const timeOf = (date: string, clock: string): string | null => {
  if (!/^\d{4}$/.test(clock)) return null;
  const iso = `${date.slice(0, 4)}-${date.slice(4, 6)}-${date.slice(6)}T${clock.slice(0, 2)}:${clock.slice(2)}:00.000Z`;
  const at = new Date(iso);
  return Number.isNaN(at.getTime()) || at.toISOString() !== iso ? null : iso;
};

/**
 * Reads NOAA best-track text: knots, hPa, nautical miles, 1-min winds.
 *
 * −99 and −999 mean not given. A radius of 0 means that no such wind was found in that quadrant. The last column,
 * radius of maximum wind, may be missing altogether. A file may hold several storms.
 */
export const readBestTrack = (text: string, asked?: string): StormText => {
  const faults: Fault[] = [];
  const findings: TrackFinding[] = [];
  const blocks = blocksOf(text.replace(/^\uFEFF/, ''), faults);
  const storms = blocks.map(({ id, name }) => `${name} (${id})`);
  const empty = { storms, name: '', windAveragingS: 60 as const, conversions: [], fixes: [], findings, faults };
  const block = blocks[pickStorm(storms, asked)];
  if (!block) {
    faults.push({
      path: 'storm',
      message: asked
        ? `There is no storm ${quoted(asked)} in this text. It holds: ${storms.join(', ') || 'none'}.`
        : 'We found no storm header, for example AL092022, NAME, 40,. Paste the text with its header line.',
    });
    return empty;
  }

  const fixes: Fix[] = [];
  const other: Record<string, number[]> = {};
  const missingRadii = { 34: 0, 50: 0, 64: 0 };
  const partialRadii = { 34: 0, 50: 0, 64: 0 };
  let missingRmw = 0;
  let missingPressure = 0;
  for (const { number, cells } of block.lines) {
    const fault = (column: string, cell: string, why: string) =>
      faults.push({ path: `line ${number}`, message: `Line ${number}: ${column} ${quoted(cell)} ${why}` });
    const amount = (at: number, column: string): number | null => {
      const cell = cells[at] ?? '';
      if (isMissing(cell)) return null;
      const value = decimal(cell);
      if (value === null || value < 0) fault(column, cell, 'isn’t a number we accept. −999 means not given.');
      return value !== null && value >= 0 ? value : null;
    };
    const time = timeOf(cells[0]!, cells[1] ?? '');
    if (time === null) fault('time', `${cells[0]}, ${cells[1] ?? ''}`, 'isn’t a date and hour such as 20220928, 1905.');
    const latitude = coordinate(cells[4] ?? '', 'latitude');
    if (latitude === null) fault('latitude', cells[4] ?? '', 'isn’t degrees with N or S, for example 26.7N.');
    const longitude = coordinate(cells[5] ?? '', 'longitude');
    if (longitude === null) fault('longitude', cells[5] ?? '', 'isn’t degrees with E or W, for example 82.2W.');
    const wind = amount(6, 'maximum wind');
    const pressure = amount(7, 'central pressure');
    const radii: Radii = { radius34KtM: null, radius50KtM: null, radius64KtM: null };
    for (const { field, knots, from } of RADII) {
      const quadrants = QUADRANTS.map((name, i) => amount(from + i, `${knots}-kt radius ${name}`));
      const given = quadrants.filter((radius) => radius !== null).length;
      if (given === 0) missingRadii[knots]++;
      else if (given < 4) partialRadii[knots]++;
      const [ne, se, sw, nw] = quadrants.map((radius) => metres(radius));
      if (given > 0) radii[field] = [ne!, se!, sw!, nw!];
    }
    const rmw = amount(20, 'radius of maximum wind');
    if (time === null || latitude === null || longitude === null) continue;

    if (rmw === null) missingRmw++;
    if (pressure === null) missingPressure++;
    const status = STATUS_WORDS[cells[3] ?? ''];
    if (status) (other[status] ??= []).push(fixes.length + 1);
    fixes.push({
      time,
      latitude,
      longitude,
      centralPressureHpa: pressure,
      ambientPressureHpa: null,
      maxWindMs: wind === null ? null : msFromKnots(wind),
      radiusOfMaxWindM: rmw === null ? null : metres(rmw),
      ...radii,
      ringWidthFraction: null,
      eyeVorticityRatio: null,
      hoursInland: null,
    });
  }

  if (block.declared !== null && block.declared !== block.lines.length) {
    findings.push({
      code: 'TRACK-15',
      severity: 'note',
      fix: null,
      text: `The header on line ${block.line} announces ${block.declared} fixes; we read ${block.lines.length}. A line may have been lost in copying. Check against the source.`,
    });
  }
  for (const [status, numbers] of Object.entries(other)) {
    findings.push({
      code: 'TRACK-14',
      severity: 'note',
      fix: numbers.length === 1 ? numbers[0]! - 1 : null,
      text: `${fixList(numbers)} marked ${status} in the source. The wind field here is that of a tropical cyclone, so gusts there may be off. Leave them out if they matter to your sites.`,
    });
  }
  const none = (count: number, what: string) =>
    count > 0 ? [`Not given (−999 in the source): ${what} at ${count} of ${fixes.length} fixes`] : [];
  return {
    ...empty,
    name: storms[blocks.indexOf(block)]!,
    conversions: [
      `Wind: knots × ${MS_PER_KNOT.toFixed(6)} = m/s (1 kt = 1852 m / 3600 s)`,
      `Radii: nautical miles × ${METRES_PER_NAUTICAL_MILE} = metres`,
      'Wind averaging: 1 min, as the layout states',
      ...none(missingPressure, 'central pressure'),
      ...none(missingRmw, 'radius of maximum wind'),
      ...RADII.flatMap(({ knots }) => [
        ...none(missingRadii[knots], `${knots}-kt radii`),
        ...(partialRadii[knots] > 0
          ? [
              `${knots}-kt radii given for some quadrants only at ${partialRadii[knots]} fixes; the others count as none`,
            ]
          : []),
      ]),
    ],
    fixes,
    findings,
    faults,
  };
};
