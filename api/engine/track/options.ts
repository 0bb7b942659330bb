import { DomainError } from '../errors.ts';

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

/** Choices of the chain that the person running it may make. */
export type ChainOptions = WindOptions & {
  /** Whether a reported wind or the central pressure sets the intensity where both are given. */
  readonly intensity: 'pressure' | 'wind';
  /** Whether the maximum wind already holds vortex peaks: at wind fixes (auto), never (mean), always (peak). */
  readonly anchor: 'auto' | 'mean' | 'peak';
  readonly mesovortices: boolean;
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
  timeStepS: 300,
  innerTimeStepS: 60,
};

/**
 * Refuses steps that make no sense.
 *
 * @param options The options; steps [s].
 * @throws {DomainError} when a step is not in 5..3600 s.
 * @source Rule of this product.
 */
export function requireOptions({ timeStepS, innerTimeStepS }: ChainOptions): void {
  if (!(timeStepS >= 5 && timeStepS <= 3600)) throw new DomainError('timeStepS', timeStepS, 'in 5..3600 s');
  if (!(innerTimeStepS >= 5 && innerTimeStepS <= 3600)) {
    throw new DomainError('innerTimeStepS', innerTimeStepS, 'in 5..3600 s');
  }
}
