import { ONE_MINUTE_OVER_TEN } from '../constants.ts';
import { DomainError } from '../errors.ts';
import { AMPLITUDE_REGIMES, type AmplitudeRegime } from '../ring/regimes.ts';

/** Published relations of the plain wind field, one choice each; the first value named is the default. */
export type WindOptions = {
  /** Radial profile of the vortex. */
  readonly profile: 'holland-1980' | 'holland-2010' | 'willoughby-2006' | 'willoughby-2006-exact-peak';
  /** How the storm's motion makes the two sides differ; `kepert` solves a linear boundary layer. */
  readonly asymmetry: 'lin-chavas' | 'schwerdt' | 'georgiou' | 'kepert' | 'none';
  /** Angle by which the surface wind turns inwards. */
  readonly inflow: 'phadke' | 'zhang-uhlhorn';
  /** 10-min wind at 10 m over open sea as a share of the gradient wind. */
  readonly surfaceFactor: 'franklin' | 'powell-2003' | 'holland-2010';
  /** What a missing radius of maximum wind is taken from first: 64-kt radii, or the relation straight away. */
  readonly radiusSource: 'radii-64' | 'relation';
  readonly radiusRelation:
    'vickery-wadhera-2008' | 'vickery-wadhera-2008-gulf' | 'willoughby-rahn-2004' | 'willoughby-2006' | 'knaff-2015';
  /** Relation for the shape B where the pressure sets the intensity. */
  readonly shapeRelation: 'vickery-wadhera-2008' | 'powell-2005' | 'holland-2008' | 'willoughby-rahn-2004';
  /** Whether B is fitted to the maximum wind (the pressure gives way), or taken from the relation (the wind gives way). */
  readonly shapeSource: 'max-wind' | 'relation';
  /** Central pressure where only a wind is given. */
  readonly windPressure: 'knaff-zehr-2007' | 'atkinson-holliday-1977';
  /** Maximum 1-min over 10-min wind at sea: 1.05, or one over 0.93. */
  readonly averaging: 'at-sea-1.05' | 'at-sea-0.93';
  /** Outer wind: as the profile has it, or drawn through the 34-kt radii. */
  readonly outerWind: 'profile' | 'radii-34';
  /** Asymmetry from the motion alone, or fitted to the radii of the quadrants as well. */
  readonly quadrants: 'motion' | 'radii';
  /** Weakening over land where the track itself gives no intensities after landfall. */
  readonly decay:
    'as-given' | 'kaplan-demaria' | 'vickery-gulf' | 'vickery-florida' | 'vickery-mid-atlantic' | 'vickery-new-england';
  readonly seaDrag: 'capped-2.4' | 'capped-2.0' | 'uncapped';
  /** Mean wind over settled land as a share of that over the sea. */
  readonly landReduction: 'en-1991' | 'log-laws-500m';
  /** Land upwind by direction, or as if there were land all round. */
  readonly fetch: 'by-direction' | 'land-all-round';
  readonly turbulence: 'en-1991' | 'esdu';
  /** Gust over mean from turbulence, or a class of WMO (2010). */
  readonly gustFactor: 'turbulence' | 'wmo-at-sea' | 'wmo-off-sea' | 'wmo-off-land' | 'wmo-in-land';
};

/** The defaults; why each is one is said where the choices are listed for people. */
export const DEFAULT_WIND_OPTIONS: WindOptions = {
  profile: 'holland-1980',
  asymmetry: 'lin-chavas',
  inflow: 'phadke',
  surfaceFactor: 'franklin',
  radiusSource: 'radii-64',
  radiusRelation: 'vickery-wadhera-2008',
  shapeRelation: 'vickery-wadhera-2008',
  shapeSource: 'max-wind',
  windPressure: 'knaff-zehr-2007',
  averaging: 'at-sea-1.05',
  outerWind: 'profile',
  quadrants: 'motion',
  decay: 'as-given',
  seaDrag: 'capped-2.4',
  landReduction: 'en-1991',
  fetch: 'by-direction',
  turbulence: 'en-1991',
  gustFactor: 'turbulence',
};

