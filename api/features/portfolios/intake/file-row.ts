import type { z } from 'zod';
import type { Fix, IntakeMessage, LocationQuality, SiteField, Terrain } from '#contract/portfolios.ts';
import { readCoordinate, type Coordinate } from './coordinates.ts';
import { countryNamed, type Country } from './countries.ts';
import { slipOf, type Box, type Slip } from './home.ts';
import { readAmount, type Amount, type DecimalSign } from './numbers.ts';
import { readDeductible, readLimit, type Deductible } from './terms.ts';
import { constructionNamed, occupancyNamed, qualityNamed, terrainNamed } from './words.ts';

export type Quality = z.infer<typeof LocationQuality>;
export type TerrainClass = z.infer<typeof Terrain>;
/** The mapped cells of a line exactly as they stand in the file; blank cells are left out. */
export type Received = Partial<Record<SiteField, string>>;
/** What a line of the file is: a site, or one of the lines that schedules carry besides sites. */
export type LineKind = 'site' | 'blank' | 'preamble' | 'total';
export type Message = IntakeMessage;

export interface FileRow {
  /** Number of the line in the file, the first being 1; a quoted line break doesn't count. */
  row: number;
  line: LineKind;
  received: Received;
}

/** What a person did to a row; kept beside the received values, never instead of them. */
export interface Correction {
  seq: number;
  kind: Fix;
  code: string;
  reason: string;
}

/** What the checks know of the file as a whole; kept with the edition so that a corrected row is judged the same way. */
export interface FileFacts {
  currency: string;
  decimal: DecimalSign;
  /** Amounts are multiplied by this: 1000 only when a person said that they stand in thousands. */
  scale: 1 | 1000;
  mapped: SiteField[];
  /** Where the middle half of the file's points lie, with room around; null with fewer than four points. */
  home: Box | null;
  /** Rows that look swapped, and rows whose longitude has the wrong sign. */
  swapped: number;
  signLost: number;
  /** Calendar year of the check. */
  year: number;
}

/** File facts and the coast, which is too large to keep with them. */
export interface Context extends FileFacts {
  /** Metres to the nearest land; negative on land. */
  offshoreM: (latitude: number, longitude: number) => number;
}

export const VALUE_FIELDS = [
  'building_value',
  'other_structures_value',
  'contents_value',
  'time_element_value',
] as const;
export type ValueField = (typeof VALUE_FIELDS)[number];

/** A row as we read it, corrections applied: numbers where the file has words. */
export interface SiteRow extends FileRow {
  ref: string;
  country: Country | null;
  latitude: Coordinate;
  longitude: Coordinate;
  values: Record<ValueField, Amount>;
  total: Amount;
  /** True when the file gives a total and no parts: the total is taken as building value. */
  totalOnly: boolean;
  tivMinor: number;
  /** The row's own currency where it differs from the file's. */
  otherCurrency: string | null;
  construction: string | null;
  occupancy: string | null;
  terrain: TerrainClass | null;
  claimedQuality: Quality;
  deductible: Deductible;
  limit: { minor: number | null; readable: boolean };
  /** What explains coordinates that can't be right as they stand. */
  slip: Slip;
  corrections: readonly Correction[];
}

const scaled = (amount: Amount, scale: number): Amount =>
  scale !== 1 && 'minor' in amount ? { ...amount, minor: amount.minor * scale } : amount;
const counted = (amount: Amount): number => (amount.kind === 'amount' ? amount.minor : 0);

/** The currency a row states, in capitals; empty when it states none. */
export const currencyOf = (received: Received): string => received.currency?.trim().toUpperCase() ?? '';

/** Minor units of the values that can be read and aren't negative; what a row counts for in every sum. */
export function amountsOf(received: Received, facts: Pick<FileFacts, 'decimal' | 'scale' | 'currency'>) {
  const read = (field: SiteField) => scaled(readAmount(received[field], facts.decimal), facts.scale);
  const values: Record<ValueField, Amount> = {
    building_value: read('building_value'),
    other_structures_value: read('other_structures_value'),
    contents_value: read('contents_value'),
    time_element_value: read('time_element_value'),
  };
  const total = read('total_value');
  const totalOnly = counted(total) > 0 && VALUE_FIELDS.every((field) => values[field].kind === 'blank');
  if (totalOnly) values.building_value = total;
  const stated = currencyOf(received);
  const otherCurrency = stated && stated !== facts.currency ? stated : null;
  const tivMinor = otherCurrency ? 0 : VALUE_FIELDS.reduce((sum, field) => sum + counted(values[field]), 0);
  return { values, total, totalOnly, otherCurrency, tivMinor };
}

const rowReference = (row: number): string => `ROW-${String(row).padStart(6, '0')}`;

const negated = (coordinate: Coordinate): Coordinate =>
  coordinate.kind === 'degrees' ? { ...coordinate, degrees: -coordinate.degrees } : coordinate;

/** Reads a row's cells and applies its corrections in their order. */
export function readSite(row: FileRow, facts: FileFacts, corrections: readonly Correction[]): SiteRow {
  const { received } = row;
  let latitude = readCoordinate(received.latitude, 'latitude', facts.decimal);
  let longitude = readCoordinate(received.longitude, 'longitude', facts.decimal);
  let ref = received.site_ref?.trim() || rowReference(row.row);
  for (const { kind, code } of corrections) {
    if (kind === 'swap_coordinates') [latitude, longitude] = [longitude, latitude];
    else if (kind === 'negate_longitude') longitude = negated(longitude);
    // Kept repeats need a reference of their own.
    else if (kind === 'keep_all' && code === 'SAME-01') ref = `${ref}-row-${row.row}`;
  }
  const construction = received.construction === undefined ? null : constructionNamed(received.construction);
  const occupancy = received.occupancy === undefined ? null : occupancyNamed(received.occupancy);
  const terrain = received.terrain === undefined ? null : terrainNamed(received.terrain);
  const { values, total, totalOnly, otherCurrency, tivMinor } = amountsOf(received, facts);
  const country = countryNamed(received.country);
  return {
    row: row.row,
    line: row.line,
    received,
    ref,
    country,
    latitude,
    longitude,
    values,
    total,
    totalOnly,
    tivMinor,
    otherCurrency,
    construction: construction === 'unknown' ? null : construction,
    occupancy: occupancy === 'unknown' ? null : occupancy,
    terrain: terrain === 'unknown' ? null : terrain,
    claimedQuality: (received.location_quality && qualityNamed(received.location_quality)) || 'unknown',
    deductible: readDeductible(received, tivMinor, facts),
    limit: readLimit(received, facts),
    slip:
      latitude.kind === 'degrees' && longitude.kind === 'degrees'
        ? slipOf(facts.home, country, latitude.degrees, longitude.degrees)
        : null,
    corrections,
  };
}

/** The point of a row when both coordinates are degrees on the globe. */
export function pointOf({ latitude, longitude }: Pick<SiteRow, 'latitude' | 'longitude'>): [number, number] | null {
  if (latitude.kind !== 'degrees' || longitude.kind !== 'degrees') return null;
  if (Math.abs(latitude.degrees) > 90 || Math.abs(longitude.degrees) > 180) return null;
  return [latitude.degrees, longitude.degrees];
}

export const hasCorrection = (row: SiteRow, kind: Fix, code: string): boolean =>
  row.corrections.some((correction) => correction.kind === kind && correction.code === code);
