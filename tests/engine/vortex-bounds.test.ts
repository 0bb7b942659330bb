import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { followPassage, makePassage } from '#engine/footprint/passage.ts';
import { scoreSites } from '#engine/footprint/site-peaks.ts';
import { siteExposure } from '#engine/footprint/wind-at.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import type { ObservedVortices } from '#engine/ring/observed-vortices.ts';
import { DEFAULT_OPTIONS } from '#engine/track/options.ts';
import { prepareStorm } from '#engine/track/storm.ts';
import { near, siteNear, storms } from '../helpers/any-storm.ts';
import { between } from '../helpers/arbitrary.ts';
import { batchOf } from '../helpers/worked-storm.ts';

// Strongest vortex, cap of the amplitude law, and highest point of its radial shape: the method's own bound.
const BOUND = (1.1 * 0.5 * 1.25) / 1.05;

const rings = fc.record({ width: between(0.1, 0.45), eye: between(0, 0.6) });
const sightings = fc.option(
  fc.record({ count: fc.integer({ min: 2, max: 8 }), first: between(0, 40), uncertainty: between(1, 60) }),
  { nil: null },
);

describe('whatever the storm, its ring, what was seen of it, and the site', () => {
  it('no draw exceeds plain by more than 1.1 x 0.5 x 1.25 F vax / 1.05, percentiles are in order, and off is plain', () =>
    fc.assert(
      fc.property(storms, near, rings, sightings, (track, place, { width, eye }, sighting) => {
        const fixes = track.map((fix) => ({ ...fix, ringWidthFraction: width, eyeVorticityRatio: eye }));
        const seen: ObservedVortices[] = sighting
          ? [
              {
                kind: 'maxima',
                timeS: fixes[1]!.timeS,
                timeLabel: 'the second fix',
                azimuthsDeg: Array.from(
                  { length: sighting.count },
                  (_, k) => sighting.first + (310 * k) / sighting.count,
                ),
                uncertaintyDeg: sighting.uncertainty,
              },
            ]
          : [];
        const site = siteNear(fixes, place);
        // Steps as fine as a fast pattern asks for, so that both storms are looked at at the same times.
        const options = { ...DEFAULT_OPTIONS, anchor: 'mean' as const, innerTimeStepS: 20 };
        const storm = prepareStorm(fixes, options, null, seen);
        const scores = scoreSites(storm, batchOf([site]), REFERENCE_CURVE);
        const passage = makePassage(storm);
        const { latitude, longitude, roughness, fetch, hill } = site;
        const ground = { latitude, longitude, roughnessM: roughness, fetchM: fetch, topographicFactor: hill };
        const count = followPassage(storm, latitude, longitude, siteExposure(ground), passage);
        const factor = Math.max(...passage.factor.subarray(0, count));
        const vax = Math.max(...storm.fixes.map(({ axisymmetricMaxWindMs }) => axisymmetricMaxWindMs));
        const plain = scores.plainGust[0]!;
        const most = plain + BOUND * factor * vax;
        // Of one site the event's strongest gust in a draw is its own.
        for (const gust of scores.eventPeak) expect(gust).toBeLessThanOrEqual(most * (1 + 1e-12));
        const ordered = (['p5', 'p50', 'p90', 'p95', 'p99'] as const).map((column) => scores[column][0]!);
        for (let k = 1; k < ordered.length; k++) expect(ordered[k]!).toBeGreaterThanOrEqual(ordered[k - 1]!);
        const off = prepareStorm(fixes, { ...options, mesovortices: false }, null, seen);
        const without = scoreSites(off, batchOf([site]), REFERENCE_CURVE);
        expect(without.plainGust[0]).toBe(plain);
        for (const gust of without.eventPeak) expect(gust).toBe(plain);
        if (!seen.length) expect(scores.enhancedMean[0]!).toBeGreaterThanOrEqual(plain * (1 - 1e-12));
      }),
      { numRuns: 30 },
    ));
});
