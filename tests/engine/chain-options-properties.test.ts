import { describe, expect, it } from 'vitest';
import { DomainError } from '#engine/errors.ts';
import { followPassage, makePassage } from '#engine/footprint/passage.ts';
import { scoreSites, type SiteScores } from '#engine/footprint/site-peaks.ts';
import { siteExposure, windAt, type Site } from '#engine/footprint/wind-at.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, WIND_CHOICE_NAMES, WIND_CHOICES, type ChainOptions } from '#engine/track/options.ts';
import { prepareStorm, STATE, STATE_SIZE, type Storm } from '#engine/track/storm.ts';
import { makeSeaWindSteps } from '#engine/winds/field-state.ts';
import { seaWindOf } from '#engine/winds/sea-wind.ts';
import {
  batchOf,
  mirroredFixes,
  mirroredSite,
  workedFixes,
  workedSites,
  type TestSite,
} from '../helpers/worked-storm.ts';

type Changed = readonly [string, Partial<ChainOptions>];

/** Every value of every choice that is not the default, and some together. */
const CHANGED: Changed[] = [
  ...WIND_CHOICE_NAMES.flatMap((name) =>
    WIND_CHOICES[name].slice(1).map((value): Changed => [`${name} ${value}`, { [name]: value }]),
  ),
  ['outer wind through radii', { profile: 'holland-2010', outerWind: 'radii-34', quadrants: 'radii' }],
  ['boundary layer under another profile', { profile: 'willoughby-2006', asymmetry: 'kepert', quadrants: 'radii' }],
  ['boundary layer under the revised profile', { profile: 'holland-2010', asymmetry: 'kepert' }],
  ['parcels under another profile', { profile: 'willoughby-2006-exact-peak', asymmetry: 'georgiou' }],
  ['relation and boundary layer', { shapeSource: 'relation', asymmetry: 'kepert', decay: 'vickery-gulf' }],
];

/** The worked storm with wind radii, and two fixes that leave things open. */
const TRACK: TrackFix[] = workedFixes.map((fix, i) => ({
  ...fix,
  radiusOfMaxWindM: i === 1 || i === 4 ? null : fix.radiusOfMaxWindM,
  centralPressurePa: i === 3 ? null : fix.centralPressurePa,
  radius34KtM: [260e3, 230e3, 150e3, 190e3],
  radius50KtM: [130e3, 120e3, 80e3, 95e3],
  radius64KtM: i === 1 ? [80e3, 75e3, 50e3, 60e3] : null,
}));
const mirroredRadii = (radii: TrackFix['radius34KtM']): TrackFix['radius34KtM'] =>
  radii && [radii[1], radii[0], radii[3], radii[2]];
const MIRRORED: TrackFix[] = mirroredFixes(TRACK).map((fix) => ({
  ...fix,
  radius34KtM: mirroredRadii(fix.radius34KtM),
  radius50KtM: mirroredRadii(fix.radius50KtM),
  radius64KtM: mirroredRadii(fix.radius64KtM),
}));

const optionsOf = (changed: Partial<ChainOptions>): ChainOptions => ({
  ...DEFAULT_OPTIONS,
  timeStepS: 600,
  innerTimeStepS: 200,
  ...changed,
});
const stormOf = (changed: Partial<ChainOptions>, fixes: readonly TrackFix[] = TRACK): Storm =>
  prepareStorm(fixes, optionsOf(changed), null);
const scoresOf = (storm: Storm, sites: readonly TestSite[] = workedSites): SiteScores =>
  scoreSites(storm, batchOf(sites), REFERENCE_CURVE);
const asSite = ({ latitude, longitude, roughness, fetch, hill }: TestSite): Site => ({
  latitude,
  longitude,
  roughnessM: roughness,
  fetchM: fetch,
  topographicFactor: hill,
});

const scored = new Map(CHANGED.map(([name, changed]) => [name, scoresOf(stormOf(changed))]));
const COLUMNS = ['plainGust', 'enhancedMean', 'p5', 'p50', 'p99'] as const;

