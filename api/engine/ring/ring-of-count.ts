import { dominantMode } from './amplitude.ts';
import { STABILITY_TABLE } from './stability-table.ts';
import { ringShape, smoothRingModes } from './stability.ts';

/** A ring by its width over the radius of maximum wind and its eye over average vorticity [1]. */
export type RingChoice = { readonly ringWidth: number; readonly eyeRatio: number };

/**
 * The ring nearest to a given one that breaks into a given number of vortices.
 *
 * @param ring The ring.
 * @param m    Number of vortices.
 * @returns The ring itself where m grows fastest on it; else the nearest one of the stability table on which it does, width
 *          and eye ratio each measured by the table's range, the thinner ring and then the emptier eye first on a tie;
 *          null when there is none.
 * @throws {DomainError} when the width or the eye ratio is not finite.
 * @source Linear growth on smooth rings: STABILITY_TABLE.
 */
export function nearestRingOf(ring: RingChoice, m: number): RingChoice | null {
  const { delta, gamma } = ringShape(ring.ringWidth, ring.eyeRatio);
  if (dominantMode(smoothRingModes(delta, gamma))?.m === m) return ring;
  const { widthFraction, eyeRatio, wavenumber } = STABILITY_TABLE;
  const widthSpan = widthFraction.at(-1)! - widthFraction[0]!;
  const eyeSpan = eyeRatio.at(-1)! - eyeRatio[0]!;
  let nearest: RingChoice | null = null;
  let least = Infinity;
  widthFraction.forEach((width, column) => {
    eyeRatio.forEach((eye, row) => {
      if (wavenumber[row]![column] !== m) return;
      const distance = Math.hypot((width - (1 - delta)) / widthSpan, (eye - gamma) / eyeSpan);
      // Equal distances may differ in their last bits.
      if (distance >= least - 1e-9) return;
      least = distance;
      nearest = { ringWidth: width, eyeRatio: eye };
    });
  });
  return nearest;
}

/**
 * Ring widths that break into a given number of vortices at an eye ratio.
 *
 * @param eyeRatio Eye over average vorticity [1]; the nearest one of the stability table is looked up.
 * @param m        Number of vortices.
 * @returns Thinnest and widest such ring of the table, width over the radius of maximum wind [1]; null when none is.
 * @source Linear growth on smooth rings: STABILITY_TABLE.
 */
export function widthsOf(eyeRatio: number, m: number): { thinnest: number; widest: number } | null {
  const { widthFraction, eyeRatio: eyes, wavenumber } = STABILITY_TABLE;
  const row = eyes.reduce(
    (best, eye, k) => (Math.abs(eye - eyeRatio) < Math.abs(eyes[best]! - eyeRatio) ? k : best),
    0,
  );
  const widths = widthFraction.filter((_, column) => wavenumber[row]![column] === m);
  return widths.length === 0 ? null : { thinnest: widths[0]!, widest: widths.at(-1)! };
}
