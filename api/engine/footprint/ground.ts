import { VON_KARMAN } from '../constants.ts';
import { normalisedBearing } from '../geo/geodesy.ts';
import { esduTurbulence } from '../gust/turbulence.ts';
import { wmoGustFactor } from '../gust/wmo-gust-factor.ts';
import { roughnessOfDrag, seaDrag } from '../terrain/drag.ts';
import { sectorWeight } from '../terrain/fetch.ts';
import { logLawRatio, terrainFactor } from '../terrain/roughness.ts';
import type { WindOptions } from '../track/options.ts';
import { degrees } from '../units.ts';
import { PEAK_FACTOR, type Exposure } from './exposure.ts';

/** What the ground does to the open-sea wind; rewritten in place. All [1]. */
export type GroundSteps = {
  /** Weight of the land upwind. */
  landWeight: number;
  /** 10-min mean over open-sea wind, without hills. */
  terrainFactor: number;
  /** Turbulence intensity; without effect where a class gives the gust factor. */
  turbulence: number;
  /** 3-s gust over 10-min mean, without hills. */
  gustFactor: number;
};

/** Effect of the ground by the chosen relations. */
export type Ground = {
  /**
   * Writes what the ground does to an open-sea wind [m s⁻¹] that blows TO eastward and northward, under a centre with
   * Coriolis parameter f [s⁻¹].
   */
  readonly write: (exposure: Exposure, eastward: number, northward: number, f: number, out: GroundSteps) => void;
  /** Gust over open-sea wind that is not exceeded while that wind is in 2..21 m/s [1]. */
  readonly greatestFactor: (exposure: Exposure, f: number) => number;
};

const SAMPLED_WINDS = [2, 11, 21];
const SAMPLED_WEIGHTS = [0, 0.25, 0.5, 0.75, 1];
const MARGIN = 1.02;
/** Least wind [m s⁻¹] and least Coriolis parameter, that of half a degree [s⁻¹], with which turbulence is found. */
const LEAST_ESDU_WIND = 5;
const LEAST_ESDU_TURNING = 1.3e-6;
const CLASSES = {
  'wmo-at-sea': 'at-sea',
  'wmo-off-sea': 'off-sea',
  'wmo-off-land': 'off-land',
  'wmo-in-land': 'in-land',
} as const;

/**
 * Makes steps to be filled.
 *
 * @returns Steps of an open sea without gusts.
 * @source Workspace only.
 */
export function makeGroundSteps(): GroundSteps {
  return { landWeight: 0, terrainFactor: 1, turbulence: 0, gustFactor: 1 };
}

/**
 * Effect of the ground on the open-sea wind, by the chosen relations.
 *
 * @param options Drag of the sea, reduction over land, fetch, turbulence and gust factor. A class for the gust factor holds
 *                at every site, at sea too: it is the user's choice.
 * @returns The effect, and its bound.
 * @source Each part names its own; the bound is the greatest of a net of winds and weights, and 2 % more.
 */
export function groundOf(options: WindOptions): Ground {
  const landAllRound = options.fetch === 'land-all-round';
  const act = actOf(options);
  const work = makeGroundSteps();
  return {
    write(exposure, eastward, northward, f, out) {
      const { isAtSea, isUniform, weights } = exposure;
      const wind = Math.sqrt(eastward * eastward + northward * northward);
      if (isAtSea) act(exposure, wind, 0, f, out);
      else if (landAllRound) act(exposure, wind, 1, f, out);
      else if (isUniform) act(exposure, wind, weights[0]!, f, out);
      else {
        const direction = normalisedBearing(degrees(Math.atan2(-eastward, -northward)));
        act(exposure, wind, sectorWeight(weights, direction), f, out);
      }
    },
    greatestFactor(exposure, f) {
      let greatest = 0;
      for (const wind of SAMPLED_WINDS) {
        for (const weight of exposure.isAtSea ? [0] : SAMPLED_WEIGHTS) {
          act(exposure, wind, weight, f, work);
          greatest = Math.max(greatest, work.terrainFactor * work.gustFactor);
        }
      }
      return MARGIN * greatest * exposure.topographicFactor;
    },
  };
}

type Act = (exposure: Exposure, wind: number, weight: number, f: number, out: GroundSteps) => void;

function actOf(options: WindOptions): Act {
  const { seaDrag: law, turbulence, gustFactor } = options;
  const byLogLaws = options.landReduction === 'log-laws-500m';
  const fixedGust = gustFactor === 'turbulence' ? null : wmoGustFactor(CLASSES[gustFactor], 3, 600);
  const surface = { drag: NaN, roughness: NaN, factor: NaN, turbulence: NaN };
  return (exposure, wind, weight, f, out) => {
    const { isAtSea, landFactor, roughnessM } = exposure;
    const drag = seaDrag(wind, law);
    // In strong wind the drag is at its cap, so that most winds share one surface.
    if (drag !== surface.drag) {
      surface.drag = drag;
      surface.roughness = roughnessOfDrag(drag);
      // ln(10 / z0) of the sea, by which EN 1991-1-4 has both its mean wind and its turbulence.
      const depth = VON_KARMAN / Math.sqrt(drag);
      surface.factor = terrainFactor(surface.roughness) * depth;
      surface.turbulence = 1 / depth;
    }
    const settled = isAtSea ? 1 : byLogLaws ? logLawRatio(roughnessM, surface.roughness) : landFactor / surface.factor;
    let overSea = surface.turbulence;
    let overLand = exposure.landTurbulence;
    if (turbulence === 'esdu') {
      overSea = esdu(surface.roughness, wind, f);
      overLand = isAtSea ? 0 : esdu(roughnessM, wind * settled, f);
    }
    out.landWeight = weight;
    out.terrainFactor = 1 + weight * (settled - 1);
    out.turbulence = overSea + weight * (overLand - overSea);
    out.gustFactor = fixedGust ?? 1 + PEAK_FACTOR * out.turbulence;
  };
}

/** In a breeze the boundary layer is too shallow for the relation, and on the equator it has no depth. */
function esdu(roughness: number, wind: number, f: number): number {
  return esduTurbulence(roughness, Math.max(wind, LEAST_ESDU_WIND), Math.max(f, LEAST_ESDU_TURNING));
}
