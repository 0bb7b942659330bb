import type { Derivation, TrackChange } from './derivations.ts';

const plain = (value: number): string => String(Number(Math.abs(value).toFixed(1)));
const percent = (factor: number): string => `${factor < 1 ? '−' : '+'}${plain(100 * (factor - 1))} %`;

/** "40 km right, wind +10 %"; empty when nothing is changed. */
export const changeWords = ({ offsetKm, headingDeg, windFactor, speedFactor, radiusFactor }: TrackChange): string =>
  [
    offsetKm !== 0 && `${plain(offsetKm)} km ${offsetKm > 0 ? 'right' : 'left'}`,
    headingDeg !== 0 && `turned ${plain(headingDeg)}° ${headingDeg > 0 ? 'clockwise' : 'anticlockwise'}`,
    windFactor !== 1 && `wind ${percent(windFactor)}`,
    speedFactor !== 1 && `speed ${percent(speedFactor)}`,
    radiusFactor !== 1 && `radii ${percent(radiusFactor)}`,
  ]
    .filter((part) => part !== false)
    .join(', ');

/** "40 km right", or "member 3 of 10, seed 7": what tells a variant from the track it was made from. */
export const variantWords = ({ change, ensemble }: Pick<Derivation, 'change' | 'ensemble'>): string =>
  ensemble === null ? changeWords(change) : `member ${ensemble.member} of ${ensemble.members}, seed ${ensemble.seed}`;

/** Where a scenario comes from, in words; a version after the first was edited by hand. */
export const derivationWords = (derivation: Derivation, versionNumber: number): string => {
  const { name, version, change, ensemble } = derivation;
  const changed = changeWords(change) || 'nothing changed';
  const what = ensemble === null ? changed : `${variantWords(derivation)}: ${changed}`;
  return `Made from ${name}, version ${version}: ${what}${versionNumber > 1 ? '; edited since' : ''}.`;
};
