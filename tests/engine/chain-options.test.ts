import { describe, expect, it } from 'vitest';
import { scoreSites, type SiteScores } from '#engine/footprint/site-peaks.ts';
import { siteExposure, windAt, type Site } from '#engine/footprint/wind-at.ts';
import { followPassage, makePassage } from '#engine/footprint/passage.ts';
import { betweenPlaces } from '#engine/geo/geodesy.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';
import { prepareStorm, STATE, STATE_SIZE, type Storm } from '#engine/track/storm.ts';
import { kepertCoefficients, kepertWind, KEPERT_DIFFUSIVITY } from '#engine/winds/kepert-2001.ts';
import { makeKepertCircle, writeKepertCircle } from '#engine/winds/kepert-circle.ts';
import { expectPrinted } from '../helpers/printed.ts';
import { batchOf, mirroredFixes, mirroredSite, workedFixes, workedSites } from '../helpers/worked-storm.ts';

/** The plain pipeline on the 300-s grid, which the printed numbers rest on. */
const PLAIN: ChainOptions = {
  ...DEFAULT_OPTIONS,
  intensity: 'wind',
  anchor: 'mean',
  mesovortices: false,
  innerTimeStepS: 300,
};
const stormOf = (options: Partial<ChainOptions>, fixes: readonly TrackFix[] = workedFixes): Storm =>
  prepareStorm(fixes, { ...PLAIN, ...options }, null);
const scoresOf = (storm: Storm, sites = workedSites): SiteScores => scoreSites(storm, batchOf(sites), REFERENCE_CURVE);
const [S2, S3] = [1, 2];
const gustAt = (options: Partial<ChainOptions>, site: number, fixes?: readonly TrackFix[]): number =>
  scoresOf(stormOf(options, fixes)).plainGust[site]!;
const changeAt = (options: Partial<ChainOptions>, site: number, fixes?: readonly TrackFix[]): number =>
  100 * (gustAt(options, site, fixes) / gustAt({}, site) - 1);
const asSite = (i: number): Site => {
  const { latitude, longitude, roughness, fetch, hill } = workedSites[i]!;
  return { latitude, longitude, roughnessM: roughness, fetchM: fetch, topographicFactor: hill };
};
const stateAt = (storm: Storm, timeS: number): number =>
  storm.states.findIndex((value, n) => n % STATE_SIZE === STATE.timeS && value === timeS) / STATE_SIZE -
  STATE.timeS / STATE_SIZE;

