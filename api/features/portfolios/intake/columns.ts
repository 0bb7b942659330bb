import type { z } from 'zod';
import type { Confidence, SiteField } from '#contract/portfolios.ts';
import { bare } from './words.ts';

type Words = { sure: string; likely: string; guess: string };

/** Headers we know: those that say the field outright, those that usually mean it, and words inside that hint at it. */
const HEADERS: Readonly<Record<SiteField, Words>> = {
  site_ref: {
    sure: 'site reference|site ref|site id|site number|site no|location id|location number|location no|location ref|loc ref|risk id|property id|asset id',
    likely: 'id|ref|reference|no|number|row id|item|item no|building id|unique id|key',
    guess: 'siteid|propertyref',
  },
  site_label: {
    sure: 'site label|site name|location name|property name|building name',
    likely: 'name|label|description|location|property|site|asset',
    guess: 'sitename',
  },
  account_ref: {
    sure: 'account reference|account ref|account|account id|account number|account no|acct|acct no',
    likely: 'client|client id|insured|insured id|customer|customer id',
    guess: 'account|acct',
  },
  policy_ref: {
    sure: 'policy reference|policy ref|policy|policy id|policy number|policy no|pol no',
    likely: 'contract|contract no|certificate|cert no|slip',
    guess: 'policy',
  },
  latitude: {
    sure: 'latitude|lat|lat dd|latitude dd|latitude degrees|lat deg|gps lat',
    likely: 'y|y coordinate|ycoord|lat y|latitud',
    guess: 'latitude',
  },
  longitude: {
    sure: 'longitude|lon|long|lng|lon dd|longitude dd|longitude degrees|lon deg|gps lon|gps long',
    likely: 'x|x coordinate|xcoord|lon x|longitud',
    guess: 'longitude',
  },
  location_quality: {
    sure: 'location quality|geocoding quality|geocode quality|geo quality|geo resolution|geocode resolution',
    likely: 'quality|geocode level|resolution|match level|geo match|geocode|accuracy|match type',
    guess: 'geoco',
  },
  street: {
    sure: 'street|street address|address|address 1|address line 1|street name|addr|site address',
    likely: 'road|location address|addr1',
    guess: 'address',
  },
  town: {
    sure: 'town|city|town city|city name',
    likely: 'municipality|locality|suburb|place|community',
    guess: 'city',
  },
  region: {
    sure: 'region|state|state code|province|state province',
    likely: 'county|parish|prefecture|territory|district|area',
    guess: 'state',
  },
  postcode: {
    sure: 'postcode|post code|postal code|zip|zip code|zipcode',
    likely: 'postal|pin code|pincode|plz',
    guess: 'zip',
  },
  country: {
    sure: 'country|country code|country iso|iso country|country name',
    likely: 'nation|iso2|iso3|ctry|cntry',
    guess: 'country',
  },
  building_value: {
    sure: 'building value|building|buildings|bldg|bldg value|building rc|building replacement cost|building sum insured|building si|building limit value|building replacement value',
    likely:
      'structure|structure value|real property|replacement cost|rcv|dwelling value|coverage a|cov a|property value|building amount|replacement value',
    guess: 'building|bldg|structure',
  },
  other_structures_value: {
    sure: 'other structures value|other structures|other structure|appurtenant structures|appurtenant|other value',
    likely: 'outbuildings|coverage b|cov b|other|site improvements',
    guess: 'otherstruct|appurt',
  },
  contents_value: {
    sure: 'contents value|contents|content|contents sum insured|contents si|content value',
    likely:
      'personal property|bpp|stock|equipment|inventory|coverage c|cov c|machinery|plant and machinery|stock value',
    guess: 'content',
  },
  time_element_value: {
    sure: 'time element value|time element|business interruption|business interruption value|bi|bi value|business income',
    likely:
      'loss of rent|rent|rental income|rents|ale|additional living expense|loss of use|coverage d|cov d|extra expense|revenue',
    guess: 'interruption|timeelement|income',
  },
  total_value: {
    sure: 'total value|tiv|total insured value|total|sum insured|total sum insured|tsi',
    likely: 'insured value|total si|total amount|total values|values total',
    guess: 'tiv|totalvalue',
  },
  currency: { sure: 'currency|currency code|ccy|curr', likely: 'iso currency|cur|currency iso', guess: 'currency' },
  construction: {
    sure: 'construction|construction type|construction class|construction code|const type|constr|construction description',
    likely: 'structure type|const|building type|building construction|frame|wall type|cons',
    guess: 'construct',
  },
  occupancy: {
    sure: 'occupancy|occupancy type|occupancy class|occupancy code|occ|occ type|occupancy description',
    likely: 'use|usage|building use|property type|occupation|trade',
    guess: 'occupan',
  },
  year_built: {
    sure: 'year built|yr built|yearbuilt|built|year of construction|construction year',
    likely: 'year|yr|age year|yob|date built',
    guess: 'yearb|yrblt',
  },
  storeys: {
    sure: 'storeys|stories|number of storeys|number of stories|no of stories|no storeys|num stories|# stories|storys|no of storeys',
    likely: 'floors|number of floors|no of floors|num floors|height storeys|levels',
    guess: 'stories|storey',
  },
  terrain: {
    sure: 'terrain|terrain class|exposure category|exposure class|terrain category|wind exposure',
    likely: 'roughness|surroundings|exposure|terrain type|surface',
    guess: 'terrain',
  },
  deductible_kind: {
    sure: 'deductible kind|deductible type|excess type|excess kind|excess basis|ded type|deductible basis|ded basis|ded kind|wind ded type',
    likely: 'wind deductible type|deductible unit',
    guess: 'deductibletype',
  },
  deductible_value: {
    sure: 'deductible value|deductible|ded|wind deductible|wind ded|deductible amount|ded amount|ded value|hurricane deductible|named storm deductible|site deductible',
    likely:
      'excess|excess amount|retention|wind storm deductible|windstorm deductible|hurricane ded|ns ded|location deductible|loc ded|ded amt',
    guess: 'deductible',
  },
  site_limit: {
    sure: 'site limit|limit|location limit|loc limit|limit of liability|site limit value',
    likely: 'policy limit per site|limit amount|sublimit|sub limit|loss limit',
    guess: 'limit',
  },
  line_of_business: {
    sure: 'line of business|lob|business line|class of business',
    likely: 'line|segment|product|class|division',
    guess: 'lineofbus',
  },
};

