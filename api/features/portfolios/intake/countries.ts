/** A country as a schedule may name it, with the box its land lies in (west > east: across the date line). */
export interface Country {
  code: string;
  name: string;
  west: number;
  south: number;
  east: number;
  north: number;
}

/**
 * Countries with wind-exposed coasts and the larger markets: alpha-2, alpha-3, names (the first is shown), box.
 * Boxes are computed from the Natural Earth 1:10 million country polygons, rounded outwards to a tenth of a degree.
 */
const COUNTRIES: readonly [string, string, string, number, number, number, number][] = [
  ['US', 'USA', 'United States|United States of America', 172.4, 18.9, -66.8, 71.5],
  ['CA', 'CAN', 'Canada', -141.1, 41.6, -52.6, 83.2],
  ['MX', 'MEX', 'Mexico', -118.4, 14.5, -86.7, 32.8],
  ['BS', 'BHS', 'Bahamas|The Bahamas', -79.6, 20.9, -72.7, 27],
  ['BB', 'BRB', 'Barbados', -59.7, 13, -59.4, 13.4],
  ['JM', 'JAM', 'Jamaica', -78.4, 17.7, -76.1, 18.6],
  ['CU', 'CUB', 'Cuba', -85, 19.8, -74.1, 23.3],
  ['DO', 'DOM', 'Dominican Republic', -72.1, 17.5, -68.3, 20],
  ['HT', 'HTI', 'Haiti', -74.5, 18, -71.6, 20.1],
  ['PR', 'PRI', 'Puerto Rico', -68, 17.9, -65.2, 18.6],
  ['VI', 'VIR', 'US Virgin Islands|Virgin Islands US', -65.1, 17.6, -64.5, 18.4],
  ['VG', 'VGB', 'British Virgin Islands', -64.8, 18.3, -64.2, 18.8],
  ['KY', 'CYM', 'Cayman Islands', -81.5, 19.2, -79.7, 19.8],
  ['TC', 'TCA', 'Turks and Caicos Islands|Turks and Caicos', -72.5, 21.2, -71.1, 22],
  ['BM', 'BMU', 'Bermuda', -64.9, 32.2, -64.6, 32.4],
  ['AG', 'ATG', 'Antigua and Barbuda', -61.9, 16.9, -61.6, 17.8],
  ['KN', 'KNA', 'Saint Kitts and Nevis|St Kitts and Nevis', -62.9, 17.1, -62.5, 17.5],
  ['LC', 'LCA', 'Saint Lucia|St Lucia', -61.1, 13.7, -60.8, 14.2],
  ['VC', 'VCT', 'Saint Vincent and the Grenadines|St Vincent and the Grenadines', -61.5, 12.5, -61.1, 13.4],
  ['GD', 'GRD', 'Grenada', -61.8, 12, -61.4, 12.6],
  ['DM', 'DMA', 'Dominica', -61.5, 15.2, -61.2, 15.7],
  ['TT', 'TTO', 'Trinidad and Tobago', -62, 10, -60.5, 11.4],
  ['AI', 'AIA', 'Anguilla', -63.5, 18.1, -62.9, 18.7],
  ['MS', 'MSR', 'Montserrat', -62.3, 16.6, -62.1, 16.9],
  ['AW', 'ABW', 'Aruba', -70.1, 12.4, -69.8, 12.7],
  ['CW', 'CUW', 'Curaçao|Curacao', -69.2, 12, -68.7, 12.4],
  ['SX', 'SXM', 'Sint Maarten', -63.2, 18, -63, 18.1],
  ['MF', 'MAF', 'Saint Martin|St Martin', -63.2, 18, -63, 18.2],
  ['BL', 'BLM', 'Saint Barthélemy|St Barts', -62.9, 17.8, -62.7, 18],
  ['BZ', 'BLZ', 'Belize', -89.3, 15.8, -87.7, 18.5],
  ['GT', 'GTM', 'Guatemala', -92.3, 13.7, -88.2, 17.9],
  ['HN', 'HND', 'Honduras', -89.4, 12.9, -83.1, 17.5],
  ['SV', 'SLV', 'El Salvador', -90.2, 13.1, -87.6, 14.5],
  ['NI', 'NIC', 'Nicaragua', -87.7, 10.7, -82.7, 15.1],
  ['CR', 'CRI', 'Costa Rica', -87.2, 5.5, -82.5, 11.3],
  ['PA', 'PAN', 'Panama', -83.1, 7.2, -77.1, 9.7],
  ['CO', 'COL', 'Colombia', -81.8, -4.3, -66.8, 13.6],
  ['VE', 'VEN', 'Venezuela', -73.4, 0.6, -59.8, 15.8],
  ['JP', 'JPN', 'Japan', 122.9, 24.2, 154, 45.6],
  ['KR', 'KOR', 'South Korea|Republic of Korea|Korea', 124.6, 33.1, 131.9, 38.7],
  ['KP', 'PRK', 'North Korea', 124.2, 37.6, 130.8, 43.1],
  ['CN', 'CHN', 'China', 73.6, 15.7, 134.8, 53.6],
  ['TW', 'TWN', 'Taiwan', 118.2, 21.9, 122.1, 25.3],
  ['HK', 'HKG', 'Hong Kong', 113.8, 22.1, 114.5, 22.6],
  ['MO', 'MAC', 'Macao|Macau', 113.5, 22.1, 113.6, 22.3],
  ['PH', 'PHL', 'Philippines|The Philippines', 116.9, 4.6, 126.7, 21.2],
  ['VN', 'VNM', 'Vietnam|Viet Nam', 102.1, 8.5, 109.5, 23.4],
  ['TH', 'THA', 'Thailand', 97.3, 5.6, 105.7, 20.5],
  ['MY', 'MYS', 'Malaysia', 99.6, 0.8, 119.3, 7.4],
  ['ID', 'IDN', 'Indonesia', 95, -11, 141, 6],
  ['KH', 'KHM', 'Cambodia', 102.3, 10.4, 107.7, 14.8],
  ['LA', 'LAO', 'Laos', 100, 13.9, 107.7, 22.5],
  ['SG', 'SGP', 'Singapore', 103.6, 1.2, 104.1, 1.5],
  ['MM', 'MMR', 'Myanmar', 92.1, 9.7, 101.2, 28.6],
  ['BD', 'BGD', 'Bangladesh', 88, 20.7, 92.7, 26.7],
  ['IN', 'IND', 'India', 68.1, 6.7, 97.4, 35.5],
  ['LK', 'LKA', 'Sri Lanka', 79.6, 5.9, 81.9, 9.9],
  ['PK', 'PAK', 'Pakistan', 60.8, 23.6, 77.1, 37.1],
  ['OM', 'OMN', 'Oman', 51.9, 16.6, 59.9, 26.4],
  ['YE', 'YEM', 'Yemen', 42.5, 12.1, 54.6, 19],
  ['AE', 'ARE', 'United Arab Emirates', 51.5, 22.6, 56.4, 26.1],
  ['MV', 'MDV', 'Maldives', 72.6, -0.7, 73.8, 7.2],
  ['AU', 'AUS', 'Australia', 112.9, -54.8, 159.2, -9.2],
  ['NZ', 'NZL', 'New Zealand', 165.8, -52.7, -171.1, -8.5],
  ['PG', 'PNG', 'Papua New Guinea', 140.8, -11.7, 156, -1.3],
  ['SB', 'SLB', 'Solomon Islands', 155.5, -12.3, 168.9, -6.6],
  ['VU', 'VUT', 'Vanuatu', 166.5, -20.3, 169.9, -13],
  ['NC', 'NCL', 'New Caledonia', 163.6, -22.7, 171.4, -19.6],
  ['FJ', 'FJI', 'Fiji', 176.8, -21.8, -178, -12.4],
  ['TO', 'TON', 'Tonga', -176.3, -22.4, -173.9, -15.5],
  ['WS', 'WSM', 'Samoa', -172.8, -14.1, -171.4, -13.4],
  ['AS', 'ASM', 'American Samoa', -171.1, -14.6, -168.1, -11],
  ['CK', 'COK', 'Cook Islands', -165.9, -22, -157.3, -8.9],
  ['PF', 'PYF', 'French Polynesia', -154.6, -27.7, -134.9, -7.9],
  ['NU', 'NIU', 'Niue', -170, -19.2, -169.7, -18.9],
  ['KI', 'KIR', 'Kiribati', 169.5, -11.5, -151.7, 4.8],
  ['TV', 'TUV', 'Tuvalu', 176.1, -9.5, 180, -5.6],
  ['GU', 'GUM', 'Guam', 144.6, 13.2, 145, 13.7],
  ['MP', 'MNP', 'Northern Mariana Islands', 144.9, 14.1, 145.9, 20.6],
  ['FM', 'FSM', 'Micronesia', 138, 0.9, 163.1, 9.8],
  ['PW', 'PLW', 'Palau', 131.1, 2.9, 134.8, 8.1],
  ['MH', 'MHL', 'Marshall Islands', 165.2, 4.5, 172.1, 14.7],
  ['MG', 'MDG', 'Madagascar', 43.2, -25.6, 50.6, -11.9],
  ['MU', 'MUS', 'Mauritius', 56.5, -20.6, 63.5, -10.3],
  ['MZ', 'MOZ', 'Mozambique', 30.2, -26.9, 40.9, -10.4],
  ['KM', 'COM', 'Comoros', 43.2, -12.4, 44.6, -11.3],
  ['SC', 'SYC', 'Seychelles', 46.2, -9.8, 56.3, -3.7],
  ['TZ', 'TZA', 'Tanzania', 29.3, -11.8, 40.5, -0.9],
  ['ZA', 'ZAF', 'South Africa', 16.4, -47, 38, -22.1],
  ['GB', 'GBR', 'United Kingdom|Great Britain|UK', -13.7, 49.9, 1.8, 60.9],
  ['IE', 'IRL', 'Ireland', -10.5, 51.4, -5.9, 55.4],
  ['FR', 'FRA', 'France', -61.8, -21.4, 55.9, 51.1],
  ['PT', 'PRT', 'Portugal', -31.3, 30, -6.2, 42.2],
  ['ES', 'ESP', 'Spain', -18.2, 27.6, 4.4, 43.8],
  ['NL', 'NLD', 'Netherlands', -68.5, 12, 7.2, 53.6],
  ['BE', 'BEL', 'Belgium', 2.5, 49.4, 6.4, 51.5],
  ['DE', 'DEU', 'Germany', 5.8, 47.2, 15.1, 55.1],
  ['DK', 'DNK', 'Denmark', 8, 54.5, 15.2, 57.8],
  ['NO', 'NOR', 'Norway', -9.2, -54.5, 33.7, 80.8],
  ['IT', 'ITA', 'Italy', 6.6, 35.4, 18.6, 47.1],
  ['GR', 'GRC', 'Greece', 19.6, 34.8, 28.3, 41.8],
  ['BR', 'BRA', 'Brazil', -74.1, -33.8, -28.8, 5.3],
];

