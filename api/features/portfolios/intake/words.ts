import type { z } from 'zod';
import type { LocationQuality, Terrain } from '#contract/portfolios.ts';

/** Text of a cell or a header without case, spaces and punctuation. */
export const bare = (text: string): string =>
  text
    .normalize('NFKD')
    .replace(/[\u0300-\u036f]/g, '')
    .toLowerCase()
    .replace(/²/g, '2')
    .replace(/[^a-z0-9%]/g, '');

/** A word list: each class with the words that name it; the class itself always does. */
function wordList<Class extends string>(list: Readonly<Record<Class, string>>): (text: string) => Class | null {
  const classes = new Map<string, Class>();
  for (const [name, words] of Object.entries(list) as [Class, string][]) {
    classes.set(bare(name), name);
    for (const word of words.split('|')) if (word) classes.set(bare(word), name);
  }
  const read = new Map<string, Class | null>();
  return (text) => {
    let named = read.get(text);
    if (named === undefined) {
      named = classes.get(bare(text)) ?? null;
      // Schedules use few words many times; a column of free text isn't worth remembering.
      if (read.size < 2000) read.set(text, named);
    }
    return named;
  };
}

export const constructionNamed = wordList({
  'light wood frame': 'wood|wood frame|frame|timber frame|stick built|wf|wooden|wood-frame',
  'heavy timber': 'heavy timber frame|mass timber|log',
  'unreinforced masonry': 'urm|brick|unreinforced brick|plain masonry|stone',
  'reinforced masonry': 'rm|cbs|reinforced block|concrete block|conc blk|cmu|reinforced cmu|masonry|block',
  'masonry walls with wood roof': 'joisted masonry|jm|masonry wood roof|masonry veneer|brick veneer',
  'light metal': 'light metal frame|pre-engineered metal|pemb|metal|light metal (pre-engineered)|cold formed steel',
  'steel frame': 'steel|structural steel|protected steel|fire resistive steel',
  'reinforced concrete': 'rc|concrete|cast in place concrete|reinforced concrete (cast)|fire resistive|superior',
  'precast concrete': 'tilt-up|tiltup|tilt up concrete|precast|precast/tilt-up concrete|precast tilt-up',
  'manufactured home, not tied down': 'manufactured home|mobile home|trailer|manufactured home not tied down',
  'manufactured home, tied down': 'mobile home tied down|manufactured home tied',
  mixed: 'mixed construction|various',
  unknown: 'n/a|na|tbd|tba|other|not known|unk|none',
});

export const occupancyNamed = wordList({
  'single-family home': 'single family|single family home|single family dwelling|sfd|sfr|house|dwelling|home|villa',
  'multi-family low-rise': 'multi family|multifamily|apartment|apartments|flats|garden apartments|duplex',
  'condominium unit': 'condo unit|condominium unit (interior)|ho6|unit owner',
  'condominium association': 'condo|condominium|condo association|condominium association (building)|hoa',
  hotel: 'hotels|motel|resort|lodging|inn|guest house',
  office: 'offices|office building|professional',
  retail: 'shop|store|shopping|mercantile|shops|mall',
  restaurant: 'cafe|bar|food service',
  warehouse: 'warehouse/light industrial|light industrial|storage|distribution|self storage',
  'heavy industrial': 'industrial|manufacturing|factory|plant',
  hospital: 'hospital/clinic|clinic|medical|health care|healthcare',
  school: 'education|college|university|day care',
  'place of worship': 'church|mosque|temple|worship|religious',
  public: 'government|public/government|municipal|fire station|civic',
  agricultural: 'farm|barn|agriculture|greenhouse',
  marina: 'marina/waterfront|waterfront|dock|boatyard',
  utility: 'solar|solar/utility structure|power|utilities|substation',
  'under construction': "builder's risk|builders risk|course of construction|coc|builder's risk (under construction)",
  unknown: 'n/a|na|tbd|tba|other|not known|unk|none',
});

export const terrainNamed = wordList<z.infer<typeof Terrain>>({
  water_edge: 'open water edge|waterfront|water|coastal|exposure d|d|beach|beachfront|shore',
  open: 'open terrain|open country|flat|exposure c|c|rural|grass|farmland',
  suburban: 'suburb|exposure b|b|residential|urban and suburban',
  wooded: 'forest|trees|woodland|wood',
  dense_urban: 'urban|city|city centre|downtown|exposure a|a|dense',
  unknown: 'n/a|na|tbd|tba|not known|unk|none',
});

export const qualityNamed = wordList<z.infer<typeof LocationQuality>>({
  building: 'rooftop|building footprint|exact|roof top|gps|survey',
  parcel: 'lot|plot|parcel centroid',
  placed_by_hand: 'manual|by hand|hand placed|user placed|pinned',
  street: 'address|street address|interpolated|block|road|range interpolated',
  postcode: 'zip|zip code|zipcode|postal code|post code|zip5|zip centroid',
  town: 'city|city centroid|town centroid|municipality|locality',
  region: 'state|county|province|state centroid|county centroid',
  unknown: 'n/a|na|not known|none|unk',
});

export const deductibleKindNamed = wordList({
  none: 'no|nil|n/a|na|0',
  amount: 'fixed|flat|amt|dollar|dollars|usd|money|value|currency',
  'percent of site value':
    '% of site value|percent of site|% of tiv|% site|pct of site value|percent tiv|percent of tiv|% tiv|site value|site percent|percent of value|% of value|percent site value',
  'percent of policy value': '% of policy value|percent of policy|% policy|policy value',
  'percent of limit': '% of limit|percent limit|limit',
  percent: '%|pct|per cent|percentage',
});
