import { greatCircleDistance, initialBearing, normalisedBearing } from '../geo/geodesy.ts';
import { fieldAt, STATE, STATE_SIZE, type Storm } from '../track/storm.ts';
import { degrees, radians } from '../units.ts';
import { makeSeaWindSteps } from '../winds/field-state.ts';
import { seaWindOf } from '../winds/sea-wind.ts';
import { exposureOf, type Exposure } from './exposure.ts';
import { groundOf, makeGroundSteps } from './ground.ts';

/** A single site. */
export type Site = {
  readonly latitude: number;
  readonly longitude: number;
  /** Roughness length [m]; null = at sea. */
  readonly roughnessM: number | null;
  /** Overland distance for wind FROM 0, 45, ..., 315 degrees [m]. */
  readonly fetchM: readonly number[];
  /** Speed-up of the gust by a hill [1]; 1 = flat. */
  readonly topographicFactor: number;
};

/** The wind at a site at one time, step by step. Winds [m s⁻¹] at 10 m unless said. */
export type WindSteps = {
  readonly timeS: number;
  readonly distanceM: number;
  /** Bearing from the centre to the site [deg]. */
  readonly bearingDeg: number;
  /** Wind above the friction layer. */
  readonly gradientMs: number;
  readonly surfaceFactor: number;
  /** 10-min vortex wind over open sea. */
  readonly surfaceMs: number;
  readonly inflowDeg: number;
  /** Open-sea 10-min wind with the storm's motion; where it blows TO: eastward and northward part. */
  readonly eastwardMs: number;
  readonly northwardMs: number;
  readonly seaWindMs: number;
  /** Direction the wind comes FROM [deg]. */
  readonly directionDeg: number;
  /** Weight of the land upwind [1], and 10-min mean over open-sea wind. */
  readonly landWeight: number;
  readonly terrainFactor: number;
  readonly meanMs: number;
  readonly turbulence: number;
  readonly gustFactor: number;
  readonly topographicFactor: number;
  /** Plain 3-s gust. */
  readonly gustMs: number;
};

/**
 * Exposure of a single site.
 *
 * @param site The site.
 * @returns What does not depend on the wind.
 * @throws {DomainError} when a value is outside its range.
 * @source exposureOf.
 */
export function siteExposure(site: Site): Exposure {
  const roughness = site.roughnessM ?? NaN;
  return exposureOf('the site', roughness, site.fetchM, 0, site.topographicFactor, new Float64Array(8));
}

/**
 * The plain wind at a site at one state of the storm, in the plain order of the formulas; for explaining a result.
 *
 * @param storm The storm.
 * @param k     Index of the state.
 * @param site  The site.
 * @returns Every step.
 * @throws {DomainError} when a value of the site is outside its range.
 * @source Each step names its own source.
 */
export function windAt(storm: Storm, k: number, site: Site): WindSteps {
  const state = (offset: number): number => storm.states[k * STATE_SIZE + offset]!;
  const centre = { latitude: state(STATE.latitude), longitude: state(STATE.longitude) };
  const exposure = siteExposure(site);
  const distanceM = Math.max(greatCircleDistance(centre, site), 1);
  const bearingDeg = initialBearing(centre, site);
  const field = fieldAt(storm, k);
  const sea = makeSeaWindSteps();
  const bearing = radians(bearingDeg);
  seaWindOf(storm.options).explain(field, distanceM, Math.sin(bearing), Math.cos(bearing), sea);
  const seaWindMs = Math.hypot(sea.eastward, sea.northward);
  const ground = makeGroundSteps();
  groundOf(storm.options).write(exposure, sea.eastward, sea.northward, field.f, ground);
  const meanMs = seaWindMs * ground.terrainFactor;
  return {
    timeS: state(STATE.timeS),
    distanceM,
    bearingDeg,
    gradientMs: sea.gradient,
    surfaceFactor: sea.surfaceFactor,
    surfaceMs: sea.surface,
    inflowDeg: sea.inflowDeg,
    eastwardMs: sea.eastward,
    northwardMs: sea.northward,
    seaWindMs,
    directionDeg: normalisedBearing(degrees(Math.atan2(-sea.eastward, -sea.northward))),
    landWeight: ground.landWeight,
    terrainFactor: ground.terrainFactor,
    meanMs,
    turbulence: ground.turbulence,
    gustFactor: ground.gustFactor,
    topographicFactor: site.topographicFactor,
    gustMs: meanMs * ground.gustFactor * site.topographicFactor,
  };
}