type Known = { field: SiteField; confidence: z.infer<typeof Confidence> };
const exact = new Map<string, Known>();
const hints: { word: string; field: SiteField }[] = [];
for (const confidence of ['sure', 'likely'] as const) {
  for (const [field, words] of Object.entries(HEADERS) as [SiteField, Words][]) {
    for (const word of [confidence === 'sure' ? field : '', ...words[confidence].split('|')]) {
      const key = bare(word);
      if (key && !exact.has(key)) exact.set(key, { field, confidence });
    }
  }
}
for (const [field, words] of Object.entries(HEADERS) as [SiteField, Words][]) {
  for (const word of words.guess.split('|')) hints.push({ word: bare(word), field });
}

/** What one header alone suggests, blind to currency words and bracketed units. */
function suggestionFor(header: string): Known | null {
  const whole = bare(header);
  if (!whole) return null;
  const known = exact.get(whole);
  if (known) return known;
  const stripped = bare(
    header.replace(/\([^)]*\)|\[[^\]]*\]/g, ' ').replace(/\b(?:usd|eur|gbp|aud|cad|us\$)\b|[$€£]/gi, ' '),
  );
  const withoutUnit = exact.get(stripped);
  if (withoutUnit) return { field: withoutUnit.field, confidence: 'likely' };
  const hint = hints.find(({ word }) => whole.includes(word));
  return hint ? { field: hint.field, confidence: 'guess' } : null;
}

const RANK = { sure: 0, likely: 1, guess: 2 };

/** One suggestion a column and no field twice: the surest header has it, then the leftmost. */
export function suggestColumns(headers: readonly string[]): (Known | null)[] {
  const found = headers.map(suggestionFor);
  const order = found
    .map((known, index) => ({ known, index }))
    .filter((entry): entry is { known: Known; index: number } => entry.known !== null)
    .sort((a, b) => RANK[a.known.confidence] - RANK[b.known.confidence] || a.index - b.index);
  const taken = new Set<SiteField>();
  const suggestions: (Known | null)[] = headers.map(() => null);
  for (const { known, index } of order) {
    if (taken.has(known.field)) continue;
    taken.add(known.field);
    suggestions[index] = known;
  }
  return suggestions;
}

/** How many headers of a line we know outright or nearly; a line of two or more is a header row. */
export const knownHeaders = (cells: readonly string[]): number =>
  cells.filter((cell) => exact.has(bare(cell)) || suggestionFor(cell)?.confidence === 'likely').length;

/** Whether a header says that its amounts stand in thousands. */
export const saysThousands = (header: string): boolean =>
  /(?:^|[^0-9,.])['’]?000s?\b|\(k\)|\bthousands?\b|\bin k\b|[$€£]k\b/i.test(header);