// Computed from the published formulas by an independent reference implementation.
describe('asymmetries, each matched to the same maximum wind', () => {
  it.each([
    ['lin-chavas', '57.73', '47.80'],
    ['none', '58.30', '56.77'],
    ['schwerdt', '56.76', '47.78'],
    ['georgiou', '57.77', '49.96'],
    ['kepert', '58.20', '47.72'],
  ] as const)('%s at the two coasts', (asymmetry, strong, weak) => {
    expectPrinted(gustAt({ asymmetry }, S2), strong);
    expectPrinted(gustAt({ asymmetry }, S3), weak);
  });
  it('peaks of the boundary layer', () => {
    const scores = scoresOf(stormOf({ asymmetry: 'kepert' }));
    const rows = [
      ['66.0390', '43800', '50.4808', '173.03'],
      ['58.1997', '55500', '46.8300', '166.03'],
      ['47.7231', '51900', '39.6872', '25.44'],
      ['47.7143', '71400', '39.1447', '140.99'],
      ['24.5177', '64500', '22.7879', '28.42'],
    ];
    rows.forEach(([gust, timeS, sea, direction], i) => {
      expectPrinted(scores.plainGust[i]!, gust!);
      expectPrinted(scores.plainTimeS[i]!, timeS!);
      expectPrinted(scores.plainSeaWind[i]!, sea!);
      expectPrinted(scores.plainDirection[i]!, direction!);
    });
  });
  it('boundary layer at 15 h, and its southern mirror', () => {
    const storm = stormOf({ asymmetry: 'kepert' });
    const k = stateAt(storm, 54_000);
    expectPrinted(storm.field![k]!.gradientMax, '52.990477');
    for (const [site, sea, direction] of [
      [S2, '46.265961', '150.295375'],
      [S3, '39.226614', '4.858105'],
    ] as const) {
      const wind = windAt(storm, k, asSite(site));
      expectPrinted(wind.seaWindMs, sea);
      expectPrinted(wind.directionDeg, direction);
    }
    const south = stormOf({ asymmetry: 'kepert' }, mirroredFixes(workedFixes));
    const mirror = mirroredSite(workedSites[S2]!);
    const wind = windAt(south, k, { ...asSite(S2), latitude: mirror.latitude, fetchM: mirror.fetch });
    expectPrinted(wind.seaWindMs, '46.265961');
    expectPrinted(wind.directionDeg, '29.704625');
  });
  it('solves the boundary layer in real numbers as in complex ones', () => {
    const circle = makeKepertCircle();
    for (const [speed, slope, r, f, motion, drag] of [
      [40, 0, 40e3, 5e-5, 5, 0.0024],
      [50, 50 / 30e3, 30e3, 5e-5, 7, 0.0024],
      [35, (-0.5 * 35) / 80e3, 80e3, 6e-5, 6, 0.002],
      [30, (-0.9 * 30) / 120e3, 120e3, 6e-5, 8, 0.0018],
      [3, -1e-5, 600e3, 9e-5, 15, 0.0012],
    ] as const) {
      writeKepertCircle(speed, slope, r, f, motion, drag, circle);
      const layer = { speed, slope, r, f, motion, drag, diffusivity: KEPERT_DIFFUSIVITY };
      for (const turn of [0, 0.7, 2.1, 3.6, 5.5]) {
        const [c, s] = [Math.cos(turn), Math.sin(turn)];
        const { radial, tangential } = kepertWind(kepertCoefficients(layer), turn);
        expect(circle.radial + circle.radialCos * c + circle.radialSin * s).toBeCloseTo(radial, 11);
        expect(circle.tangential + circle.tangentialCos * c + circle.tangentialSin * s).toBeCloseTo(tangential, 11);
      }
    }
  });
});

// Computed from the published formulas; printed to a tenth of a per cent, or as gusts.
describe('one choice at a time', () => {
  it.each([
    ['gust of the class off the sea', { gustFactor: 'wmo-off-sea' }, '57.18'],
    ['off the land', { gustFactor: 'wmo-off-land' }, '62.98'],
    ['inland', { gustFactor: 'wmo-in-land' }, '68.78'],
  ] as const)('%s at S2', (_, options, printed) => expectPrinted(gustAt(options, S2), printed));
  it.each([
    ['profile of Willoughby et al.', { profile: 'willoughby-2006' }, '0.2', '-2.5'],
    ['profile of Holland et al. (2010)', { profile: 'holland-2010' }, '-0.04', '0.4'],
    ['land all round', { fetch: 'land-all-round' }, '-3.0', '0'],
    ['B of Vickery & Wadhera', { shapeSource: 'relation' }, '1.3', '1.0'],
    ['B of Powell', { shapeSource: 'relation', shapeRelation: 'powell-2005' }, '-4.5', '-5.6'],
    ['class off the land', { gustFactor: 'wmo-off-land' }, '9.1', '6.1'],
  ] as const)('%s changes S2 and S3 by the printed per cent', (_, options, strong, weak) => {
    expectPrinted(changeAt(options, S2), strong);
    expectPrinted(changeAt(options, S3), weak);
  });
  it.each([
    [0.7, '-2.5', '-9.7'],
    [1.4, '-0.2', '5.6'],
  ])('a radius of maximum wind %f times as large', (factor, strong, weak) => {
    const wider = workedFixes.map((fix) => ({ ...fix, radiusOfMaxWindM: factor * fix.radiusOfMaxWindM! }));
    expectPrinted(changeAt({}, S2, wider), strong);
    expectPrinted(changeAt({}, S3, wider), weak);
  });
  it('hardly feels the surface factor, which cancels at the radius of maximum wind', () => {
    for (const surfaceFactor of ['powell-2003', 'holland-2010'] as const) {
      // Printed: 0.00 for a factor of 0.857 everywhere, -0.02 % for 0.75; these lie between.
      const change = changeAt({ surfaceFactor }, S2);
      expect(change).toBeLessThan(0);
      expect(change).toBeGreaterThan(-0.02);
    }
  });
  it('lowers a wind reported over one minute by 2.3 % at sea with one over 0.93', () => {
    // 0.93 x 1.05 = 0.9765 of the whole maximum; a little less is left where the motion is taken out of it.
    expect(gustAt({ averaging: 'at-sea-0.93' }, 0) / gustAt({}, 0)).toBeCloseTo(0.9765, 3);
  });
  it('takes log laws joined at 500 m for the land in the printed proportion', () => {
    // 0.8839 against 0.839027 over a sea at its greatest drag, at full weight: S3.
    expect(gustAt({ landReduction: 'log-laws-500m' }, S3) / gustAt({}, S3)).toBeCloseTo(0.8839 / 0.839027, 4);
  });
});

