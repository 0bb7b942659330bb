import { describe, expect, it } from 'vitest';
import type { Fix } from '#contract/scenarios.ts';
import { checkEntry, isSavable } from '../../api/features/scenarios/track-rules.ts';

const fixAt = (hour: number, over: Partial<Fix> = {}): Fix => ({
  time: new Date(Date.UTC(2030, 8, 1, hour)).toISOString(),
  latitude: 20 + hour / 10,
  longitude: -80,
  centralPressureHpa: 960,
  ambientPressureHpa: null,
  maxWindMs: 45,
  radiusOfMaxWindM: null,
  radius34KtM: null,
  radius50KtM: null,
  radius64KtM: null,
  ringWidthFraction: null,
  eyeVorticityRatio: null,
  hoursInland: null,
  ...over,
});
const codes = (fixes: Fix[], sort = false) => checkEntry(fixes, sort).findings.map(({ code }) => code);
const said = (fixes: Fix[], code: string) =>
  checkEntry(fixes, false).findings.find((finding) => finding.code === code)!;

it('finds nothing in a plain track', () => expect(codes([fixAt(0), fixAt(6), fixAt(12)])).toEqual([]));

describe('what keeps a track from being saved', () => {
  it.each<[string, Fix[]]>([
    ['TRACK-01', [fixAt(0)]],
    ['TRACK-02', [fixAt(6), fixAt(0)]],
    ['TRACK-03', [fixAt(0), fixAt(6), fixAt(6, { latitude: 21 })]],
    ['TRACK-04', [fixAt(0, { centralPressureHpa: 28.35 }), fixAt(6)]],
    ['TRACK-05', [fixAt(0, { centralPressureHpa: 1080 }), fixAt(6)]],
    ['TRACK-09', [fixAt(0, { centralPressureHpa: null, maxWindMs: null }), fixAt(6)]],
    ['TRACK-12', [fixAt(0, { radiusOfMaxWindM: 30 }), fixAt(6)]],
    ['TRACK-18', [fixAt(0), fixAt(365 * 24, { latitude: 21 })]],
  ])('%s', (code, fixes) => {
    expect(codes(fixes)).toEqual([code]);
    expect(isSavable(checkEntry(fixes, false).findings)).toBe(false);
  });
});

describe('what is only noted', () => {
  it('a jump of impossible speed, at the leg', () => {
    // 10 degrees of latitude are 1,111.95 km on the sphere of 6,371 km; in six hours 51 m/s.
    const jump = said([fixAt(0), fixAt(6, { latitude: 30 })], 'TRACK-07');
    expect(jump).toMatchObject({ severity: 'note', fix: 1, text: expect.stringContaining('would move 51 m/s') });
  });
  it('no jump where a track crosses 180 degrees', () =>
    expect(codes([fixAt(0, { longitude: 179.8 }), fixAt(6, { longitude: -179.6 })])).toEqual([]));
  it('fixes near the equator, on either side, in one line', () =>
    expect(
      said([fixAt(0, { latitude: 4.9 }), fixAt(6, { latitude: -4 }), fixAt(12, { latitude: 5 })], 'TRACK-08'),
    ).toMatchObject({
      severity: 'note',
      text: expect.stringContaining('Fixes 1–2 are within 5°'),
    }));
});

it('sorts only on request, and says so', () => {
  const mixed = [fixAt(12), fixAt(0), fixAt(6)];
  expect(codes(mixed)).toEqual(['TRACK-02']);
  const sorted = checkEntry(mixed, true);
  expect(sorted.fixes.map(({ time }) => time.slice(11, 13))).toEqual(['00', '06', '12']);
  expect(sorted.findings).toMatchObject([{ code: 'TRACK-16', severity: 'note' }]);
});

it('sees the same moment however precisely it is written', () =>
  expect(codes([fixAt(0), { ...fixAt(0), time: '2030-09-01T00:00:00Z' }, fixAt(6)])).toEqual(['TRACK-03']));

it('says what an inch of mercury would be in hPa', () =>
  // 29.92 inHg is the standard atmosphere, 1013.2 hPa.
  expect(said([fixAt(0, { centralPressureHpa: 29.92 }), fixAt(6)], 'TRACK-04').text).toContain('1013.2'));

it('guesses the unit of a pressure a power of ten off', () => {
  expect(said([fixAt(0, { centralPressureHpa: 96 }), fixAt(6)], 'TRACK-05').text).toContain('in kPa');
  expect(said([fixAt(0, { centralPressureHpa: 96_000 }), fixAt(6)], 'TRACK-05').text).toContain('in Pa');
});

it('reports every fault of a track at once', () =>
  expect(
    codes([
      fixAt(6, { centralPressureHpa: 29, maxWindMs: 400 }),
      fixAt(0, { latitude: 70, centralPressureHpa: null, maxWindMs: null }),
    ]).sort(),
  ).toEqual(['TRACK-02', 'TRACK-04', 'TRACK-09', 'TRACK-12', 'TRACK-12']));
