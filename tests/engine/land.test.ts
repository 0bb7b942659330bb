import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  buildLandIndex,
  distanceToLandM,
  fetchBySector,
  inlandHours,
  inlandSpells,
  isLand,
  type LandIndex,
} from '#engine/geo/land.ts';
import { unwrapRing } from '#engine/geo/ring-unwrapping.ts';

const R = 6_371_000;
const RAD = Math.PI / 180;
const DEGREE = R * RAD;
const between = (min: number, max: number) => fc.nat(1e6).map((i) => min + ((max - min) * i) / 1e6);

const ring = (...points: [number, number][]) => unwrapRing([...points, points[0]!]);
const box = (west: number, south: number, east: number, north: number) =>
  ring([west, south], [east, south], [east, north], [west, north]);
const fetches = (index: LandIndex, latitude: number, longitude: number) => [
  ...fetchBySector(index, latitude, longitude, new Float64Array(8)),
];

/** Great-circle destination. */
const travel = (latitude: number, longitude: number, bearing: number, distance: number) => {
  const [phi, c, b] = [latitude * RAD, distance / R, bearing * RAD];
  const sin = Math.sin(phi) * Math.cos(c) + Math.cos(phi) * Math.sin(c) * Math.cos(b);
  const east = Math.atan2(Math.sin(b) * Math.sin(c) * Math.cos(phi), Math.cos(c) - Math.sin(phi) * sin);
  return { latitude: Math.asin(sin) / RAD, longitude: longitude + east / RAD };
};

describe('fetch over simple land', () => {
  const island = buildLandIndex([box(9.8, 19.9, 10.2, 20.1)]);

  it('ends at the shore of a small island in every direction', () => {
    const [n, ne, e, se, s, sw, w, nw] = fetches(island, 20, 10) as [
      number,
      number,
      number,
      number,
      number,
      number,
      number,
      number,
    ];
    expect(n).toBeCloseTo(0.1 * DEGREE, 0);
    expect(s).toBeCloseTo(0.1 * DEGREE, 0);
    // A great circle that leaves due east meets the meridian 0.2 degrees on after atan(tan 0.2° · cos 20°).
    const eastward = R * Math.atan(Math.tan(0.2 * RAD) * Math.cos(20 * RAD));
    expect(e).toBeCloseTo(eastward, 0);
    expect(w).toBeCloseTo(eastward, 0);
    for (const [distance, bearing, latitude] of [
      [ne, 45, 20.1],
      [nw, 315, 20.1],
      [se, 135, 19.9],
      [sw, 225, 19.9],
    ] as const) {
      expect(travel(20, 10, bearing, distance).latitude).toBeCloseTo(latitude, 5);
    }
  });

  it('is nil at sea and capped at 100 km far inland', () => {
    expect(fetches(island, 20.2, 10)).toEqual([0, 0, 0, 0, 0, 0, 0, 0]);
    const continent = buildLandIndex([box(0, 10, 30, 40)]);
    expect(fetches(continent, 25, 15)).toEqual([1e5, 1e5, 1e5, 1e5, 1e5, 1e5, 1e5, 1e5]);
  });

  it('gives the sectors of the worked coast along 25 north', () => {
    const coast = buildLandIndex([box(170, 25, 190, 40)]);
    // The printed 7863 m is 5560 m / cos 45°; along a great circle the shore is 2 m nearer.
    [1e5, 1e5, 1e5, 7863, 5560, 7863, 1e5, 1e5].forEach((expected, k) => {
      expect(Math.abs(fetches(coast, 25.05, -179.45)[k]! - expected)).toBeLessThan(2.5);
    });
  });

  // A square with a bay cut into its south side: water from 9.95 to 10.05 E up to 20.1 N.
  const bay = buildLandIndex([
    ring(
      [9.5, 19.8],
      [9.95, 19.8],
      [9.95, 20.1],
      [10.05, 20.1],
      [10.05, 19.8],
      [10.5, 19.8],
      [10.5, 20.4],
      [9.5, 20.4],
    ),
  ]);

  it('ends at the head and at the sides of a bay', () => {
    expect(isLand(bay, 20, 10)).toBe(false);
    expect(fetches(bay, 20.15, 10)[4]).toBeCloseTo(0.05 * DEGREE, 0);
    const across = R * Math.atan(Math.tan(0.1 * RAD) * Math.cos(20 * RAD));
    expect(fetches(bay, 20, 9.85)[2]).toBeCloseTo(across, 0);
    expect(fetches(bay, 20, 10.15)[6]).toBeCloseTo(across, 0);
    expect(fetches(bay, 19.9, 9.9)[0]).toBeCloseTo(0.5 * DEGREE, 0);
  });

  it('is short across a peninsula and long along it', () => {
    const peninsula = buildLandIndex([
      ring([9.5, 20], [9.98, 20], [9.98, 19.2], [10.02, 19.2], [10.02, 20], [10.5, 20], [10.5, 21], [9.5, 21]),
    ]);
    const found = fetches(peninsula, 19.5, 10);
    expect(found[2]).toBeCloseTo(R * Math.atan(Math.tan(0.02 * RAD) * Math.cos(19.5 * RAD)), 0);
    expect(found[0]).toBe(1e5);
    expect(found[4]).toBeCloseTo(0.3 * DEGREE, 0);
  });

  it('ends at a lake, which is a ring within a ring', () => {
    const land = buildLandIndex([box(0, 10, 20, 30), box(9.9, 19.9, 10.1, 20.1)]);
    expect(isLand(land, 20, 10)).toBe(false);
    expect(isLand(land, 20.2, 10)).toBe(true);
    expect(fetches(land, 20.2, 10)[4]).toBeCloseTo(0.1 * DEGREE, 0);
  });
});

