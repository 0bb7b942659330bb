/** Metres per second in one knot: 1852 m / 3600 s, exact by definition. */
export const MS_PER_KNOT = 1852 / 3600;
/** Metres in one nautical mile, exact by definition. */
export const METRES_PER_NAUTICAL_MILE = 1852;
/** Metres per second in one mile an hour: 1609.344 m / 3600 s, exact by definition. */
export const MS_PER_MPH = 1609.344 / 3600;
/** Metres per second in one kilometre an hour, exact by definition. */
export const MS_PER_KMH = 1 / 3.6;
/** Pascals in one hectopascal. */
export const PA_PER_HPA = 100;
/** Pascals in one inch of mercury at 0 °C, conventional value. */
export const PA_PER_INCH_OF_MERCURY = 3386.389;

/**
 * Knots to metres per second.
 *
 * @param knots Speed [kt].
 * @returns Speed [m s⁻¹].
 * @source Definition.
 */
export const msFromKnots = (knots: number): number => knots * MS_PER_KNOT;
/**
 * Metres per second to knots.
 *
 * @param ms Speed [m s⁻¹].
 * @returns Speed [kt].
 * @source Definition.
 */
export const knotsFromMs = (ms: number): number => ms / MS_PER_KNOT;
/**
 * Degrees to radians.
 *
 * @param degrees Angle [deg].
 * @returns Angle [rad].
 * @source Definition.
 */
export const radians = (degrees: number): number => (degrees * Math.PI) / 180;
/**
 * Radians to degrees.
 *
 * @param rad Angle [rad].
 * @returns Angle [deg].
 * @source Definition.
 */
export const degrees = (rad: number): number => (rad * 180) / Math.PI;