/** Every value of every choice, the default first. */
export const WIND_CHOICES: { readonly [K in keyof WindOptions]: readonly WindOptions[K][] } = {
  profile: ['holland-1980', 'holland-2010', 'willoughby-2006', 'willoughby-2006-exact-peak'],
  asymmetry: ['lin-chavas', 'schwerdt', 'georgiou', 'kepert', 'none'],
  inflow: ['phadke', 'zhang-uhlhorn'],
  surfaceFactor: ['franklin', 'powell-2003', 'holland-2010'],
  radiusSource: ['radii-64', 'relation'],
  radiusRelation: [
    'vickery-wadhera-2008',
    'vickery-wadhera-2008-gulf',
    'willoughby-rahn-2004',
    'willoughby-2006',
    'knaff-2015',
  ],
  shapeRelation: ['vickery-wadhera-2008', 'powell-2005', 'holland-2008', 'willoughby-rahn-2004'],
  shapeSource: ['max-wind', 'relation'],
  windPressure: ['knaff-zehr-2007', 'atkinson-holliday-1977'],
  averaging: ['at-sea-1.05', 'at-sea-0.93'],
  outerWind: ['profile', 'radii-34'],
  quadrants: ['motion', 'radii'],
  decay: [
    'as-given',
    'kaplan-demaria',
    'vickery-gulf',
    'vickery-florida',
    'vickery-mid-atlantic',
    'vickery-new-england',
  ],
  seaDrag: ['capped-2.4', 'capped-2.0', 'uncapped'],
  landReduction: ['en-1991', 'log-laws-500m'],
  fetch: ['by-direction', 'land-all-round'],
  turbulence: ['en-1991', 'esdu'],
  gustFactor: ['turbulence', 'wmo-at-sea', 'wmo-off-sea', 'wmo-off-land', 'wmo-in-land'],
};

/** Names of the choices, in the order in which they are listed for people. */
export const WIND_CHOICE_NAMES = Object.keys(WIND_CHOICES) as readonly (keyof WindOptions)[];

/**
 * Maximum 1-min wind over the 10-min mean at sea.
 *
 * @param averaging The choice.
 * @returns Factor [1].
 * @source Harper, Kepert & Ginger (2010), WMO/TD-1555: 1.05 is the table's 60 s over 600 s at sea, one over 0.93 the
 *         guideline's own conversion; from memory.
 */
export function oneMinuteOverTen(averaging: WindOptions['averaging']): number {
  return averaging === 'at-sea-1.05' ? ONE_MINUTE_OVER_TEN : 1 / 0.93;
}

const OF_THE_SEA_WIND = [
  'profile',
  'asymmetry',
  'inflow',
  'surfaceFactor',
  'shapeSource',
  'outerWind',
  'quadrants',
] as const satisfies readonly (keyof WindOptions)[];
const OF_THE_GROUND = [
  'seaDrag',
  'landReduction',
  'fetch',
  'turbulence',
  'gustFactor',
] as const satisfies readonly (keyof WindOptions)[];

/**
 * Whether the wind over open sea follows the default relations, for which there is a fast kernel. The choices that act
 * while the track is resolved are not among them.
 *
 * @param options The choices.
 * @returns True when every choice that acts in the open-sea wind is the default.
 * @source Arrangement only.
 */
export function usesDefaultSeaWind(options: WindOptions): boolean {
  return OF_THE_SEA_WIND.every((name) => options[name] === DEFAULT_WIND_OPTIONS[name]);
}

/**
 * Whether the ground acts by the default relations.
 *
 * @param options The choices.
 * @returns True when every choice that acts on the way from the open-sea wind to the gust is the default.
 * @source Arrangement only.
 */
export function usesDefaultGround(options: WindOptions): boolean {
  return OF_THE_GROUND.every((name) => options[name] === DEFAULT_WIND_OPTIONS[name]);
}

/** Choices of the chain that the person running it may make. */
export type ChainOptions = WindOptions & {
  /** Whether a reported wind or the central pressure sets the intensity where both are given. */
  readonly intensity: 'pressure' | 'wind';
  /** Whether the maximum wind already holds vortex peaks: at wind fixes (auto), never (mean), always (peak). */
  readonly anchor: 'auto' | 'mean' | 'peak';
  readonly mesovortices: boolean;
  /** Which strengths of the vortices are drawn from. */
  readonly regime: AmplitudeRegime;
  /** Step of the outer time grid [s]. */
  readonly timeStepS: number;
  /** Step near the centre [s]; not smaller than the outer step = no refinement. */
  readonly innerTimeStepS: number;
};

/** What holds where nothing is chosen. */
export const DEFAULT_OPTIONS: ChainOptions = {
  ...DEFAULT_WIND_OPTIONS,
  intensity: 'pressure',
  anchor: 'auto',
  mesovortices: true,
  regime: 'mixed',
  timeStepS: 300,
  innerTimeStepS: 60,
};

/**
 * Refuses steps that make no sense and values of a choice that there are not.
 *
 * @param options The options; steps [s].
 * @throws {DomainError} when a step is not in 5..3600 s, or a choice is none of its values.
 * @source Rule of this product.
 */
export function requireOptions(options: ChainOptions): void {
  for (const name of WIND_CHOICE_NAMES) {
    const values: readonly string[] = WIND_CHOICES[name];
    if (!values.includes(options[name])) throw new DomainError(name, options[name], `one of ${values.join(', ')}`);
  }
  if (!AMPLITUDE_REGIMES.includes(options.regime)) {
    throw new DomainError('regime', options.regime, `one of ${AMPLITUDE_REGIMES.join(', ')}`);
  }
  for (const name of ['timeStepS', 'innerTimeStepS'] as const) {
    const step = options[name];
    if (!(step >= 5 && step <= 3600)) throw new DomainError(name, step, 'in 5..3600 s');
  }
}
