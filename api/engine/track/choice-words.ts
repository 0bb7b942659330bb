import type { EngineNotice } from './fixes.ts';
import { DEFAULT_WIND_OPTIONS, WIND_CHOICE_NAMES, type WindOptions } from './options.ts';

type Words = {
  readonly [K in keyof WindOptions]: {
    readonly title: string;
    readonly values: Readonly<Record<WindOptions[K], string>>;
  };
};

const WORDS: Words = {
  profile: {
    title: 'radial profile',
    values: {
      'holland-1980': 'Holland (1980)',
      'holland-2010': 'Holland et al. (2010)',
      'willoughby-2006': 'Willoughby et al. (2006)',
      'willoughby-2006-exact-peak': 'Willoughby et al. (2006), maximum exactly at the radius of maximum wind',
    },
  },
  asymmetry: {
    title: 'asymmetry',
    values: {
      'lin-chavas': 'Lin & Chavas (2012)',
      schwerdt: 'Schwerdt et al. (1979)',
      georgiou: 'Georgiou (1985)',
      kepert: 'boundary layer of Kepert (2001)',
      none: 'none',
    },
  },
  inflow: {
    title: 'inflow angle',
    values: { phadke: 'Phadke et al. (2003)', 'zhang-uhlhorn': 'Zhang & Uhlhorn (2012)' },
  },
  surfaceFactor: {
    title: 'surface factor',
    values: {
      franklin: 'Franklin et al. (2003)',
      'powell-2003': 'Powell et al. (2003)',
      'holland-2010': 'Holland et al. (2010)',
    },
  },
  radiusSource: {
    title: 'missing radius of maximum wind',
    values: { 'radii-64': 'from 64-kt radii first', relation: 'from the relation' },
  },
  radiusRelation: {
    title: 'relation for the radius of maximum wind',
    values: {
      'vickery-wadhera-2008': 'Vickery & Wadhera (2008), all hurricanes',
      'vickery-wadhera-2008-gulf': 'Vickery & Wadhera (2008), Gulf of Mexico',
      'willoughby-rahn-2004': 'Willoughby & Rahn (2004)',
      'willoughby-2006': 'Willoughby et al. (2006)',
      'knaff-2015': 'Knaff et al. (2015)',
    },
  },
  shapeRelation: {
    title: 'relation for the shape B',
    values: {
      'vickery-wadhera-2008': 'Vickery & Wadhera (2008)',
      'powell-2005': 'Powell et al. (2005)',
      'holland-2008': 'Holland (2008)',
      'willoughby-rahn-2004': 'Willoughby & Rahn (2004)',
    },
  },
  shapeSource: {
    title: 'shape B',
    values: { 'max-wind': 'fitted to the maximum wind', relation: 'from the relation, the pressure kept' },
  },
  windPressure: {
    title: 'pressure from wind',
    values: {
      'knaff-zehr-2007': 'Knaff & Zehr (2007), Courtney & Knaff (2009)',
      'atkinson-holliday-1977': 'Atkinson & Holliday (1977)',
    },
  },
  averaging: {
    title: '1-min over 10-min wind',
    values: { 'at-sea-1.05': '1.05', 'at-sea-0.93': 'one over 0.93' },
  },
  outerWind: {
    title: 'outer wind',
    values: { profile: 'as the profile has it', 'radii-34': 'through the 34-kt radii' },
  },
  quadrants: { title: 'quadrants', values: { motion: 'from the motion', radii: 'fitted to the radii' } },
  decay: {
    title: 'decay over land',
    values: {
      'as-given': 'as the track gives it',
      'kaplan-demaria': 'Kaplan & DeMaria (1995, 2001)',
      'vickery-gulf': 'Vickery (2005), Gulf coast',
      'vickery-florida': 'Vickery (2005), Florida',
      'vickery-mid-atlantic': 'Vickery (2005), mid-Atlantic coast',
      'vickery-new-england': 'Vickery (2005), New England',
    },
  },
  seaDrag: {
    title: 'drag of the sea',
    values: { 'capped-2.4': 'up to 2.4e-3', 'capped-2.0': 'up to 2.0e-3', uncapped: 'without an upper limit' },
  },
  landReduction: {
    title: 'mean wind over land',
    values: { 'en-1991': 'EN 1991-1-4', 'log-laws-500m': 'log laws joined at 500 m' },
  },
  fetch: { title: 'land upwind', values: { 'by-direction': 'by direction', 'land-all-round': 'land all round' } },
  turbulence: { title: 'turbulence', values: { 'en-1991': 'EN 1991-1-4', esdu: 'ESDU 83045' } },
  gustFactor: {
    title: 'gust factor',
    values: {
      turbulence: 'from turbulence',
      'wmo-at-sea': 'WMO (2010), at sea',
      'wmo-off-sea': 'WMO (2010), off the sea',
      'wmo-off-land': 'WMO (2010), off the land',
      'wmo-in-land': 'WMO (2010), inland',
    },
  },
};

/**
 * Says which choices of the wind field differ from the default.
 *
 * @param options The choices.
 * @returns One notice; none where every choice is the default.
 * @source Rule of this product: a result names the relations it rests on.
 */
export function choiceNotices(options: WindOptions): EngineNotice[] {
  const changed = WIND_CHOICE_NAMES.filter((name) => options[name] !== DEFAULT_WIND_OPTIONS[name]);
  if (changed.length === 0) return [];
  const listed = changed.map((name) => `${WORDS[name].title}: ${wordsOf(name, options)}`).join('; ');
  return [{ code: 'wind-choices', text: `Wind field choices other than the default: ${listed}.` }];
}

function wordsOf<K extends keyof WindOptions>(name: K, options: WindOptions): string {
  return WORDS[name].values[options[name]];
}
