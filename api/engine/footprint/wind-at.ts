import { greatCircleDistance, initialBearing, normalisedBearing } from '../geo/geodesy.ts';
import { turbulenceIntensity } from '../gust/turbulence.ts';
import { seaRoughness } from '../terrain/drag.ts';
import { sectorWeight } from '../terrain/fetch.ts';
import { equilibriumRatio } from '../terrain/roughness.ts';
import { STATE, STATE_SIZE, type Storm } from '../track/storm.ts';
import { degrees, radians } from '../units.ts';
import { hollandGradientWind } from '../winds/holland-1980.ts';
import { inflowAngle } from '../winds/inflow.ts';
import { surfaceFactor } from '../winds/surface-factor.ts';
import { exposureOf, PEAK_FACTOR, type Exposure } from './exposure.ts';

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
  const sign = state(STATE.sign);
  const rMax = state(STATE.rMax);
  const distanceM = Math.max(greatCircleDistance(centre, site), 1);
  const bearingDeg = initialBearing(centre, site);
  const vortex = { rMax, b: state(STATE.b), deficit: state(STATE.deficit), f: 2 * state(STATE.halfF) };
  const gradientMs = hollandGradientWind(distanceM, vortex);
  const reduction = surfaceFactor(distanceM);
  const surfaceMs = reduction * gradientMs;
  const inflowDeg = inflowAngle(distanceM / rMax);
  const towards = radians(bearingDeg - sign * (90 + inflowDeg));
  const eastwardMs = surfaceMs * Math.sin(towards) + state(STATE.motionU);
  const northwardMs = surfaceMs * Math.cos(towards) + state(STATE.motionV);
  const seaWindMs = Math.hypot(eastwardMs, northwardMs);
  const directionDeg = normalisedBearing(degrees(Math.atan2(-eastwardMs, -northwardMs)));
  const seaZ0 = seaRoughness(seaWindMs);
  const landWeight = exposure.isAtSea ? 0 : sectorWeight(exposure.weights, directionDeg);
  const terrainFactor = site.roughnessM === null ? 1 : 1 + landWeight * (equilibriumRatio(site.roughnessM, seaZ0) - 1);
  const seaTurbulence = turbulenceIntensity(seaZ0);
  const turbulence = seaTurbulence + landWeight * (exposure.landTurbulence - seaTurbulence);
  const gustFactor = 1 + PEAK_FACTOR * turbulence;
  const meanMs = seaWindMs * terrainFactor;
  return {
    timeS: state(STATE.timeS),
    distanceM,
    bearingDeg,
    gradientMs,
    surfaceFactor: reduction,
    surfaceMs,
    inflowDeg,
    eastwardMs,
    northwardMs,
    seaWindMs,
    directionDeg,
    landWeight,
    terrainFactor,
    meanMs,
    turbulence,
    gustFactor,
    topographicFactor: site.topographicFactor,
    gustMs: meanMs * gustFactor * site.topographicFactor,
  };
}
