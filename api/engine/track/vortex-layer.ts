import { amplitudeLaw, dominantMode, inlandFade, intensitySwitch, neutralPattern } from '../ring/amplitude.ts';
import { MEAN_AMPLITUDE } from '../ring/draws.ts';
import { ringShape, smoothRingModes, type RingMode } from '../ring/stability.ts';
import { symmetricWind } from '../winds/vortex-fit.ts';
import type { Anchor } from './fixes.ts';
import { DEFAULT_WIND_OPTIONS, oneMinuteOverTen, type WindOptions } from './options.ts';

/** What the vortex layer needs to know of a fix. */
export type LayerInput = {
  readonly maxWind: number;
  readonly speed: number;
  readonly rMax: number;
  readonly ringWidth: number;
  readonly eyeRatio: number;
  readonly hoursInland: number;
  readonly anchor: Anchor;
};

/** The vortex layer at a fix; after anchoring. */
export type LayerFix = {
  readonly amplitude: number;
  readonly maxWind: number;
  readonly axisymmetricMax: number;
  readonly averageVorticity: number;
  readonly pattern: number | null;
};

/**
 * Vortex amplitude, anchored maximum and pattern speed at every fix, and the number of vortices of the storm.
 *
 * @param fixes Settled fixes; winds [m s⁻¹], radius [m], hours [h].
 * @param on    False leaves every amplitude 0 and the wavenumber null.
 * @param averaging Which factor leads from the 1-min to the 10-min wind.
 * @param observed Number of vortices seen; null = the ring's own.
 * @param meanStrength Mean strength factor of the draws, divided out where the maximum holds vortex peaks [1].
 * @returns One entry per fix; the wavenumber is null when no ring grows, and then every pattern is null.
 * @source Smooth-ring growth (Schubert et al. 1999 with smooth shoulders) and the amplitude law of ring/amplitude.ts.
 */
export function layVortices(
  fixes: readonly LayerInput[],
  on: boolean,
  averaging: WindOptions['averaging'] = DEFAULT_WIND_OPTIONS.averaging,
  observed: number | null = null,
  meanStrength: number = MEAN_AMPLITUDE,
): { fixes: LayerFix[]; wavenumber: number | null } {
  const solved = new Map<string, RingMode[]>();
  const modesOf = ({ ringWidth, eyeRatio }: LayerInput): RingMode[] => {
    const { delta, gamma } = ringShape(ringWidth, eyeRatio);
    const key = `${delta} ${gamma}`;
    const modes = solved.get(key) ?? smoothRingModes(delta, gamma);
    solved.set(key, modes);
    return modes;
  };
  const modes = on ? fixes.map(modesOf) : [];
  const own = on ? stormWavenumber(fixes, modes) : null;
  const wavenumber = own === null ? null : (observed ?? own);
  return {
    wavenumber,
    fixes: fixes.map((fix, i) => {
      const amplitude = on
        ? amplitudeLaw(modes[i]!) * intensitySwitch(axisymmetricWind(fix.maxWind, fix.speed, averaging), fix.rMax)
        : 0;
      const held = fix.anchor === 'peak' ? 1 + meanStrength * amplitude * inlandFade(fix.hoursInland) : 1;
      const maxWind = fix.maxWind / held;
      const axisymmetricMax = axisymmetricWind(maxWind, fix.speed, averaging);
      const averageVorticity = (2 * axisymmetricMax) / fix.rMax;
      const pattern = wavenumber === null ? null : averageVorticity * patternShare(fix, modes[i]!, wavenumber);
      return { amplitude, maxWind, axisymmetricMax, averageVorticity, pattern };
    }),
  };
}

/**
 * Maximum 1-min wind around the ring with the storm's motion taken out.
 *
 * @param maxWind Maximum 1-min wind, motion included [m s⁻¹].
 * @param speed   Translation speed [m s⁻¹].
 * @param averaging Which factor leads from the 1-min to the 10-min wind.
 * @returns Axisymmetric 1-min maximum [m s⁻¹].
 * @source Lin & Chavas (2012) motion share, as in symmetricWind.
 */
export function axisymmetricWind(maxWind: number, speed: number, averaging: WindOptions['averaging']): number {
  return oneMinuteOverTen(averaging) * symmetricWind(maxWind, speed, averaging);
}

function patternShare(fix: LayerInput, modes: readonly RingMode[], m: number): number {
  const own = modes.find((mode) => mode.m === m)?.pattern ?? null;
  return own ?? neutralPattern(ringShape(fix.ringWidth, fix.eyeRatio).gamma, m);
}

/** The fastest wave at the fix of largest maximum wind among those whose ring grows; the first such fix on a tie. */
function stormWavenumber(fixes: readonly LayerInput[], modes: readonly (readonly RingMode[])[]): number | null {
  let strongest = -Infinity;
  let wavenumber: number | null = null;
  fixes.forEach(({ maxWind }, i) => {
    const fastest = dominantMode(modes[i]!);
    if (!fastest || maxWind <= strongest) return;
    strongest = maxWind;
    wavenumber = fastest.m;
  });
  return wavenumber;
}
