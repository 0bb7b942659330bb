import { isLand } from '#engine/geo/land.ts';
import { landIndex } from '../../api/compute/land.ts';

/** Invented towns at real places a little inland of the Florida coast. */
const TOWNS = [
  { town: 'Port Elvin', latitude: 26.62, longitude: -81.8, postcode: '33907' },
  { town: 'Maren', latitude: 27.38, longitude: -82.42, postcode: '34233' },
  { town: 'Harrow Quay', latitude: 28.02, longitude: -82.6, postcode: '33615' },
  { town: 'Low Ferry', latitude: 30.28, longitude: -85.6, postcode: '32444' },
  { town: 'Saltmarsh Point', latitude: 25.9, longitude: -80.28, postcode: '33014' },
  { town: 'Brindle', latitude: 26.68, longitude: -80.15, postcode: '33411' },
  { town: 'Tarn Bay', latitude: 28.2, longitude: -80.78, postcode: '32934' },
  { town: 'Quillon', latitude: 29.22, longitude: -81.12, postcode: '32124' },
] as const;
const NAMES = [
  'Heron',
  'Pelican',
  'Sandbar',
  'Mangrove',
  'Lantern',
  'Anchor',
  'Tidewater',
  'Palmetto',
  'Gull',
  'Coral',
];
const BUILDINGS = ['Lodge', 'Inn', 'Court', 'Plaza', 'Works', 'House', 'Terrace', 'Centre'];
const CONSTRUCTIONS = [
  'Reinforced masonry',
  'CBS',
  'Wood frame',
  'Steel frame',
  'Reinforced concrete',
  'Joisted masonry',
  'Light metal',
];
const OCCUPANCIES = ['Hotel', 'Office', 'Retail', 'Apartments', 'Warehouse', 'Restaurant', 'Single-family home'];
const TERRAINS = ['Suburban', 'Suburban', 'Open', 'Wooded', 'Dense urban', 'Open water edge'];
const QUALITIES = ['building', 'building', 'building', 'parcel', 'street'];

/** How many rows carry each slip; all other rows are sound. */
export interface Slips {
  swapped: number;
  signLost: number;
  noCoordinates: number;
  nullIsland: number;
  offshore: number;
  coarse: number;
  noValue: number;
  negative: number;
  valueInWords: number;
  totalDiffers: number;
  noConstruction: number;
  unlistedWord: number;
  futureYear: number;
  deductibleWithoutUnit: number;
  repeats: number;
  conflicts: number;
  blankLines: number;
}

/** A schedule as brokers send it: mostly sound, with a few dozen slips of the usual kinds. */
export const USUAL_SLIPS: Slips = {
  swapped: 14,
  signLost: 6,
  noCoordinates: 9,
  nullIsland: 1,
  offshore: 3,
  coarse: 57,
  noValue: 4,
  negative: 1,
  valueInWords: 2,
  totalDiffers: 3,
  noConstruction: 40,
  unlistedWord: 5,
  futureYear: 2,
  deductibleWithoutUnit: 3,
  repeats: 5,
  conflicts: 2,
  blankLines: 2,
};
export const NO_SLIPS = Object.fromEntries(Object.keys(USUAL_SLIPS).map((slip) => [slip, 0])) as unknown as Slips;

export interface LocationFileOptions {
  sites: number;
  seed?: number;
  slips?: Partial<Slips>;
  delimiter?: ',' | ';' | '\t' | '|';
  encoding?: 'utf-8' | 'utf-8-bom' | 'utf-16le' | 'windows-1252';
  preamble?: readonly string[];
  totalLine?: boolean;
}

export interface LocationFile {
  bytes: Buffer;
  text: string;
  /** Lines without the header line. */
  fileRows: number;
  /** Line numbers of the rows with each slip. */
  slipped: Record<keyof Slips, number[]>;
}

export const LOCATION_HEADERS = [
  'Site ref',
  'Site name',
  'Account',
  'Policy no',
  'Latitude',
  'Longitude',
  'Location quality',
  'Street address',
  'City',
  'State',
  'Zip',
  'Country',
  'Building value',
  'Other structures',
  'Contents',
  'BI',
  'Currency',
  'Construction',
  'Occupancy',
  'Year built',
  'Stories',
  'Terrain',
  'Deductible type',
  'Deductible',
  'Site limit',
  'LOB',
  'TIV',
] as const;