describe.each(CHANGED)('%s', (name, changed) => {
  const storm = stormOf(changed);
  const scores = scored.get(name)!;

  it('gives every site a gust', () => {
    for (const column of [...COLUMNS, 'secondsAbove25', 'grossMean'] as const) {
      for (const value of scores[column]) expect(Number.isFinite(value)).toBe(true);
    }
  });
  it('explains what it computes, at every time', () => {
    const passage = makePassage(storm);
    for (const site of [workedSites[1]!, workedSites[0]!]) {
      const place = asSite(site);
      const count = followPassage(storm, site.latitude, site.longitude, siteExposure(place), passage);
      for (let i = 0; i < count; i += 7) {
        const wind = windAt(storm, passage.state[i]!, place);
        expect(Math.abs(wind.gustMs - passage.gust[i]!)).toBeLessThan(1e-7);
        expect(Math.abs(wind.eastwardMs - passage.seaU[i]!)).toBeLessThan(1e-7);
      }
    }
  });
  it('mirrors at the equator', () => {
    const south = scoresOf(stormOf(changed, MIRRORED), workedSites.map(mirroredSite));
    for (const column of COLUMNS) {
      workedSites.forEach((_, i) => expect(Math.abs(south[column][i]! - scores[column][i]!)).toBeLessThan(1e-9));
    }
  });
  it('does not depend on where longitudes are counted from', () => {
    const east = (place: { longitude: number }) => ({ longitude: place.longitude - 137.3 });
    const shifted = scoresOf(
      stormOf(
        changed,
        TRACK.map((fix) => ({ ...fix, ...east(fix) })),
      ),
      workedSites.map((site) => ({ ...site, ...east(site) })),
    );
    for (const column of COLUMNS) {
      workedSites.forEach((_, i) => expect(Math.abs(shifted[column][i]! - scores[column][i]!)).toBeLessThan(1e-9));
    }
  });
  it('never blows harder beyond a quiet distance, and leaves durations as they are', () => {
    if (storm.field === null) return;
    const { write } = seaWindOf(storm.options);
    const out = makeSeaWindSteps();
    for (const k of [storm.outer[6]!, storm.outer[75]!, storm.outer[135]!]) {
      for (let level = 0; level < 20; level += 3) {
        const chord2 = storm.states[k * STATE_SIZE + STATE.quietChord2 + level]!;
        if (chord2 === Infinity) continue;
        const from = 2 * 6_371_000 * Math.asin(Math.sqrt(chord2) / 2);
        for (let step = 0; step < 40; step++) {
          const r = from * 1.05 ** step;
          for (let turn = 0; turn < 2 * Math.PI; turn += 0.3) {
            write(storm.field[k]!, r, Math.sin(turn), Math.cos(turn), out);
            expect(Math.hypot(out.eastward, out.northward)).toBeLessThan(2 + level);
          }
        }
      }
    }
  });
  it('says that it is not the default', () => {
    expect(storm.notices.filter(({ code }) => code === 'wind-choices')).toHaveLength(1);
  });
  it('can be sent to another thread', () => {
    const sent = scoresOf(structuredClone(storm));
    for (const column of COLUMNS) expect(sent[column]).toEqual(scores[column]);
  });
});

describe('switching', () => {
  it('every option back gives the default bit for bit, whatever was computed in between', () => {
    const before = scoresOf(stormOf({}));
    for (const [, changed] of CHANGED) stormOf(changed);
    const back = Object.fromEntries(WIND_CHOICE_NAMES.map((name) => [name, WIND_CHOICES[name][0]]));
    expect(scoresOf(stormOf(back))).toEqual(before);
  });
  it('no result depends on what was computed before it', () => {
    for (const [name, changed] of [...CHANGED].reverse()) expect(scoresOf(stormOf(changed))).toEqual(scored.get(name));
  });
  it('refuses a value that there is not, and one that is missing', () => {
    for (const name of WIND_CHOICE_NAMES) {
      const wrong = { ...DEFAULT_OPTIONS, [name]: 'another' } as ChainOptions;
      expect(() => prepareStorm(workedFixes, wrong, null)).toThrow(DomainError);
      const missing = { ...DEFAULT_OPTIONS, [name]: undefined } as unknown as ChainOptions;
      expect(() => prepareStorm(workedFixes, missing, null)).toThrow(name);
    }
  });
  it('gives no notice of choices under the default', () => {
    expect(stormOf({}).notices.filter(({ code }) => code === 'wind-choices')).toHaveLength(0);
  });
});
