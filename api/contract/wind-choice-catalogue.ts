import type { Choice, WindChoice, WindChoices } from './wind-choices.ts';

/**
 * Every published relation of the plain wind field that can be chosen, in words: what the choice decides, why the default
 * is the default, and where each value comes from. “From memory” marks constants not checked against the paper itself.
 */
export const WIND_CHOICES: readonly WindChoice[] = [
  {
    key: 'profile',
    title: 'Radial profile',
    meaning: 'How the wind rises towards the radius of maximum wind and falls beyond it.',
    reason:
      'One formula gives wind and pressure together and can be fitted exactly to the maximum wind. Its ring of strong wind is somewhat too wide; once the peak is matched the profiles agree within 5 % out to three radii.',
    values: [
      {
        value: 'holland-1980',
        title: 'Holland 1980',
        source: 'Holland (1980), Mon. Wea. Rev. 108, 1212–1218',
      },
      {
        value: 'holland-2010',
        title: 'Holland 2010, at the surface',
        source: 'Holland, Belanger & Fritz (2010), Mon. Wea. Rev. 138, 4393–4401; from memory',
      },
      {
        value: 'willoughby-2006',
        title: 'Willoughby 2006, as published',
        source:
          'Willoughby, Darling & Rahn (2006), Mon. Wea. Rev. 134, 1102–1120, dual exponential; from memory. Its peak lies a little off the radius given',
      },
      {
        value: 'willoughby-2006-exact-peak',
        title: 'Willoughby 2006, peak in its place',
        source:
          'Willoughby, Darling & Rahn (2006), from memory, with the transition set so that the peak is exactly at the radius and wind given',
      },
    ],
  },
  {
    key: 'asymmetry',
    title: 'Asymmetry from motion',
    meaning: 'How the storm’s own motion makes one side stronger than the other.',
    reason:
      'Speed and direction come together, the maximum stays in closed form, nothing is left to fit, and it agrees with boundary-layer physics near the radius of maximum wind. The strong side hardly depends on the choice; the weak side does, up to 19 %.',
    values: [
      {
        value: 'lin-chavas',
        title: 'Lin & Chavas 2012',
        source: 'Lin & Chavas (2012), J. Geophys. Res. 117, D09120; from memory',
      },
      {
        value: 'schwerdt',
        title: 'Schwerdt 1979',
        source: 'Schwerdt, Ho & Watkins (1979), NOAA Technical Report NWS 23; from memory',
      },
      {
        value: 'georgiou',
        title: 'Georgiou 1985',
        source: 'Georgiou (1985), University of Western Ontario, thesis; from memory',
      },
      {
        value: 'kepert',
        title: 'Kepert 2001 boundary layer',
        source:
          'Kepert (2001), J. Atmos. Sci. 58, 2469–2484: linear boundary layer, solved again here and checked by finite differences',
      },
      { value: 'none', title: 'None', source: 'The motion adds nothing; for comparison only' },
    ],
  },
  {
    key: 'inflow',
    title: 'Inflow angle',
    meaning: 'By how much the surface wind turns inwards, which sets its direction and so the ground it has crossed.',
    reason: 'Depends on the distance alone and stays continuous; the direction only decides which ground lies upwind.',
    values: [
      {
        value: 'phadke',
        title: 'Phadke 2003',
        source:
          'Phadke, Martino, Cheung & Houston (2003), Ocean Engineering 30, 553–578, after Bretschneider (1972); from memory',
      },
      {
        value: 'zhang-uhlhorn',
        title: 'Zhang & Uhlhorn 2012',
        source: 'Zhang & Uhlhorn (2012), Mon. Wea. Rev. 140, 3587–3605; from memory',
      },
    ],
  },
  {
    key: 'surfaceFactor',
    title: 'Surface factor',
    meaning: 'The 10-min wind at 10 m over open sea as a share of the wind above the friction layer.',
    reason:
      'Rests on drop soundings in eyewalls. Where the maximum wind is matched it cancels at the radius of maximum wind; it matters further out, and where only a pressure is given.',
    values: [
      {
        value: 'franklin',
        title: 'Franklin 2003, falling outwards',
        source:
          'Franklin, Black & Valde (2003), Wea. Forecasting 18, 32–44, 0.90 to 1-min wind; fall to 0.75 at 700 km after Knaff et al. (2011), from memory',
      },
      {
        value: 'powell-2003',
        title: 'Powell 2003, 0.78 throughout',
        source: 'Powell, Vickery & Reinhold (2003), Nature 422, 279–283; from memory',
      },
      {
        value: 'holland-2010',
        title: 'Holland 2010, 0.80 throughout',
        source: 'Holland, Belanger & Fritz (2010), Mon. Wea. Rev. 138, 4393–4401; from memory',
      },
    ],
  },
  {
    key: 'radiusSource',
    title: 'Missing radius of maximum wind, first from',
    meaning: 'What a fix without a radius of maximum wind takes it from before a relation is asked.',
    reason:
      'Where the track says how far 64-kt wind reaches, that tells more about this storm than an average of all storms: on peaks kept back for testing the mean error falls from 28 to 11 %.',
    values: [
      {
        value: 'radii-64',
        title: '64-kt radii',
        source:
          'The vortex must carry 64 kt at 0.85 times the mean of the quadrants’ reach; rule of this product, 0.85 from memory',
      },
      { value: 'relation', title: 'The relation at once', source: 'The relation chosen below' },
    ],
  },
  {
    key: 'radiusRelation',
    title: 'Relation for the radius of maximum wind',
    meaning: 'The relation for a radius of maximum wind that nothing in the track tells.',
    reason: 'Fitted to landfalling hurricanes and driven by the pressure, which is known before the wind is.',
    values: [
      {
        value: 'vickery-wadhera-2008',
        title: 'Vickery & Wadhera 2008, all hurricanes',
        source: 'Vickery & Wadhera (2008), J. Appl. Meteor. Climatol. 47, 2497–2517; from memory, scatter 44 %',
      },
      {
        value: 'vickery-wadhera-2008-gulf',
        title: 'Vickery & Wadhera 2008, Gulf of Mexico',
        source: 'Vickery & Wadhera (2008), J. Appl. Meteor. Climatol. 47, 2497–2517; from memory, scatter 39 %',
      },
      {
        value: 'willoughby-rahn-2004',
        title: 'Willoughby & Rahn 2004',
        source: 'Willoughby & Rahn (2004), Mon. Wea. Rev. 132, 3033–3048; from memory',
      },
      {
        value: 'willoughby-2006',
        title: 'Willoughby 2006',
        source: 'Willoughby, Darling & Rahn (2006), Mon. Wea. Rev. 134, 1102–1120, eq. 7a; from memory',
      },
      {
        value: 'knaff-2015',
        title: 'Knaff 2015',
        source: 'Knaff, Longmore, DeMaria & Molenar (2015), J. Appl. Meteor. Climatol. 54, 463–478; from memory',
      },
    ],
  },
  {
    key: 'shapeRelation',
    title: 'Relation for the shape B',
    meaning: 'How peaked the vortex is taken to be where the central pressure sets the maximum wind.',
    reason: 'Takes size, latitude and depth into account together and was fitted to aircraft data of many storms.',
    values: [
      {
        value: 'vickery-wadhera-2008',
        title: 'Vickery & Wadhera 2008',
        source: 'Vickery & Wadhera (2008), J. Appl. Meteor. Climatol. 47, 2497–2517; from memory, scatter 0.23',
      },
      {
        value: 'powell-2005',
        title: 'Powell 2005',
        source:
          'Powell, Soukup, Cocke et al. (2005), J. Wind Eng. Ind. Aerodyn. 93, 651–674; from memory, scatter 0.29',
      },
      {
        value: 'holland-2008',
        title: 'Holland 2008, at the surface',
        source: 'Holland (2008), Mon. Wea. Rev. 136, 3432–3445; from memory. Belongs to the 1-min wind at the surface',
      },
      {
        value: 'willoughby-rahn-2004',
        title: 'Willoughby & Rahn 2004',
        source:
          'Willoughby & Rahn (2004), Mon. Wea. Rev. 132, 3033–3048; from memory. Fitted to shapes aloft, gives high values',
      },
    ],
  },
  {
    key: 'shapeSource',
    title: 'Shape B fitted to',
    meaning:
      'Whether B follows the maximum wind, and the pressure gives way, or follows the relation, and the wind gives way.',
    reason: 'Losses answer to the wind, so the wind of the fix is kept and the pressure profile is adjusted.',
    values: [
      {
        value: 'max-wind',
        title: 'The maximum wind',
        source: 'Holland (1980) solved for B; B kept within 0.8–2.5, rule of this product',
      },
      { value: 'relation', title: 'The relation', source: 'The relation chosen above; the pressure is kept' },
    ],
  },
  {
    key: 'windPressure',
    title: 'Wind–pressure relation',
    meaning: 'The central pressure of a fix that gives only a maximum wind.',
    reason: 'Takes motion, latitude and surroundings into account; reported errors are 5 hPa and 6 kt.',
    values: [
      {
        value: 'knaff-zehr-2007',
        title: 'Knaff & Zehr 2007',
        source:
          'Knaff & Zehr (2007), Wea. Forecasting 22, 71–88; south of 18 degrees Courtney & Knaff (2009), Aust. Meteor. Oceanogr. J. 58, 167–179; from memory',
      },
      {
        value: 'atkinson-holliday-1977',
        title: 'Atkinson & Holliday 1977',
        source: 'Atkinson & Holliday (1977), Mon. Wea. Rev. 105, 421–427; from memory',
      },
    ],
  },
  {
    key: 'averaging',
    title: '1-min over 10-min wind at sea',
    meaning: 'The factor between the highest 1-min wind of a track and the 10-min mean the chain computes with.',
    reason: 'A best track’s maximum is the highest 1-min wind within a longer time, and 1.05 is that factor at sea.',
    values: [
      {
        value: 'at-sea-1.05',
        title: '1.05',
        source: 'Harper, Kepert & Ginger (2010), WMO/TD-1555, at sea; from memory',
      },
      {
        value: 'at-sea-0.93',
        title: 'One over 0.93',
        source: 'Harper, Kepert & Ginger (2010), WMO/TD-1555, the conversion it names; from memory. Gusts fall 2.4 %',
      },
    ],
  },
  {
    key: 'outerWind',
    title: 'Outer wind',
    meaning:
      'Whether the wind beyond the radius of maximum wind follows the profile alone or passes through the 34-kt radii.',
    reason: 'Not every track gives 34-kt radii, and they lie far below damaging wind. The peak is the same either way.',
    values: [
      { value: 'profile', title: 'The profile', source: 'The radial profile chosen above' },
      {
        value: 'radii-34',
        title: '34-kt radii',
        source:
          'Outer exponent of Holland, Belanger & Fritz (2010), Mon. Wea. Rev. 138, 4393–4401, fitted beyond the radius of maximum wind; from memory',
      },
    ],
  },
  {
    key: 'quadrants',
    title: 'Quadrants',
    meaning: 'Whether the two sides differ by the motion alone or also as the wind radii of the four quadrants say.',
    reason:
      'Radii by quadrant are estimates, often rounded to 5 or 10 nautical miles. The peak is the same either way.',
    values: [
      { value: 'motion', title: 'By motion alone', source: 'The asymmetry chosen above' },
      {
        value: 'radii',
        title: 'By the radii as well',
        source: 'Fit to the 34-, 50- and 64-kt radii given, beyond the radius of maximum wind; rule of this product',
      },
    ],
  },
  {
    key: 'decay',
    title: 'Weakening over land',
    meaning: 'What happens after landfall where the track itself gives no intensities there.',
    reason: 'A best track already holds the weakening; adding a model would count it twice.',
    values: [
      { value: 'as-given', title: 'As the track gives it', source: 'The fixes of the track' },
      {
        value: 'kaplan-demaria',
        title: 'Kaplan & DeMaria',
        source:
          'Kaplan & DeMaria (1995, 2001), J. Appl. Meteor. 34, 2499–2512 and 40, 280–286; constants of 2001 from memory',
      },
      {
        value: 'vickery-gulf',
        title: 'Vickery 2005, Gulf of Mexico',
        source: 'Vickery (2005), J. Appl. Meteor. 44, 1799–1811; constants from memory',
      },
      {
        value: 'vickery-florida',
        title: 'Vickery 2005, Florida',
        source: 'Vickery (2005), J. Appl. Meteor. 44, 1799–1811; constants from memory',
      },
      {
        value: 'vickery-mid-atlantic',
        title: 'Vickery 2005, Mid-Atlantic',
        source: 'Vickery (2005), J. Appl. Meteor. 44, 1799–1811; constants from memory',
      },
      {
        value: 'vickery-new-england',
        title: 'Vickery 2005, New England',
        source: 'Vickery (2005), J. Appl. Meteor. 44, 1799–1811; constants from memory',
      },
    ],
  },
  {
    key: 'seaDrag',
    title: 'Drag of the sea',
    meaning: 'How rough the sea becomes as the wind rises.',
    reason: 'Drag stops growing above hurricane force; the cap lies inside the published range of 2.0 to 2.5.',
    values: [
      {
        value: 'capped-2.4',
        title: 'Capped at 0.0024',
        source:
          'Large & Pond (1981), J. Phys. Oceanogr. 11, 324–336, slope from memory; levelling-off after Powell, Vickery & Reinhold (2003), the cap is ours',
      },
      {
        value: 'capped-2.0',
        title: 'Capped at 0.0020',
        source: 'As above, with the lower end of the published range as its cap',
      },
      {
        value: 'uncapped',
        title: 'Without a cap',
        source: 'Large & Pond (1981), J. Phys. Oceanogr. 11, 324–336, carried on beyond its data; from memory',
      },
    ],
  },
  {
    key: 'landReduction',
    title: 'Mean wind over land',
    meaning: 'By how much settled land lowers the 10-min wind that came in from the sea.',
    reason: 'Gusts by it agree within 0.3 % with an unrelated building standard.',
    values: [
      {
        value: 'en-1991',
        title: 'EN 1991-1-4',
        source: 'EN 1991-1-4:2005, roughness factor; table values from memory',
      },
      {
        value: 'log-laws-500m',
        title: 'Two log laws joined at 500 m',
        source: 'Neutral log law over sea and land with the same wind at 500 m; reduces less, by 5–29 %',
      },
    ],
  },
  {
    key: 'fetch',
    title: 'Land upwind',
    meaning: 'Whether the distance to the sea in the wind’s direction counts.',
    reason: 'Wind fresh from the sea has not yet slowed; without it gusts on a coast come out about 3 % low.',
    values: [
      {
        value: 'by-direction',
        title: 'By direction',
        source: 'Wood (1982), Boundary-Layer Meteorol. 23, 77–97, internal layer; from memory. Eight directions',
      },
      { value: 'land-all-round', title: 'As if land all round', source: 'Full effect of the site’s own ground' },
    ],
  },
  {
    key: 'turbulence',
    title: 'Turbulence',
    meaning: 'How turbulent the wind is over ground of a given roughness.',
    reason: 'A standard’s relation without further inputs; both agree within 8 % over sea and open country.',
    values: [
      {
        value: 'en-1991',
        title: 'EN 1991-1-4',
        source: 'EN 1991-1-4:2005, turbulence intensity with factor 1',
      },
      {
        value: 'esdu',
        title: 'ESDU',
        source: 'ESDU 83045, as in Vickery & Skerlj (2005), J. Struct. Eng. 131, 591–600; from memory',
      },
    ],
  },
  {
    key: 'gustFactor',
    title: 'Gust factor',
    meaning: 'The peak 3-s gust over the 10-min mean. The largest single lever of the plain wind.',
    reason:
      'Follows each site’s own ground and distance to the sea. A class is one number for every site; the classes span 1.23 to 1.66.',
    values: [
      {
        value: 'turbulence',
        title: 'From turbulence',
        source: 'ESDU 83045 peak factor, as in Harper, Kepert & Ginger (2010), WMO/TD-1555, appendix D; from memory',
      },
      {
        value: 'wmo-at-sea',
        title: 'WMO class: at sea',
        source: 'Harper, Kepert & Ginger (2010), WMO/TD-1555, 1.23; table from memory',
      },
      {
        value: 'wmo-off-sea',
        title: 'WMO class: coast, wind off the sea',
        source: 'Harper, Kepert & Ginger (2010), WMO/TD-1555, 1.38; table from memory',
      },
      {
        value: 'wmo-off-land',
        title: 'WMO class: coast, wind off the land',
        source: 'Harper, Kepert & Ginger (2010), WMO/TD-1555, 1.52; table from memory',
      },
      {
        value: 'wmo-in-land',
        title: 'WMO class: inland, open',
        source: 'Harper, Kepert & Ginger (2010), WMO/TD-1555, 1.66; table from memory',
      },
    ],
  },
];

