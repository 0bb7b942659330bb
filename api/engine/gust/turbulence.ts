import { REFERENCE_HEIGHT } from '../constants.ts';
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
