import { REFERENCE_HEIGHT, VON_KARMAN } from '../constants.ts';
import { DomainError } from '../errors.ts';

/**
 * Along-wind turbulence intensity in neutral flow.
 *
 * @param z0     Roughness length [m], 0 < z0 < height.
 * @param height Height above ground [m].
 * @returns Standard deviation over mean wind [1].
 * @throws {DomainError} when the roughness length is outside its range.
 * @source EN 1991-1-4:2005, eq. 4.7 with kI = 1 and co = 1.
 */
export function turbulenceIntensity(z0: number, height = REFERENCE_HEIGHT): number {
  if (!(z0 > 0 && z0 < height)) throw new DomainError('roughness length', z0, `in (0, ${height}) m`);
  return 1 / Math.log(height / z0);
}

/**
 * Along-wind turbulence intensity in neutral flow over long uniform terrain. Less than `turbulenceIntensity` over rough
 * ground, more over smooth.
 *
 * @param z0     Roughness length [m], 0 < z0 < height.
 * @param wind   Mean wind at the height [m s⁻¹], > 0.
 * @param f      Coriolis parameter, a magnitude [s⁻¹], > 0.
 * @param height Height above ground [m], below a sixth of the friction velocity over f.
 * @returns Standard deviation over mean wind [1].
 * @throws {DomainError} when roughness length, wind or f is outside its range, or the height beyond the boundary layer.
 * @source ESDU 85020 form as in Vickery & Skerlj (2005), J. Struct. Eng. 131, 825–832; constants from memory.
 */
export function esduTurbulence(z0: number, wind: number, f: number, height = REFERENCE_HEIGHT): number {
  if (!(z0 > 0 && z0 < height)) throw new DomainError('roughness length', z0, `in (0, ${height}) m`);
  if (!(wind > 0)) throw new DomainError('wind', wind, '> 0 m/s');
  if (!(f > 0)) throw new DomainError('f', f, '> 0 1/s');
  const frictionShare = VON_KARMAN / Math.log(height / z0);
  const friction = frictionShare * wind;
  const depthLeft = 1 - (6 * f * height) / friction;
  if (!(depthLeft > 0)) throw new DomainError('height', height, `below ${friction / (6 * f)} m`);
  const shape = (0.538 + 0.09 * Math.log(height / z0)) ** (depthLeft ** 16);
  return (frictionShare * 7.5 * depthLeft * shape) / (1 + 0.156 * Math.log(friction / (f * z0)));
}
