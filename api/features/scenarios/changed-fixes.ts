import type { TrackChange } from '#contract/derivations.ts';
import type { Fix, Track, TrackResolution } from '#contract/scenarios.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { changedTrack } from '#engine/track/variants.ts';
import { PA_PER_HPA } from '#engine/units.ts';
import { engineFixes } from './resolve-track.ts';

const rounded = (value: number, decimals: number) => Number(value.toFixed(decimals));
const isoOf = (timeS: number) => new Date(Math.round(timeS) * 1000).toISOString();

/** The value as entered while nothing changed it, else the changed one. */
const either = <T, U>(before: T, after: T, entered: U, changed: (value: T & {}) => U): U =>
  before === after || after === null || after === undefined ? entered : changed(after);

type Radii = TrackFix['radius64KtM'];
const metres = (radii: Radii & {}): Fix['radius64KtM'] => [
  rounded(radii[0], 0),
  rounded(radii[1], 0),
  rounded(radii[2], 0),
  rounded(radii[3], 0),
];

/**
 * The radius a change of radii starts from where neither it nor a 64-kt radius is given: as filled by relation, so that
 * the factor reaches every fix.
 */
const withRadius = (fix: TrackFix, resolved: number): TrackFix =>
  fix.radiusOfMaxWindM === null && !fix.radius64KtM?.some((radius) => radius > 0)
    ? { ...fix, radiusOfMaxWindM: resolved }
    : fix;

/** A changed copy of a track as it would be entered: to a tenth of a metre, a second, a pascal and a metre of radius. */
export const changedFixes = (track: Track, resolution: TrackResolution, change: TrackChange): Track => {
  const given = engineFixes(track);
  const start =
    change.radiusFactor === 1 ? given : given.map((fix, i) => withRadius(fix, resolution.fixes[i]!.radiusOfMaxWindM));
  const widens = change.radiusFactor !== 1;
  const fixes = changedTrack(start, change).map((fix, i): Fix => {
    const entered = track.fixes[i]!;
    const before = given[i]!;
    return {
      ...entered,
      time: either(before.timeS, fix.timeS, entered.time, isoOf),
      latitude: either(before.latitude, fix.latitude, entered.latitude, (degrees) => rounded(degrees, 6)),
      longitude: either(before.longitude, fix.longitude, entered.longitude, (degrees) => rounded(degrees, 6)),
      centralPressureHpa: either(before.centralPressurePa, fix.centralPressurePa, entered.centralPressureHpa, (pa) =>
        rounded(pa / PA_PER_HPA, 2),
      ),
      maxWindMs: either(before.maxWindMs, fix.maxWindMs, entered.maxWindMs, (wind) => rounded(wind, 4)),
      radiusOfMaxWindM: either(before.radiusOfMaxWindM, fix.radiusOfMaxWindM, entered.radiusOfMaxWindM, (radius) =>
        rounded(radius, 0),
      ),
      radius34KtM: widens && fix.radius34KtM ? metres(fix.radius34KtM) : (entered.radius34KtM ?? null),
      radius50KtM: widens && fix.radius50KtM ? metres(fix.radius50KtM) : (entered.radius50KtM ?? null),
      radius64KtM: widens && fix.radius64KtM ? metres(fix.radius64KtM) : entered.radius64KtM,
      hoursInland: fix.hoursInland,
    };
  });
  // What was seen of the vortices belongs to the track as it was.
  return { fixes, declarations: track.declarations };
};
