import { z } from 'zod';

/** One value of a choice: what it is called, and where it comes from. */
export type ChoiceValue = {
  readonly value: string;
  readonly title: string;
  readonly source: string;
};

/** Something that can be chosen; the first value is the default. */
export type Choice<Key extends string> = {
  readonly key: Key;
  readonly title: string;
  /** What the choice decides, in one sentence. */
  readonly meaning: string;
  /** Why the default is the default. */
  readonly reason: string;
  readonly values: readonly ChoiceValue[];
};
/** A choice among published relations. */
export type WindChoice = Choice<keyof WindChoices>;

const oneOf = <const T extends readonly [string, ...string[]]>(values: T) =>
  z.enum(values, `Available: ${values.join(', ')}.`).default(values[0] as z.core.util.NoUndefined<T[number]>);

/** Published relations of the plain wind field, one choice each; a value left out takes its default, the first. */
export const WindChoices = z.strictObject({
  profile: oneOf(['holland-1980', 'holland-2010', 'willoughby-2006', 'willoughby-2006-exact-peak']),
  asymmetry: oneOf(['lin-chavas', 'schwerdt', 'georgiou', 'kepert', 'none']),
  inflow: oneOf(['phadke', 'zhang-uhlhorn']),
  surfaceFactor: oneOf(['franklin', 'powell-2003', 'holland-2010']),
  radiusSource: oneOf(['radii-64', 'relation']),
  radiusRelation: oneOf([
    'vickery-wadhera-2008',
    'vickery-wadhera-2008-gulf',
    'willoughby-rahn-2004',
    'willoughby-2006',
    'knaff-2015',
  ]),
  shapeRelation: oneOf(['vickery-wadhera-2008', 'powell-2005', 'holland-2008', 'willoughby-rahn-2004']),
  shapeSource: oneOf(['max-wind', 'relation']),
  windPressure: oneOf(['knaff-zehr-2007', 'atkinson-holliday-1977']),
  averaging: oneOf(['at-sea-1.05', 'at-sea-0.93']),
  outerWind: oneOf(['profile', 'radii-34']),
  quadrants: oneOf(['motion', 'radii']),
  decay: oneOf([
    'as-given',
    'kaplan-demaria',
    'vickery-gulf',
    'vickery-florida',
    'vickery-mid-atlantic',
    'vickery-new-england',
  ]),
  seaDrag: oneOf(['capped-2.4', 'capped-2.0', 'uncapped']),
  landReduction: oneOf(['en-1991', 'log-laws-500m']),
  fetch: oneOf(['by-direction', 'land-all-round']),
  turbulence: oneOf(['en-1991', 'esdu']),
  gustFactor: oneOf(['turbulence', 'wmo-at-sea', 'wmo-off-sea', 'wmo-off-land', 'wmo-in-land']),
});
export type WindChoices = z.infer<typeof WindChoices>;
