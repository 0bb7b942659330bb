import { readFileSync, readdirSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { readBestTrack } from '../../api/features/scenarios/reading/best-track.ts';
import { readTrackText } from '../../api/features/scenarios/reading/read-track.ts';
import { readTrackCsv } from '../../api/features/scenarios/reading/track-csv.ts';

const folder = new URL('../data/tracks/', import.meta.url);
const stored = (name: string) => readFileSync(new URL(name, folder), 'utf8');
const bestTracks = readdirSync(folder).filter((name) => name.endsWith('.txt'));

/** The same storm in our CSV, made from the raw cells without the reader: knots to m/s, nautical miles to km, rounded. */
const asCsv = (text: string): string => {
  const number = (cell: string) => (cell === '-999' || cell === '-99' ? null : Number(cell));
  const rows = text
    .trim()
    .split('\n')
    .slice(1)
    .map((line) => {
      const c = line.split(',').map((cell) => cell.trim());
      const degrees = (cell: string) => Number(cell.slice(0, -1)) * (/[SW]$/.test(cell) ? -1 : 1);
      const km = (cell: string) => (number(cell) === null ? '' : (Number(cell) * 1.852).toFixed(3));
      return [
        `${c[0]!.slice(0, 4)}-${c[0]!.slice(4, 6)}-${c[0]!.slice(6)} ${c[1]!.slice(0, 2)}:${c[1]!.slice(2)}`,
        degrees(c[4]!),
        degrees(c[5]!),
        number(c[7]!) ?? '',
        ((Number(c[6]) * 1852) / 3600).toFixed(4),
        60,
        km(c[20]!),
        ...[8, 9, 10, 11, 12, 13, 14, 15, 16, 17, 18, 19].map((at) => km(c[at]!)),
      ].join(',');
    });
  return [
    'time_utc,latitude,longitude,central_pressure_hpa,max_wind_ms,wind_averaging_s,radius_of_max_wind_km,' +
      [34, 50, 64].flatMap((knots) => ['ne', 'se', 'sw', 'nw'].map((q) => `radius_${knots}kt_${q}_km`)).join(','),
    ...rows,
  ].join('\n');
};

describe('NOAA best-track text', () => {
  it.each(bestTracks)('reads every fix of %s without a fault', (name) => {
    const text = stored(name);
    const read = readBestTrack(text);
    expect(read.faults).toEqual([]);
    expect(read.fixes).toHaveLength(text.trim().split('\n').length - 1);
  });

  it('reads the landfall line of Ian as printed: 130 kt, 941 mb, 20 n mi, 64-kt radii', () => {
    const landfall = readBestTrack(stored('AL092022_IAN.txt')).fixes.find(({ time }) =>
      time.startsWith('2022-09-28T19:05'),
    );
    expect(landfall).toMatchObject({ latitude: 26.7, longitude: -82.2, centralPressureHpa: 941 });
    expect(landfall!.maxWindMs! / (1852 / 3600)).toBeCloseTo(130, 9);
    expect(landfall!.radiusOfMaxWindM! / 1852).toBeCloseTo(20, 9);
    expect(landfall!.radius64KtM!.map((radius) => radius / 1852)).toEqual([30, 40, 30, 45]);
    const line = stored('AL092022_IAN.txt')
      .split('\n')
      .find((text) => text.startsWith('20220928, 1905'))!
      .split(',')
      .map((cell) => Number(cell.trim()));
    expect(landfall!.radius34KtM!.map((radius) => radius / 1852)).toEqual(line.slice(8, 12));
    expect(landfall!.radius50KtM!.map((radius) => radius / 1852)).toEqual(line.slice(12, 16));
  });

  it('never reads a missing code as a number', () => {
    const { fixes, conversions } = readBestTrack(stored('AL041992_ANDREW.txt'));
    expect(fixes.every(({ radiusOfMaxWindM, radius64KtM }) => radiusOfMaxWindM === null && radius64KtM === null)).toBe(
      true,
    );
    expect(conversions).toContain('Not given (−999 in the source): radius of maximum wind at 52 of 52 fixes');
    const line =
      'AL012030, NONE, 1,\n20300901, 0000,  , TS, 12.0N,  60.0W, -99, -999, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0,';
    expect(readBestTrack(line).fixes[0]).toMatchObject({
      maxWindMs: null,
      centralPressureHpa: null,
      radiusOfMaxWindM: null,
      radius34KtM: [0, 0, 0, 0],
      radius50KtM: [0, 0, 0, 0],
      radius64KtM: [0, 0, 0, 0],
    });
  });

  it('takes the storm asked for from a file of several', () => {
    const text = stored('AL041992_ANDREW.txt') + stored('AL092022_IAN.txt');
    expect(readBestTrack(text).storms).toEqual(['Andrew (AL041992)', 'Ian (AL092022)']);
    expect(readBestTrack(text).fixes).toHaveLength(52);
    expect(readBestTrack(text, 'ian').fixes).toHaveLength(40);
    expect(readBestTrack(text, 'AL092022').name).toBe('Ian (AL092022)');
    expect(readBestTrack(text, 'Zeta').faults[0]!.message).toContain('no storm ‘Zeta’');
  });

  it('reads southern and eastern letters', () => {
    const line =
      'SH012030, SOUTH, 1,\n20300201, 0600,  , HU, 16.5S, 181.5E, 90, 960, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0,';
    expect(readBestTrack(line).fixes[0]).toMatchObject({ latitude: -16.5, longitude: -178.5 });
  });

  it('names every line at fault, all at once', () => {
    const read = readBestTrack(
      [
        'AL012030, BAD, 4,',
        '20301301, 0000,  , TS, 12.0N,  60.0W, 30, 1000, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0,',
        '20300901, 0600,  , TS, 12.0X,  60.0W, 30, 1000, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0,',
        '20300901, 1200,  , TS, 12.0N,  60.0W, thirty, 1000, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0,',
        'and so on',
      ].join('\n'),
    );
    expect(read.faults.map(({ path }) => path)).toEqual(['line 5', 'line 2', 'line 3', 'line 4']);
  });

  it('says which fixes the source marks as no tropical cyclone', () =>
    expect(
      readBestTrack(stored('AL092022_IAN.txt')).findings.map(({ code, text }) => [code, text.slice(0, 36)]),
    ).toEqual([
      ['TRACK-14', 'Fixes 1–2 are marked a low without t'],
      ['TRACK-14', 'Fixes 39–40 are marked extratropical'],
    ]));

  it('says when the header announces another number of fixes', () =>
    expect(
      readBestTrack(stored('AL092022_IAN.txt').trim().split('\n').slice(0, -1).join('\n')).findings,
    ).toContainEqual(
      expect.objectContaining({ code: 'TRACK-15', text: expect.stringContaining('announces 40 fixes; we read 39') }),
    ));
});

describe('our track CSV', () => {
  it.each(bestTracks)('gives the same track as the best-track text, to rounding: %s', (name) => {
    const text = stored(name);
    const best = readBestTrack(text).fixes;
    const { fixes, faults } = readTrackCsv(asCsv(text));
    expect(faults).toEqual([]);
    expect(fixes).toHaveLength(best.length);
    const near = (a: number | null, b: number | null, within: number) =>
      a === null || b === null ? a === b : Math.abs(a - b) <= within;
    fixes.forEach((fix, i) => {
      const other = best[i]!;
      expect([fix.time, fix.latitude, fix.longitude, fix.centralPressureHpa]).toEqual([
        other.time,
        other.latitude,
        other.longitude,
        other.centralPressureHpa,
      ]);
      expect(near(fix.maxWindMs, other.maxWindMs, 5e-5)).toBe(true);
      expect(near(fix.radiusOfMaxWindM, other.radiusOfMaxWindM, 0.5)).toBe(true);
      for (const field of ['radius34KtM', 'radius50KtM', 'radius64KtM'] as const) {
        expect(fix[field] === null).toBe(other[field] === null);
        fix[field]?.forEach((radius, q) => expect(near(radius, other[field]![q]!, 0.5)).toBe(true));
      }
    });
  });

  it.each([',', ';', '\t'])('reads separator %j, remarks, a byte-order mark and letters', (mark) => {
    const text =
      '\uFEFF# made by hand, for a test\n' +
      [
        ['time_utc', 'latitude', 'longitude', 'max_wind_kt', 'wind_averaging_s', 'ambient_pressure_hpa'],
        ['2030-09-01T00:00Z', '12.5N', '60.25W', '60', '600', '1009'],
        ['2030-09-01 06:00', '13', '299', '-999', '600', ''],
      ]
        .map((cells) => cells.join(mark))
        .join('\n');
    const read = readTrackCsv(text);
    expect(read.faults).toEqual([]);
    expect(read.windAveragingS).toBe(600);
    expect(read.fixes).toMatchObject([
      { time: '2030-09-01T00:00:00.000Z', latitude: 12.5, longitude: -60.25, ambientPressureHpa: 1009 },
      { time: '2030-09-01T06:00:00.000Z', latitude: 13, longitude: -61, maxWindMs: null },
    ]);
    expect(read.conversions).toContain('Wind: knots × 0.514444 = m/s (1 kt = 1852 m / 3600 s)');
  });

  it.each([
    // One wind of 51.4444… m/s in each unit; factors by definition of the units.
    ['max_wind_kt', 100],
    ['max_wind_mph', (100 * 1852) / 1609.344],
    ['max_wind_kmh', 185.2],
    ['max_wind_ms', (100 * 1852) / 3600],
  ])('converts %s by the exact factor', (column, value) =>
    expect(
      readTrackCsv(`time_utc,latitude,longitude,${column}\n2030-09-01 00:00,12,-60,${value}`).fixes[0]!.maxWindMs,
    ).toBeCloseTo(51.444444444, 8),
  );

  it('refuses a column whose name carries no unit', () =>
    expect(
      readTrackCsv('time_utc,latitude,longitude,max_wind\n2030-09-01 00:00,12,-60,100').faults[0]!.message,
    ).toContain('The unit is part of the name'));
  it('refuses two columns for one quantity', () =>
    expect(
      readTrackCsv('time_utc,latitude,longitude,max_wind_kt,max_wind_ms\n2030-09-01 00:00,12,-60,100,51').faults[0]!
        .message,
    ).toContain('say the same thing'));
  it('refuses two averaging periods in one track', () =>
    expect(
      readTrackCsv(
        'time_utc,latitude,longitude,wind_averaging_s\n2030-09-01 00:00,12,-60,60\n2030-09-01 06:00,12,-61,600',
      ).faults[0]!.message,
    ).toContain('One track has one averaging period'));
  it('leaves the averaging period open when the text doesn’t say', () =>
    expect(readTrackCsv('time_utc,latitude,longitude\n2030-09-01 00:00,12,-60').windAveragingS).toBeNull());
});

it('knows the two formats apart', () => {
  const text = stored('AL092022_IAN.txt');
  expect(readTrackText({ format: 'auto', text })?.format).toBe('best-track');
  expect(readTrackText({ format: 'auto', text: asCsv(text) })?.format).toBe('track-csv');
  expect(readTrackText({ format: 'auto', text: 'Dear all, the storm is coming' })).toBeNull();
});