/** Islands that schedules commonly list under the country they belong to. */
const ALSO: Readonly<Record<string, readonly string[]>> = {
  US: ['PR', 'VI', 'GU', 'MP', 'AS'],
  GB: ['BM', 'KY', 'TC', 'VG', 'AI', 'MS'],
  NL: ['AW', 'CW', 'SX'],
  FR: ['MF', 'BL', 'NC', 'PF'],
  CN: ['HK', 'MO', 'TW'],
};

/** About 50 km: coasts are simplified and piers stand in the water. */
const MARGIN_DEG = 0.5;

const plain = (name: string) =>
  name
    .normalize('NFD')
    .replace(/[^A-Za-z]/g, '')
    .toLowerCase();

const byCode = new Map<string, Country>();
const byName = new Map<string, Country>();
for (const [code, alpha3, names, west, south, east, north] of COUNTRIES) {
  const all = names.split('|');
  const country: Country = { code, name: all[0]!, west, south, east, north };
  byCode.set(code, country);
  for (const name of [code, alpha3, ...all]) byName.set(plain(name), country);
}

/** The country a cell names by alpha-2, alpha-3 or name; null for blank and for countries not listed here. */
export const countryNamed = (text: string | undefined): Country | null =>
  text === undefined ? null : (byCode.get(text) ?? byName.get(plain(text)) ?? null);

const inBox = (country: Country, latitude: number, longitude: number): boolean => {
  if (latitude < country.south - MARGIN_DEG || latitude > country.north + MARGIN_DEG) return false;
  const west = country.west - MARGIN_DEG;
  const east = country.east + MARGIN_DEG;
  return west <= east ? longitude >= west && longitude <= east : longitude >= west || longitude <= east;
};

/** A country's name as it stands in a sentence. */
export const inSentence = ({ name }: Country): string =>
  /^(?:United|Bahamas|Philippines|Netherlands|Dominican|Maldives|Comoros|Seychelles|US |British|.* Islands)/.test(name)
    ? `the ${name}`
    : name;

/** Whether a point can lie in a country or in the islands usually listed under it. */
export const canLieIn = (country: Country, latitude: number, longitude: number): boolean =>
  inBox(country, latitude, longitude) ||
  (ALSO[country.code] ?? []).some((code) => inBox(byCode.get(code)!, latitude, longitude));