describe('land anywhere on the sphere', () => {
  const outline: [number, number][] = Array.from({ length: 40 }, (_, k) => {
    const angle = (2 * Math.PI * k) / 40;
    const radius = k % 2 ? 0.4 : 0.9;
    return [radius * Math.cos(angle), 0.8 * radius * Math.sin(angle)];
  });
  const star = (latitude: number, longitude: number, sign = 1) => {
    const wrap = (x: number) => x - 360 * Math.floor((x + 180) / 360);
    // Drawn with longitudes in -180..180, as a map file would, so that unwrapping is part of the test.
    return buildLandIndex([
      ring(...outline.map(([x, y]): [number, number] => [wrap(longitude + x), sign * (latitude + y)])),
    ]);
  };

  it('is the same after any turn around the axis, across the antimeridian too', () => {
    const home = star(20, 50);
    fc.assert(
      fc.property(
        fc.constantFrom(129.6, 130, 130.4, -230, -129.99, 300),
        between(-1, 1),
        between(-0.8, 0.8),
        (turn, x, y) => {
          const moved = star(20, 50 + turn);
          for (const lap of [-360, 0, 360]) {
            expect(isLand(moved, 20 + y, 50 + x + turn + lap)).toBe(isLand(home, 20 + y, 50 + x));
            const a = fetches(home, 20 + y, 50 + x);
            fetches(moved, 20 + y, 50 + x + turn + lap).forEach((d, k) =>
              expect(Math.abs(d - a[k]!)).toBeLessThan(1e-3),
            );
            // Long edges are cut at the cells, which lie elsewhere after the turn.
            expect(
              Math.abs(distanceToLandM(moved, 20 + y, 50 + x + turn + lap) - distanceToLandM(home, 20 + y, 50 + x)),
            ).toBeLessThan(10);
          }
        },
      ),
      { numRuns: 60 },
    );
  });

  it('mirrors north and south', () => {
    const north = star(30, 10);
    const south = star(30, 10, -1);
    fc.assert(
      fc.property(between(-0.9, 0.9), between(-0.7, 0.7), (x, y) => {
        const a = fetches(north, 30 + y, 10 + x);
        const b = fetches(south, -30 - y, 10 + x);
        [4, 3, 2, 1, 0, 7, 6, 5].forEach((from, k) => expect(Math.abs(b[k]! - a[from]!)).toBeLessThan(1e-3));
      }),
      { numRuns: 60 },
    );
  });

  it('agrees with a plain even-odd count, with steps along each bearing and with a search along the outline', () => {
    const land = star(35, -60);
    const corners = outline.map(([x, y]) => [-60 + x, 35 + y] as const);
    const inside = (latitude: number, longitude: number) => {
      let odd = false;
      corners.forEach(([x0, y0], k) => {
        const [x1, y1] = corners[(k + 1) % corners.length]!;
        if (y0 > latitude !== y1 > latitude && longitude < x0 + ((latitude - y0) * (x1 - x0)) / (y1 - y0)) odd = !odd;
      });
      return odd;
    };
    const apart = (latitude: number, longitude: number, x: number, y: number) => {
      const h =
        Math.sin(((y - latitude) * RAD) / 2) ** 2 +
        Math.cos(latitude * RAD) * Math.cos(y * RAD) * Math.sin(((x - longitude) * RAD) / 2) ** 2;
      return 2 * R * Math.asin(Math.sqrt(h));
    };
    fc.assert(
      fc.property(between(-1.1, 1.1), between(-0.9, 0.9), (x, y) => {
        const [latitude, longitude] = [35 + y, -60 + x];
        const on = inside(latitude, longitude);
        expect(isLand(land, latitude, longitude)).toBe(on);
        let nearest = Infinity;
        corners.forEach(([x0, y0], k) => {
          const [x1, y1] = corners[(k + 1) % corners.length]!;
          for (let s = 0; s <= 200; s++) {
            const there = apart(latitude, longitude, x0 + ((x1 - x0) * s) / 200, y0 + ((y1 - y0) * s) / 200);
            nearest = Math.min(nearest, there);
          }
        });
        const signed = distanceToLandM(land, latitude, longitude);
        expect(Math.sign(signed)).toBe(on ? -1 : 1);
        // The search steps along the outline are up to 300 m long.
        if (nearest < 9e4) expect(Math.abs(Math.abs(signed) - nearest)).toBeLessThan(60);
        fetches(land, latitude, longitude).forEach((fetch, k) => {
          let walked = 0;
          while (on && walked < 1e5) {
            const next = travel(latitude, longitude, 45 * k, walked + 100);
            if (!inside(next.latitude, next.longitude)) break;
            walked += 100;
          }
          // A step of 100 m may jump over a spit or an inlet narrower than itself, so fetch may only be the shorter.
          expect(fetch).toBeLessThanOrEqual(walked + 100.5);
          // A ray is followed in straight pieces, 0.1 m off at most; along an edge it grazes that becomes metres.
          const seen = new Set<boolean>();
          for (let step = -25; step <= 25; step++) {
            const near = travel(latitude, longitude, 45 * k, fetch + step);
            seen.add(inside(near.latitude, near.longitude));
          }
          if (on && fetch < 1e5) expect(seen.size).toBe(2);
        });
      }),
      { numRuns: 300, seed: 7 },
    );
  });

  it('covers a pole, without a coast where its ring is closed along the pole', () => {
    const cap = buildLandIndex([ring(...Array.from({ length: 72 }, (_, k): [number, number] => [180 - 5 * k, -70]))]);
    for (const longitude of [-180, -100, 0, 179.99, 180, 400]) {
      expect(isLand(cap, -75, longitude)).toBe(true);
      expect(isLand(cap, -89.99, longitude)).toBe(true);
      expect(isLand(cap, -69.9, longitude)).toBe(false);
      expect(fetches(cap, -89.9, longitude)).toEqual([1e5, 1e5, 1e5, 1e5, 1e5, 1e5, 1e5, 1e5]);
      expect(fetches(cap, -70.5, longitude)[0]).toBeCloseTo(0.5 * DEGREE, 0);
      expect(distanceToLandM(cap, -69.9, longitude)).toBeCloseTo(0.1 * DEGREE, -1);
      expect(distanceToLandM(cap, -89.9, longitude)).toBe(-Infinity);
    }
    // The seam along 180 E lies 67 km off, beyond the nearest true coast.
    expect(fetches(cap, -70.5, 178.2)[2]).toBe(1e5);
    expect(isLand(cap, -90, 0)).toBe(true);
    expect(isLand(cap, 90, 0)).toBe(false);
  });

  it('has a coast distance by hand: north of a straight shore, off a corner, and none within reach', () => {
    const land = buildLandIndex([box(0, 0, 10, 10)]);
    expect(distanceToLandM(land, 10.2, 5)).toBeCloseTo(0.2 * DEGREE, -1);
    expect(distanceToLandM(land, 9.8, 5)).toBeCloseTo(-0.2 * DEGREE, -1);
    expect(distanceToLandM(land, -0.3, -0.4)).toBeCloseTo(0.5 * DEGREE, -1);
    expect(distanceToLandM(land, 10.2, 5, 20_000)).toBe(Infinity);
    expect(distanceToLandM(land, 5, 5)).toBe(-Infinity);
  });

  it('refuses rings that are open, too short or off the sphere', () => {
    expect(() => buildLandIndex([Float64Array.of(0, 0, 1, 0, 1, 1, 0, 1)])).toThrow('closed');
    expect(() => buildLandIndex([Float64Array.of(0, 0, 1, 0, 1, 91, 0, 0)])).toThrow('latitude');
    expect(() => buildLandIndex([Float64Array.of(0, 0, 200, 0, 1, 1, 0, 0)])).toThrow('180');
    expect(() =>
      unwrapRing([
        [0, 0],
        [1, 1],
        [0, 0],
      ]),
    ).toThrow('4 points');
    expect(() =>
      unwrapRing([
        [0, 0],
        [1, Number.NaN],
        [1, 0],
        [0, 0],
      ]),
    ).toThrow('finite');
    expect(isLand(buildLandIndex([box(0, 0, 1, 1)]), Number.NaN, 0)).toBe(false);
  });
});

