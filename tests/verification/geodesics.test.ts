import fc from 'fast-check';
import geographiclib from 'geographiclib-geodesic';
import { describe, expect, it } from 'vitest';
import { outOfReach, reachPath, countWithinReach } from '#engine/footprint/reach.ts';
import { betweenPlaces, greatCircleDistance, initialBearing } from '#engine/geo/geodesy.ts';
import { between } from '../helpers/arbitrary.ts';

const { Geodesic } = geographiclib;
const sphere = new Geodesic.Geodesic(6_371_000, 0);
const place = fc.record({ latitude: between(-60, 60), longitude: between(-180, 180) });
const inverse = (geodesic: typeof sphere, a: { latitude: number; longitude: number }, b: typeof a) => {
  const { s12, azi1 } = geodesic.Inverse(a.latitude, a.longitude, b.latitude, b.longitude);
  return { distance: s12!, bearing: (azi1! + 360) % 360 };
};

describe('against GeographicLib (Karney 2013, J. Geodesy 87, 43–55)', () => {
  it('distances and bearings on the same sphere agree to rounding', () =>
    fc.assert(
      fc.property(place, place, (a, b) => {
        const { distance, bearing } = inverse(sphere, a, b);
        if (distance < 1 || distance > 19_000_000) return;
        expect(Math.abs(greatCircleDistance(a, b) - distance)).toBeLessThan(1e-6 * (1 + distance / 1e6));
        const turn = Math.abs(((initialBearing(a, b) - bearing + 540) % 360) - 180);
        expect(turn * distance).toBeLessThan(1e-2);
      }),
    ));
  it('distances on the ellipsoid differ by at most 0.57 %', () =>
    fc.assert(
      fc.property(place, between(0, 360), between(1e3, 1e6), (a, bearing, metres) => {
        const { lat2, lon2 } = Geodesic.WGS84.Direct(a.latitude, a.longitude, bearing, metres);
        const b = { latitude: lat2!, longitude: lon2! };
        expect(Math.abs(greatCircleDistance(a, b) / metres - 1)).toBeLessThan(0.0057);
      }),
    ));
  it.each([
    // Sphere against the ellipsoid's own radius there: north-south, in percent.
    [15, 0.49],
    [25, 0.38],
    [35, 0.23],
  ])('at latitude %i the north-south difference is %f %%', (latitude, percent) => {
    const { lat2 } = Geodesic.WGS84.Direct(latitude, 0, 0, 1000);
    const ratio = greatCircleDistance({ latitude, longitude: 0 }, { latitude: lat2!, longitude: 0 }) / 1000;
    expect(100 * (ratio - 1)).toBeCloseTo(percent, 2);
  });
  it('a point between two places lies on the geodesic of the sphere, at its share of the way', () =>
    fc.assert(
      fc.property(place, place, between(0, 1), (a, b, share) => {
        const whole = inverse(sphere, a, b);
        if (whole.distance < 1000 || whole.distance > 15_000_000) return;
        const { lat2, lon2 } = sphere.Direct(a.latitude, a.longitude, whole.bearing, share * whole.distance);
        const middle = betweenPlaces(a, b, share);
        expect(greatCircleDistance(middle, { latitude: lat2!, longitude: lon2! })).toBeLessThan(0.01);
      }),
    ));
});

describe('reach', () => {
  const legs = fc.array(place, { minLength: 2, maxLength: 4 });
  it('is judged by the distance to the nearest point of the path', () =>
    fc.assert(
      fc.property(legs, place, (fixes, site) => {
        let nearest = Infinity;
        for (let i = 0; i + 1 < fixes.length; i++) {
          if (greatCircleDistance(fixes[i]!, fixes[i + 1]!) > 15_000_000) return;
          for (let k = 0; k <= 2000; k++) {
            nearest = Math.min(nearest, greatCircleDistance(betweenPlaces(fixes[i]!, fixes[i + 1]!, k / 2000), site));
          }
        }
        // Points of the path lie at most 7.5 km apart, so the sampled distance may be 4 km too long near the limit.
        if (Math.abs(nearest - 1_000_000) < 4_000) return;
        expect(outOfReach(reachPath(fixes), site.latitude, site.longitude)).toBe(nearest > 1_000_000);
      }),
      { numRuns: 60 },
    ));
  it('counts the same sites for a quote and a charge', () => {
    const path = reachPath([
      { latitude: 20, longitude: 179 },
      { latitude: 25, longitude: -179 },
    ]);
    expect(countWithinReach(path, [21, 21, 50, NaN], [180, -180, 0, 0])).toBe(2);
  });
});