const generator = (seed: number) => {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
};

type Row = Record<(typeof LOCATION_HEADERS)[number], string>;
const thousands = (amount: number) => String(amount).replace(/\B(?=(\d{3})+$)/g, ',');

/** A made-up location file, the same for the same options. */
export function locationFile({
  sites,
  seed = 1,
  slips: asked = USUAL_SLIPS,
  delimiter = ',',
  encoding = 'utf-8',
  preamble = [],
  totalLine = false,
}: LocationFileOptions): LocationFile {
  const slips: Slips = { ...NO_SLIPS, ...asked };
  const random = generator(seed);
  const pick = <T>(list: readonly T[]): T => list[Math.floor(random() * list.length)]!;
  const land = landIndex();
  const rows: Row[] = Array.from({ length: sites }, (_, i) => soundRow(i, random, pick, land));
  const slipped = Object.fromEntries(Object.keys(NO_SLIPS).map((slip) => [slip, [] as number[]])) as Record<
    keyof Slips,
    number[]
  >;

  // Every slip takes the next untouched row of a fixed walk through the file, so that no row has two.
  const stride = coprimeStride(sites);
  let walked = 0;
  const nextRow = () => {
    if (walked >= sites) throw new Error('more slips than sites');
    return (walked++ * stride + 7) % sites;
  };
  const slip = (kind: keyof Slips, change: (row: Row) => void) => {
    for (let k = 0; k < slips[kind]; k++) {
      const at = nextRow();
      change(rows[at]!);
      slipped[kind].push(at);
    }
  };
  slip('swapped', (row) => ([row.Latitude, row.Longitude] = [row.Longitude, row.Latitude]));
  slip('signLost', (row) => (row.Longitude = row.Longitude.replace('-', '')));
  slip('noCoordinates', (row) => (row.Latitude = row.Longitude = ''));
  slip('nullIsland', (row) => (row.Latitude = row.Longitude = '0'));
  slip('offshore', (row) => ([row.Latitude, row.Longitude] = ['27.50000', '-84.60000']));
  slip('coarse', (row) => {
    row.Latitude = Number(row.Latitude).toFixed(2);
    row.Longitude = Number(row.Longitude).toFixed(2);
  });
  slip('noValue', (row) => (row['Building value'] = row['Other structures'] = row.Contents = row.BI = row.TIV = ''));
  slip('negative', (row) => (row['Building value'] = '-250000'));
  slip('valueInWords', (row) => (row['Building value'] = '1.2m'));
  slip('totalDiffers', (row) => (row.TIV = thousands(Number(row.TIV.replaceAll(',', '')) + 250_000)));
  slip('noConstruction', (row) => (row.Construction = ''));
  slip('unlistedWord', (row) => (row.Construction = 'Coquina w/ trusses'));
  slip('futureYear', (row) => (row['Year built'] = '2062'));
  slip('deductibleWithoutUnit', (row) => ([row['Deductible type'], row.Deductible] = ['', '2']));
  slip('conflicts', () => undefined);

  const cells: (Row | null)[] = [...rows];
  // Repeats and conflicting references are further lines at the end.
  for (const at of slipped.conflicts) cells.push({ ...rows[at]!, Contents: '1', TIV: '' });
  const offset = preamble.length + 2;
  slipped.conflicts = slipped.conflicts.flatMap((at, k) => [at, sites + k]);
  for (let k = 0; k < slips.repeats; k++) {
    const at = nextRow();
    slipped.repeats.push(cells.length);
    cells.push({ ...rows[at]! });
  }
  for (let k = 0; k < slips.blankLines; k++) {
    slipped.blankLines.push(cells.length);
    cells.push(null);
  }
  for (const kind of Object.keys(slipped) as (keyof Slips)[])
    slipped[kind] = slipped[kind].map((at) => at + offset).sort((a, b) => a - b);

  const quote = (cell: string) =>
    /["\n\r]/.test(cell) || cell.includes(delimiter) ? `"${cell.replaceAll('"', '""')}"` : cell;
  const line = (row: Row | null) =>
    row === null ? '' : LOCATION_HEADERS.map((header) => quote(row[header])).join(delimiter);
  const lines = [...preamble, LOCATION_HEADERS.map(quote).join(delimiter), ...cells.map(line)];
  if (totalLine)
    lines.push(
      LOCATION_HEADERS.map((header) => (header === 'Site ref' ? 'Total' : header === 'TIV' ? '9999999' : '')).join(
        delimiter,
      ),
    );
  const text = `${lines.join('\r\n')}\r\n`;
  return { text, bytes: encoded(text, encoding), fileRows: lines.length - 1, slipped };
}

function soundRow(
  i: number,
  random: () => number,
  pick: <T>(list: readonly T[]) => T,
  land: ReturnType<typeof landIndex>,
): Row {
  const place = TOWNS[i % TOWNS.length]!;
  let latitude: number = place.latitude;
  let longitude: number = place.longitude;
  for (let tries = 0; tries < 20; tries++) {
    const [dy, dx] = [(random() - 0.5) * 0.16, (random() - 0.5) * 0.16];
    if (!isLand(land, place.latitude + dy, place.longitude + dx)) continue;
    [latitude, longitude] = [place.latitude + dy, place.longitude + dx];
    break;
  }
  const building = 50_000 * (3 + Math.floor(random() ** 3 * 160));
  const other = random() < 0.3 ? Math.round(building * 0.04) : 0;
  const contents = Math.round(building * (0.1 + 0.3 * random()));
  const interruption = random() < 0.5 ? Math.round(building * 0.15) : 0;
  const percent = random() < 0.6;
  const occupancy = pick(OCCUPANCIES);
  return {
    'Site ref': `S-${String(i + 1).padStart(5, '0')}`,
    'Site name': `${pick(NAMES)} ${pick(BUILDINGS)} ${1 + Math.floor(random() * 90)}`,
    Account: `A-${4400 + (i % 9)}`,
    'Policy no': `P-${String(1 + (i % 180)).padStart(3, '0')}`,
    Latitude: sharp(latitude),
    Longitude: sharp(longitude),
    'Location quality': pick(QUALITIES),
    'Street address': `${1 + Math.floor(random() * 980)} ${pick(NAMES)} Road`,
    City: place.town,
    State: 'FL',
    Zip: place.postcode,
    Country: 'US',
    'Building value': thousands(building),
    'Other structures': thousands(other),
    Contents: thousands(contents),
    BI: thousands(interruption),
    Currency: 'USD',
    Construction: pick(CONSTRUCTIONS),
    Occupancy: occupancy,
    'Year built': String(1955 + Math.floor(random() * 68)),
    Stories: String(occupancy === 'Hotel' ? 2 + Math.floor(random() * 5) : 1 + Math.floor(random() * 3)),
    Terrain: pick(TERRAINS),
    'Deductible type': percent ? '% of site value' : 'Amount',
    Deductible: percent ? `${pick(['2', '3', '5'])}%` : thousands(10_000 * (1 + Math.floor(random() * 5))),
    'Site limit': random() < 0.2 ? thousands(Math.round(building * 0.8)) : '',
    LOB: occupancy === 'Single-family home' ? 'Residential' : 'Commercial property',
    TIV: thousands(building + other + contents + interruption),
  };
}

/** Six decimals, the last never zero, so that the row's sharpness can be read off it. */
const sharp = (degrees: number) => degrees.toFixed(5) + '7';

function coprimeStride(count: number): number {
  const gcd = (a: number, b: number): number => (b === 0 ? a : gcd(b, a % b));
  let stride = Math.max(1, Math.floor(count * 0.381));
  while (gcd(stride, Math.max(count, 1)) !== 1) stride++;
  return stride;
}

function encoded(text: string, encoding: NonNullable<LocationFileOptions['encoding']>): Buffer {
  if (encoding === 'utf-16le') return Buffer.from(`\ufeff${text}`, 'utf16le');
  if (encoding === 'utf-8-bom') return Buffer.from(`\ufeff${text}`, 'utf8');
  return encoding === 'windows-1252' ? Buffer.from(text, 'latin1') : Buffer.from(text, 'utf8');
}
