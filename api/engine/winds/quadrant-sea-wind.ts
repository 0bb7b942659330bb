import { degrees } from '../units.ts';
import { makeSeaWindSteps, type SeaWind } from './field-state.ts';
import { quadrantLogFactor } from './wind-radii.ts';

/**
 * A wind field whose outer part follows the radii of the quadrants.
 *
 * @param field The unfitted field.
 * @returns The field times its factor; the same up to the radius of maximum wind.
 * @source winds/wind-radii.ts.
 */
export function quadrantSeaWind(field: SeaWind): SeaWind {
  const peak = makeSeaWindSteps();
  const fitted =
    (unfitted: SeaWind['write']): SeaWind['write'] =>
    (state, r, sinBearing, cosBearing, out) => {
      unfitted(state, r, sinBearing, cosBearing, out);
      const { quadrants, rMax } = state;
      if (quadrants === null || r <= rMax) return;
      const wind = Math.hypot(out.eastward, out.northward);
      if (!(wind > 0)) return;
      field.write(state, rMax, sinBearing, cosBearing, peak);
      const gap = Math.log(Math.hypot(peak.eastward, peak.northward) / wind);
      const bearing = degrees(Math.atan2(sinBearing, cosBearing));
      const factor = Math.exp(quadrantLogFactor(quadrants, r / rMax, bearing, gap));
      out.eastward *= factor;
      out.northward *= factor;
    };
  return {
    write: fitted(field.write),
    explain: fitted(field.explain),
    bound: (state, r) => Math.exp(Math.max(0, ...(state.quadrants ?? []))) * field.bound(state, r),
  };
}
