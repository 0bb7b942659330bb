import { legAt } from './position.ts';
import type { ResolvedFix } from './fixes.ts';

type PatternFix = Pick<ResolvedFix, 'timeS' | 'latitude' | 'longitude' | 'patternRadPerS'>;

/**
 * Angle turned by the pattern up to each fix: the exact integral of a rate that is linear between fixes.
 *
 * @param fixes Resolved fixes.
 * @returns Angles from the first fix on [rad], one a fix.
 * @source Definition.
 */
export function patternAngles(fixes: readonly PatternFix[]): number[] {
  const angles = [0];
  for (let i = 0; i + 1 < fixes.length; i++) {
    const a = fixes[i]!;
    const b = fixes[i + 1]!;
    const mean = ((a.patternRadPerS ?? 0) + (b.patternRadPerS ?? 0)) / 2;
    angles.push(angles[i]! + mean * (b.timeS - a.timeS));
  }
  return angles;
}

/**
 * Angle turned by the pattern up to a time.
 *
 * @param fixes  Resolved fixes.
 * @param angles Angles at the fixes from patternAngles [rad].
 * @param timeS  Time [s], between the first and the last fix.
 * @returns The angle [rad].
 * @source Definition.
 */
export function patternAngleAt(fixes: readonly PatternFix[], angles: readonly number[], timeS: number): number {
  const i = legAt(fixes, timeS);
  const from = fixes[i]!.patternRadPerS ?? 0;
  const passed = timeS - fixes[i]!.timeS;
  return angles[i]! + 0.5 * (from + patternRateAt(fixes, timeS)) * passed;
}

/**
 * Rate of the pattern at a time.
 *
 * @param fixes Resolved fixes.
 * @param timeS Time [s], between the first and the last fix.
 * @returns Angular velocity [rad s⁻¹], linear between fixes; 0 where the layer is off.
 * @source Definition.
 */
export function patternRateAt(fixes: readonly PatternFix[], timeS: number): number {
  const i = legAt(fixes, timeS);
  const from = fixes[i]!.patternRadPerS ?? 0;
  const to = fixes[i + 1]!.patternRadPerS ?? 0;
  const passed = timeS - fixes[i]!.timeS;
  return from + ((to - from) * passed) / (fixes[i + 1]!.timeS - fixes[i]!.timeS);
}