/** What the chain lets a person set beside the relations, in the same shape. */
export const CHAIN_CHOICES: readonly Choice<'intensity' | 'anchor' | 'mesovortices' | 'regime'>[] = [
  {
    key: 'intensity',
    title: 'Intensity from',
    meaning: 'Which of the two sets the maximum wind of a fix that gives both a central pressure and a reported wind.',
    reason:
      'A best track’s wind is the largest 1-min wind anywhere; matching the whole ring to it makes gusts too strong. In the untuned hindcast of 25 open peaks (page Validation), bias and mean error: from the pressure +6 and 13 %, from the wind +18 and 23 %, or +23 and 27 % where it is taken as the ring’s mean. The price: gusts of 58 m/s and more come out about 6 % low. A fix given by wind alone is run by wind.',
    values: [
      {
        value: 'pressure',
        title: 'Pressure',
        source:
          'Holland (1980) with B of Vickery & Wadhera (2008); 10-min surface wind 0.80 of the gradient wind, Holland, Belanger & Fritz (2010), from memory',
      },
      { value: 'wind', title: 'Reported wind', source: 'The track’s own maximum, as a 1-min wind' },
    ],
  },
  {
    key: 'anchor',
    title: 'Reported maximum already holds vortex peaks',
    meaning: 'Whether the maximum wind of a fix is that of the ring’s mean or of a passing vortex.',
    reason:
      'A reported maximum is a peak and a maximum implied by pressure is a mean, so each fix is taken by its source.',
    values: [
      {
        value: 'auto',
        title: 'By each fix’s source',
        source: 'Peak where the wind is reported, mean where it is implied',
      },
      { value: 'mean', title: 'Never', source: 'Every maximum is that of the ring’s mean' },
      { value: 'peak', title: 'Always', source: 'Every maximum holds vortex peaks, which are divided out first' },
    ],
  },
  {
    key: 'mesovortices',
    title: 'Mesovortices',
    meaning: 'Whether small vortices on the eyewall ring are laid over the plain wind, as 264 fixed patterns.',
    reason: 'Without them there is no range from their passage. Plain results stand beside the range either way.',
    values: [
      { value: 'on', title: 'On', source: 'Linear stability of the eyewall ring; see the model document' },
      { value: 'off', title: 'Off', source: 'Plain wind only' },
    ],
  },
  {
    key: 'regime',
    title: 'Amplitude regime',
    meaning: 'How strong the vortices are: kept up by heating, or at their strongest while a ring breaks down.',
    reason:
      'A ring is mostly kept up and breaks down now and then: 75 % kept up, 15 % between, 10 % breaking down. The shares are judged, not measured.',
    values: [
      {
        value: 'mixed',
        title: 'Mixed',
        source: 'Amplitudes 0.4, 0.75 and 1.1 with shares 75, 15 and 10 %, times individual strengths; judged',
      },
      {
        value: 'quasi-steady',
        title: 'Always kept up',
        source: '0.4 times individual strengths of 0.5 to 1: own barotropic runs of rings relaxed to their first state',
      },
      {
        value: 'breakdown',
        title: 'Always breaking down',
        source: '1.1 times individual strengths of 0.5 to 1: own barotropic runs of rings left alone',
      },
    ],
  },
];

