import { MOTION_SHARE, MOTION_TURN_DEG } from '../constants.ts';
import { radians } from '../units.ts';

/**
 * Uniform wind that the motion of the storm adds to the vortex.
 *
 * @param speed   Translation speed [m s⁻¹], ≥ 0.
 * @param heading Bearing TOWARDS which the centre moves [deg].
 * @param sign    1 in the northern, -1 in the southern hemisphere [1].
 * @returns Eastward and northward component [m s⁻¹].
 * @source Lin & Chavas (2012), J. Geophys. Res. 117, D09120: 0.55 of the speed, turned 20 degrees cyclonically; from memory.
 */
export function motionWind(speed: number, heading: number, sign: 1 | -1): { u: number; v: number } {
  const towards = radians(heading - MOTION_TURN_DEG * sign);
  const share = MOTION_SHARE * speed;
  return { u: share * Math.sin(towards), v: share * Math.cos(towards) };
}