describe('ring laid out on the plane', () => {
  it('continues across the antimeridian and closes on itself', () => {
    expect([
      ...unwrapRing([
        [179, 0],
        [-179, 0],
        [-179, 1],
        [179, 1],
        [179, 0],
      ]),
    ]).toEqual([179, 0, 181, 0, 181, 1, 179, 1, 179, 0]);
  });

  it('around a pole gets two corners there', () => {
    const flat = unwrapRing([
      [0, 80],
      [120, 80],
      [-120, 80],
      [0, 80],
    ]);
    expect([...flat]).toEqual([0, 80, 120, 80, 240, 80, 360, 80, 360, 90, 0, 90, 0, 80]);
  });
});

describe('hours inland', () => {
  // Two islands on the way north along 10 E: 1 to 2 N and 2.5 to 3.5 N.
  const land = buildLandIndex([box(9, 1, 11, 2), box(9, 2.5, 11, 3.5)]);
  const fix = (hours: number, latitude: number, longitude = 10) => ({ timeS: hours * 3600, latitude, longitude });

  it('start at the moment of landfall, between fixes, and end when the centre leaves', () => {
    const spells = inlandSpells(land, [fix(0, 0), fix(4, 4)]);
    expect(spells).toHaveLength(2);
    [
      [1, 2],
      [2.5, 3.5],
    ].forEach(([enter, leave], k) => {
      expect(spells[k]!.enterS / 3600).toBeCloseTo(enter!, 5);
      expect(spells[k]!.leaveS / 3600).toBeCloseTo(leave!, 5);
    });
    const at = (hours: number) => inlandHours(spells, hours * 3600);
    expect([0.5, 1.25, 1.75, 2.25, 3, 3.75].map(at)).toEqual(
      [0, 0.25, 0.75, 0, 0.5, 0].map((h) => expect.closeTo(h, 5)),
    );
  });

  it('do not depend on how often the track is fixed', () => {
    const fine = inlandSpells(
      land,
      Array.from({ length: 17 }, (_, k) => fix(k / 4, k / 4)),
    );
    expect(fine).toHaveLength(2);
    expect(fine[1]!.enterS / 3600).toBeCloseTo(2.5, 5);
    expect(fine[1]!.leaveS / 3600).toBeCloseTo(3.5, 5);
  });

  it('count from the first fix of a track that starts over land, and none at sea', () => {
    const spells = inlandSpells(land, [fix(0, 1.5), fix(1, 2.5)]);
    expect(spells[0]!.enterS).toBe(0);
    expect(spells[0]!.leaveS / 3600).toBeCloseTo(0.5, 5);
    expect(inlandSpells(land, [fix(0, 1.2), fix(2, 1.8)])).toEqual([{ enterS: 0, leaveS: 7200 }]);
    expect(inlandSpells(land, [fix(0, 0, 30), fix(2, 1.8, 31)])).toEqual([]);
  });

  it('are found across the antimeridian and for a centre that stands still', () => {
    const island = buildLandIndex([box(179.5, -1, 180.5, 1)]);
    const spells = inlandSpells(island, [fix(0, 0, 179), fix(2, 0, -179)]);
    expect(spells).toHaveLength(1);
    expect(spells[0]!.enterS / 3600).toBeCloseTo(0.5, 5);
    expect(spells[0]!.leaveS / 3600).toBeCloseTo(1.5, 5);
    expect(inlandSpells(island, [fix(0, 0, 180), fix(2, 0, -180)])).toEqual([{ enterS: 0, leaveS: 7200 }]);
  });
});
