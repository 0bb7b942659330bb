import { DomainError } from '../errors.ts';

/** Exponent that gives the plain profile [1]. */
const PLAIN_EXPONENT = 0.5;

/** Core of a surface wind profile: its peak and how sharp it is. */
export type SurfaceCore = {
  /** Wind at the radius of maximum wind [m s⁻¹], in the averaging time and at the height the profile shall have. */
  readonly maxWind: number;
  /** Radius of maximum wind [m]. */
  readonly rMax: number;
  /** Shape parameter of the surface wind [1]. */
  readonly bs: number;
};

/** Parameters of a surface wind profile. */
export type SurfaceProfile = SurfaceCore & {
  /** Radius from which on the exponent is the outer one [m], > rMax. Without effect where that is 0.5. */
  readonly outerRadius: number;
  /** Exponent there and beyond [1]; 0.5 leaves the profile plain. */
  readonly outerExponent: number;
};

/**
 * Wind of the revised Holland profile. It is a surface profile: no boundary-layer factor belongs on it.
 *
 * @param r       Distance from the centre [m]; below 1 m taken as 1 m.
 * @param profile Its parameters: maxWind ≥ 0, 0 < rMax < outerRadius, bs > 0, outerExponent > 0.
 * @returns Wind [m s⁻¹] in the averaging time of `maxWind`. NaN for NaN.
 * @throws {DomainError} when a parameter is outside its range.
 * @source Holland, Belanger & Fritz (2010), Mon. Wea. Rev. 138, 4393–4401: exponent 0.5 up to rMax, then linear in radius
 *         to the outer observation; from memory. Constant beyond it: product rule.
 */
export function hollandSurfaceWind(r: number, profile: SurfaceProfile): number {
  const { maxWind, rMax } = requireCore(profile);
  const { outerRadius, outerExponent } = profile;
  if (!(outerRadius > rMax)) throw new DomainError('outerRadius', outerRadius, `> rMax, ${rMax} m`);
  if (!(outerExponent > 0)) throw new DomainError('outerExponent', outerExponent, '> 0');
  const distance = r < 1 ? 1 : r;
  const share = distance <= rMax ? 0 : distance < outerRadius ? (distance - rMax) / (outerRadius - rMax) : 1;
  return maxWind * shape(distance, profile) ** (PLAIN_EXPONENT + share * (outerExponent - PLAIN_EXPONENT));
}

/**
 * Outer exponent with which the profile passes through a wind observed outside the core.
 *
 * @param core        Peak, radius and shape of the profile: maxWind > 0, rMax > 0, bs > 0.
 * @param outerRadius Where the wind was observed [m], > rMax.
 * @param outerWind   The wind there [m s⁻¹], more than 0 and less than maxWind, of the same averaging time and height.
 * @returns Exponent [1], > 0, not clamped; above 0.5 where the wind falls off faster than in the plain profile.
 * @throws {DomainError} when a parameter is outside its range.
 * @source Holland, Belanger & Fritz (2010), Mon. Wea. Rev. 138, 4393–4401, profile solved for the exponent; from memory.
 */
export function outerExponentThrough(core: SurfaceCore, outerRadius: number, outerWind: number): number {
  const { maxWind, rMax } = requireCore(core);
  if (!(outerRadius > rMax)) throw new DomainError('outerRadius', outerRadius, `> rMax, ${rMax} m`);
  if (!(outerWind > 0 && outerWind < maxWind)) {
    throw new DomainError('outerWind', outerWind, `more than 0 and less than maxWind, ${maxWind} m/s`);
  }
  return Math.log(outerWind / maxWind) / Math.log(shape(outerRadius, core));
}

/** x e^(1 - x) with x = (rMax / r)^bs: 1 at rMax, less on both sides. */
function shape(r: number, { rMax, bs }: SurfaceCore): number {
  const x = (rMax / r) ** bs;
  return x * Math.exp(1 - x);
}

function requireCore(core: SurfaceCore): SurfaceCore {
  if (!(core.maxWind >= 0)) throw new DomainError('maxWind', core.maxWind, '≥ 0 m/s');
  if (!(core.rMax > 0)) throw new DomainError('rMax', core.rMax, '> 0 m');
  if (!(core.bs > 0)) throw new DomainError('bs', core.bs, '> 0');
  return core;
}
