import { windAt, type WindSteps } from '#engine/footprint/wind-at.ts';
import { destination, normalisedBearing, type Place } from '#engine/geo/geodesy.ts';
import { legAt } from '#engine/track/position.ts';
import { STATE, STATE_SIZE, type Storm } from '#engine/track/storm.ts';
import { degrees } from '#engine/units.ts';

/** Which picture is asked for: at what time [s], how wide to each side [m], how many points along one side. */
export type WindFieldQuestion = { readonly timeS: number; readonly halfWidthM: number; readonly points: number };

/** The wind over open sea at one time of a storm. Winds [m s⁻¹], 10-min at 10 m unless said. */
export type WindField = {
  readonly timeS: number;
  readonly centre: Place;
  readonly headingDeg: number;
  readonly translationMs: number;
  readonly hemisphere: 'north' | 'south';
  /** 1-min. */
  readonly maxWindMs: number;
  readonly radiusOfMaxWindM: number;
  readonly shapeB: number;
  readonly pressureDeficitPa: number;
  readonly hoursInland: number;
  readonly profile: Record<
    'radiusM' | 'gradientMs' | 'meanMs' | 'rightMs' | 'leftMs' | 'aheadMs' | 'asternMs',
    readonly number[]
  >;
  /** Rows from north to south, points from west to east; `gustMs` 3-s. */
  readonly seaWindMs: readonly number[];
  readonly directionDeg: readonly number[];
  readonly gustMs: readonly number[];
};

const RADII = 120;
/** Radii lie closer together near the centre, where the wind changes fastest. */
const RADII_POWER = 1.5;
const AZIMUTHS = 36;

const nearestState = ({ states, stateCount }: Storm, timeS: number): number => {
  let nearest = 0;
  const gap = (k: number) => Math.abs(states[k * STATE_SIZE + STATE.timeS]! - timeS);
  for (let k = 1; k < stateCount; k++) if (gap(k) < gap(nearest)) nearest = k;
  return nearest;
};

/** Profile and picture of the wind at the moment of the storm’s time grid that is nearest to the one asked for. */
export const windFieldAt = (storm: Storm, { timeS, halfWidthM, points }: WindFieldQuestion): WindField => {
  const k = nearestState(storm, timeS);
  const state = (offset: number): number => storm.states[k * STATE_SIZE + offset]!;
  const centre = { latitude: state(STATE.latitude), longitude: state(STATE.longitude) };
  const headingDeg = state(STATE.heading);
  const at = (bearingDeg: number, distanceM: number): WindSteps => {
    const place = destination(centre, bearingDeg, distanceM);
    return windAt(storm, k, { ...place, roughnessM: null, fetchM: [], topographicFactor: 1 });
  };
  const radiusM = Array.from({ length: RADII }, (_, i) => halfWidthM * ((i + 1) / RADII) ** RADII_POWER);
  const ray = (turnDeg: number) => radiusM.map((r) => at(headingDeg + turnDeg, r).seaWindMs);
  const around = radiusM.map((r) =>
    Array.from({ length: AZIMUTHS }, (_, i) => at(headingDeg + (360 * i) / AZIMUTHS, r)),
  );
  const mean = (pick: (wind: WindSteps) => number) =>
    around.map((winds) => winds.reduce((sum, wind) => sum + pick(wind), 0) / AZIMUTHS);
  const step = (2 * halfWidthM) / (points - 1);
  const field = Array.from({ length: points * points }, (_, n) => {
    const east = (n % points) * step - halfWidthM;
    const north = halfWidthM - Math.floor(n / points) * step;
    return at(degrees(Math.atan2(east, north)), Math.hypot(east, north));
  });
  const { maxWindMs, hoursInland } = betweenFixes(storm, state(STATE.timeS));
  return {
    timeS: state(STATE.timeS),
    centre: { latitude: centre.latitude, longitude: normalisedBearing(centre.longitude + 180) - 180 },
    headingDeg,
    translationMs: state(STATE.speed),
    hemisphere: state(STATE.sign) > 0 ? 'north' : 'south',
    maxWindMs,
    radiusOfMaxWindM: state(STATE.rMax),
    shapeB: state(STATE.b),
    pressureDeficitPa: state(STATE.deficit),
    hoursInland,
    profile: {
      radiusM,
      gradientMs: mean((wind) => wind.gradientMs),
      meanMs: mean((wind) => wind.seaWindMs),
      rightMs: ray(90),
      leftMs: ray(-90),
      aheadMs: ray(0),
      asternMs: ray(180),
    },
    seaWindMs: field.map((wind) => wind.seaWindMs),
    directionDeg: field.map((wind) => wind.directionDeg),
    gustMs: field.map((wind) => wind.gustMs),
  };
};

/** Linear in time between the fixes, as the chain has it. */
const betweenFixes = ({ fixes }: Storm, timeS: number) => {
  const i = legAt(fixes, timeS);
  const a = fixes[i]!;
  const b = fixes[i + 1]!;
  const share = (timeS - a.timeS) / (b.timeS - a.timeS);
  const mix = (pick: (fix: Storm['fixes'][number]) => number) => pick(a) + share * (pick(b) - pick(a));
  return { maxWindMs: mix((fix) => fix.maxWindMs), hoursInland: mix((fix) => fix.hoursInland) };
};
