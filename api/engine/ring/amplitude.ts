import { DomainError } from '../errors.ts';
import { GROWTH_FLOOR, type RingMode } from './stability.ts';

const AMPLITUDE_CAP = 0.5;
const WIND_ONSET = 33;
const WIND_SPAN = 17;
const RADIUS_END = 80_000;
const RADIUS_SPAN = 40_000;
const INLAND_HOURS = 2;

/**
 * Vortex wind amplitude of a ring before its regime and strength are drawn: local 1-min maximum over the mean maximum,
 * less one, per unit of the drawn factor.
 *
 * @param modes Growth of waves m = 3..12 [zav].
 * @returns Amplitude A1 [1] in 0..0.5; 0 when no wave reaches the growth floor.
 * @source Trapping scaling 4 sigma / m, weighted with the squared growth; fitted to barotropic runs (own, rms 0.02).
 */
export function amplitudeLaw(modes: readonly RingMode[]): number {
  let weight = 0;
  let sum = 0;
  for (const { m, growth } of modes) {
    if (growth < GROWTH_FLOOR) continue;
    const square = growth * growth;
    weight += square;
    sum += square * ((4 * growth) / m);
  }
  return weight > 0 ? Math.min(AMPLITUDE_CAP, sum / weight) : 0;
}

/**
 * The wave that grows fastest.
 *
 * @param modes Growth of waves m = 3..12 [zav].
 * @returns The mode of largest growth, the lower m on a tie; null when none reaches the growth floor.
 * @source Linear theory: the fastest wave sets the number of vortices at roll-up.
 */
export function dominantMode(modes: readonly RingMode[]): RingMode | null {
  let best: RingMode | null = null;
  for (const mode of modes) if (mode.growth >= GROWTH_FLOOR && (!best || mode.growth > best.growth)) best = mode;
  return best;
}

/**
 * Share of the vortex layer that is switched on for a storm of given intensity and size, over water.
 *
 * @param vmax Axisymmetric or resolved 1-min maximum wind [m s⁻¹].
 * @param rmw  Radius of maximum wind [m].
 * @returns Factor in 0..1 [1]: 0 up to 33 m/s or from 80 km, 1 from 50 m/s and up to 40 km.
 * @throws {DomainError} when either argument is not finite.
 * @source Judgement.
 */
export function intensitySwitch(vmax: number, rmw: number): number {
  if (!Number.isFinite(vmax)) throw new DomainError('vmax', vmax, 'a finite speed in m/s');
  if (!Number.isFinite(rmw)) throw new DomainError('rmw', rmw, 'a finite radius in m');
  return unit((vmax - WIND_ONSET) / WIND_SPAN) * unit((RADIUS_END - rmw) / RADIUS_SPAN);
}

/**
 * Fading of the vortex layer after landfall, when no convection rebuilds the ring.
 *
 * @param hoursInland Hours since the centre crossed from sea onto land [h], ≥ 0.
 * @returns exp(-hours / 2) [1].
 * @source Judgement.
 */
export function inlandFade(hoursInland: number): number {
  return Math.exp(-hoursInland / INLAND_HOURS);
}

/**
 * Pattern speed used where the storm's wave does not grow, so that the phase stays continuous.
 *
 * @param gamma Eye vorticity over average vorticity [1].
 * @param m     Azimuthal wavenumber [1], ≥ 1.
 * @returns Angular velocity of the pattern [zav].
 * @source Mean of the two edge waves of the sharp ring; Schubert et al. (1999), J. Atmos. Sci. 56, 1197–1223.
 */
export function neutralPattern(gamma: number, m: number): number {
  return (1 + (gamma * (m - 1)) / m) / 4;
}

function unit(x: number): number {
  return Math.min(Math.max(x, 0), 1);
}
