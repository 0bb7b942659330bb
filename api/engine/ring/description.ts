import { DomainError } from '../errors.ts';
import { amplitudeLaw, dominantMode, inlandFade, intensitySwitch } from './amplitude.ts';
import { ringShape, sharpRingModes, smoothRingModes, type RingMode, type SharpRingMode } from './stability.ts';

const LIFETIME_TURNS = 30;

/** What a ring does, in SI. Fields that need a growing wave are null when none grows. */
export type RingDescription = {
  readonly wavenumber: number | null;
  readonly amplitude: number;
  readonly switch: number;
  readonly averageVorticity: number;
  readonly eyeVorticity: number;
  readonly ringVorticity: number;
  readonly growth: number | null;
  readonly eFold: number | null;
  readonly pattern: number | null;
  readonly patternPeriod: number | null;
  readonly passInterval: number | null;
  readonly lifetime: number;
  readonly orbitRadius: number;
  readonly coreRadius: number | null;
  readonly circulation: number | null;
  readonly modes: readonly RingMode[];
  readonly sharpModes: readonly SharpRingMode[];
};

/**
 * Describes the vortices a ring of given wind and size would break into.
 *
 * @param ring Axisymmetric 1-min maximum wind [m s⁻¹] > 0, its radius [m] > 0, ring width over that radius [1], eye
 *             over average vorticity [1], hours inland [h] ≥ 0.
 * @returns Vorticities and rates [s⁻¹], times [s], lengths [m], circulation of one vortex at full roll-up [m² s⁻¹].
 *          The modes' rates are in [s⁻¹] too (discriminants stay without unit).
 * @throws {DomainError} when a value is outside its range.
 * @source Schubert et al. (1999), J. Atmos. Sci. 56, 1197–1223, for the ring; sizes and lifetime from own runs.
 */
export function describeRing(ring: {
  maxWind: number;
  radiusOfMaxWind: number;
  widthFraction: number;
  eyeRatio: number;
  hoursInland: number;
}): RingDescription {
  const { maxWind, radiusOfMaxWind: rmw, hoursInland } = ring;
  if (!(maxWind > 0 && maxWind < Infinity)) throw new DomainError('maximum wind', maxWind, 'above 0 m/s');
  if (!(rmw > 0 && rmw < Infinity)) throw new DomainError('radius of maximum wind', rmw, 'above 0 m');
  if (!(hoursInland >= 0)) throw new DomainError('hours inland', hoursInland, '≥ 0 h');
  const { delta, gamma } = ringShape(ring.widthFraction, ring.eyeRatio);
  const zav = (2 * maxWind) / rmw;
  const scaled = smoothRingModes(delta, gamma);
  const best = dominantMode(scaled);
  const m = best?.m ?? null;
  const growth = best ? best.growth * zav : null;
  const pattern = best?.pattern != null ? best.pattern * zav : null;
  const onOff = intensitySwitch(maxWind, rmw) * inlandFade(hoursInland);
  return {
    wavenumber: m,
    amplitude: amplitudeLaw(scaled) * onOff,
    switch: onOff,
    averageVorticity: zav,
    eyeVorticity: gamma * zav,
    ringVorticity: (zav * (1 - gamma * delta * delta)) / (1 - delta * delta),
    growth,
    eFold: growth === null ? null : 1 / growth,
    pattern,
    patternPeriod: pattern === null ? null : (2 * Math.PI) / pattern,
    passInterval: pattern === null || m === null ? null : (2 * Math.PI) / (m * pattern),
    lifetime: LIFETIME_TURNS / zav,
    orbitRadius: rmw * Math.sqrt((1 + delta * delta) / 2),
    coreRadius: m === null ? null : rmw * Math.sqrt((1 - delta * delta) / m),
    circulation: m === null ? null : (Math.PI * rmw * rmw * zav * (1 - gamma * delta * delta)) / m,
    modes: scaled.map((mode) => ({
      m: mode.m,
      growth: mode.growth * zav,
      pattern: mode.pattern === null ? null : mode.pattern * zav,
    })),
    sharpModes: sharpRingModes(delta, gamma).map((mode) => ({
      ...mode,
      innerEdge: mode.innerEdge * zav,
      outerEdge: mode.outerEdge * zav,
      growth: mode.growth * zav,
      frequency: mode.frequency.map((nu) => nu * zav),
    })),
  };
}