describe('the general path', () => {
  it('with every relation the default equals the fast kernel', () => {
    const fast = stormOf({ intensity: 'pressure', mesovortices: true, innerTimeStepS: 60 });
    // `quadrants` from radii that are not there changes nothing, but leads through the general path.
    const general = stormOf({ intensity: 'pressure', mesovortices: true, innerTimeStepS: 60, quadrants: 'radii' });
    expect(fast.field).toBeNull();
    expect(general.field).not.toBeNull();
    const passages = [fast, general].map((storm) => makePassage(storm));
    workedSites.forEach((site, s) => {
      const place = asSite(s);
      const counts = [fast, general].map((storm, n) =>
        followPassage(storm, site.latitude, site.longitude, siteExposure(place), passages[n]!),
      );
      expect(counts[0]).toBe(counts[1]);
      for (let i = 0; i < counts[0]!; i++) {
        for (const column of ['gust', 'seaU', 'seaV', 'factor', 'meanFactor', 'crest'] as const) {
          expect(Math.abs(passages[0]![column][i]! - passages[1]![column][i]!)).toBeLessThan(1e-9);
        }
        if (passages[0]!.crest[i]! > 0) {
          expect(Math.abs(passages[0]!.phaseCos[i]! - passages[1]!.phaseCos[i]!)).toBeLessThan(1e-9);
          expect(Math.abs(passages[0]!.phaseSin[i]! - passages[1]!.phaseSin[i]!)).toBeLessThan(1e-9);
        }
      }
    });
  });
  it('evaluates B of the relation at every time: a redundant fix on the path changes next to nothing', () => {
    const [a, b] = [workedFixes[2]!, workedFixes[3]!];
    const half = (pick: (fix: TrackFix) => number | null): number => (pick(a)! + pick(b)!) / 2;
    const between: TrackFix = {
      ...a,
      ...betweenPlaces(a, b, 0.5),
      timeS: half((fix) => fix.timeS),
      centralPressurePa: half((fix) => fix.centralPressurePa),
      maxWindMs: half((fix) => fix.maxWindMs),
      radiusOfMaxWindM: half((fix) => fix.radiusOfMaxWindM),
      hoursInland: 0,
    };
    const more = [...workedFixes.slice(0, 3), between, ...workedFixes.slice(3)];
    const options = { shapeSource: 'relation' } as const;
    expect(gustAt(options, S2, more)).toBeCloseTo(gustAt(options, S2), 9);
  });
});
