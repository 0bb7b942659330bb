import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { Validation, type ComparedSettings, type GustErrors } from '#contract/validation.ts';
import { measuresOf, weighted } from '../../api/bin/hindcast/measures.ts';
import { readObservations } from '../../api/bin/hindcast/observations.ts';
import { hindcastReport } from '../../api/bin/hindcast/report.ts';
import { centralRange, resamplesOf } from '../../api/bin/hindcast/resampling.ts';
import { readTracks } from '../../api/bin/hindcast/tracks.ts';
import { landIndex } from '../../api/compute/land.ts';

const data = new URL('../data/', import.meta.url);
const observations = readObservations(new URL('observations/', data));
const tracks = readTracks(new URL('tracks/', data));
const published = Validation.parse(
  JSON.parse(readFileSync(new URL('../../api/features/validation/hindcast.json', import.meta.url), 'utf8')),
);

const ofAll = (settings: ComparedSettings, weight: GustErrors['weight'] = 'observation') =>
  published.errors.find(
    (one) =>
      one.settings === settings &&
      one.layer === 'plain' &&
      one.rows === 'peaks' &&
      one.group === 'all' &&
      one.weight === weight,
  )!;

describe('the published hindcast', () => {
  it('is what this chain gives, to the printed digit; after a change: npm run hindcast', () => {
    expect(hindcastReport({ observations, tracks, land: landIndex() })).toEqual(published);
  }, 600_000);

  it('has errors that follow from its own rows', () => {
    const relative = published.observations
      .filter(({ role }) => role === 'P')
      .map(({ standardisedMs, modelled }) => modelled.default.plainMs / standardisedMs! - 1);
    const mean = (values: number[]) => values.reduce((a, b) => a + b, 0) / values.length;
    const { bias, meanAbsolute, scatter, count } = ofAll('default');
    expect(count).toBe(relative.length);
    expect(bias.value).toBeCloseTo(mean(relative), 3);
    expect(meanAbsolute.value).toBeCloseTo(mean(relative.map(Math.abs)), 3);
    expect(scatter.value).toBeCloseTo(Math.sqrt(mean(relative.map((one) => (one - mean(relative)) ** 2))), 3);
  });

  // What the page says in words. It notices when a change makes the words untrue; it isn't evidence that the chain is
  // right: the default was chosen among published options on these very storms.
  it('bears out the sentences of the page', () => {
    for (const weight of ['observation', 'storm'] as const) {
      const byPressure = ofAll('default', weight);
      for (const other of ['wind', 'wind-as-mean'] as const) {
        expect(Math.abs(byPressure.bias.value)).toBeLessThan(Math.abs(ofAll(other, weight).bias.value));
        expect(byPressure.meanAbsolute.value).toBeLessThan(ofAll(other, weight).meanAbsolute.value);
      }
    }
  });

  it('scores no doubtful, duplicate, partial or unplaced observation', () => {
    for (const { settings, of } of published.withinBand)
      expect([settings, of]).toEqual([settings, observations.filter(({ role }) => role === 'P').length]);
    const storms = published.errors.filter(({ settings, group, layer }) => {
      return settings === 'default' && group === 'storm' && layer === 'plain';
    });
    expect(storms.reduce((sum, { count }) => sum + count, 0)).toBe(ofAll('default').count);
  });
});

describe('the observations', () => {
  it('are standardised as the gatherer’s own computation has it', () => {
    // Source: the column standardised_gust_ms, worked out by somebody else from the same rule, to three decimals.
    const written = observations.filter(({ writtenStandardisedMs }) => writtenStandardisedMs !== null);
    expect(written.length).toBeGreaterThan(50);
    for (const { id, standardisedMs, writtenStandardisedMs } of written)
      expect([id, standardisedMs!.toFixed(2)]).toEqual([id, writtenStandardisedMs!.toFixed(2)]);
  });

  it('have a track and a role each', () => {
    for (const { id, stormId } of observations) expect([id, tracks.has(stormId)]).toEqual([id, true]);
    for (const { id, role, compareUntilUtc } of observations)
      expect([id, compareUntilUtc !== null]).toEqual([id, role === 'T']);
  });
});

it('a JTWC fix is read in its own units', () => {
  // 2011-01-29 12 UTC: 13.9 S, 172.0 E, 30 kt, 1000 hPa, 15 n mi. 1 kt = 1852 m / 3600 s.
  const fix = tracks.get('11P2011')!.find(({ timeS }) => timeS === Date.UTC(2011, 0, 29, 12) / 1000)!;
  expect(fix).toMatchObject({ latitude: -13.9, longitude: 172, centralPressurePa: 100_000, radiusOfMaxWindM: 27_780 });
  expect(fix.maxWindMs).toBeCloseTo(15.4333, 4);
  expect(fix.radius64KtM).toBeNull();
});

describe('the measures', () => {
  const pair = (observedMs: number, modelledMs: number, storm: string) => ({ observedMs, modelledMs, storm });

  it('are those worked out by hand', () => {
    // Relative errors +0.1 and -0.1; squares 1 and 4.
    const { bias, biasMs, rmseMs, meanAbsolute, scatter, correlation } = measuresOf(
      weighted([[pair(10, 11, 'a'), pair(20, 18, 'a')]], 'observation'),
    );
    expect(bias).toBeCloseTo(0, 12);
    expect(biasMs).toBeCloseTo(-0.5, 12);
    expect(rmseMs).toBeCloseTo(Math.sqrt(2.5), 12);
    expect(meanAbsolute).toBeCloseTo(0.1, 12);
    expect(scatter).toBeCloseTo(0.1, 12);
    expect(correlation).toBeCloseTo(1, 12);
  });
  it('let each storm count alike when asked', () => {
    const groups = [[pair(10, 12, 'a')], [pair(10, 10, 'b'), pair(10, 10, 'b'), pair(10, 10, 'b')]];
    expect(measuresOf(weighted(groups, 'observation')).bias).toBeCloseTo(0.05, 12);
    expect(measuresOf(weighted(groups, 'storm')).bias).toBeCloseTo(0.1, 12);
  });
  it('are resampled storm by storm, the same draws each time', () => {
    const sizes = [1, 4, 2];
    const draws = resamplesOf(sizes);
    expect(draws).toEqual(resamplesOf(sizes));
    for (const draw of draws.slice(0, 50)) {
      expect(draw).toHaveLength(3);
      for (const { group, members } of draw) {
        expect(members).toHaveLength(sizes[group]!);
        expect(Math.max(...members)).toBeLessThan(sizes[group]!);
      }
    }
    // A storm is drawn as often as any other: 3 a draw, one third each; binomial sd of the share 0.0043.
    const share = draws.flat().filter(({ group }) => group === 1).length / (3 * draws.length);
    expect(Math.abs(share - 1 / 3)).toBeLessThan(0.02);
  });
  it('have the range of the middle 95 %', () => {
    const { low, high } = centralRange(Array.from({ length: 1001 }, (_, i) => 1000 - i));
    expect([low, high]).toEqual([25, 975]);
  });
});