/** What has to be said beside any choice of intensity that has two readings far apart. */
export const INTENSITY_NOTICE =
  'The reported wind and the central pressure don’t belong to one usual storm: their shapes B differ by more than 0.45, two standard deviations. Read both maxima before you rely on either.';

/** The choices that differ from the default, as [choice, value] in the order above; the canonical form of a set. */
export const chosenOf = (wind: WindChoices | undefined): [key: keyof WindChoices, value: string][] =>
  wind === undefined
    ? []
    : WIND_CHOICES.flatMap(({ key, values }) =>
        wind[key] === values[0]!.value ? [] : [[key, wind[key]] satisfies [keyof WindChoices, string]],
      );

/** The same in words: radial profile: “Holland 2010, at the surface” instead of “Holland 1980”. */
export const chosenInWords = (wind: WindChoices | undefined): string[] =>
  chosenOf(wind).map(([key, chosen]) => {
    const { title, values } = WIND_CHOICES.find((choice) => choice.key === key)!;
    const to = values.find(({ value }) => value === chosen)!;
    const name = title.charAt(0).toLowerCase() + title.slice(1);
    return `${name}: “${to.title}” instead of “${values[0]!.title}”`;
  });

/** An amplitude regime other than the default, in the same words; null when it is the default. */
export const regimeInWords = (value: string | undefined): string | null => {
  const { title, values } = CHAIN_CHOICES.find(({ key }) => key === 'regime')!;
  const to = values.find((one) => one.value === value);
  if (!to || to === values[0]) return null;
  return `${title.charAt(0).toLowerCase()}${title.slice(1)}: “${to.title}” instead of “${values[0]!.title}”`;
};
