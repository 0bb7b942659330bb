import type { LocationQuality, RowState, SiteField } from '#contract/portfolios.ts';
import type { z } from 'zod';

interface FieldGroup {
  title: string;
  need: string;
  fields: readonly SiteField[];
}

/** Our fields by need: what a site can't be scored without comes first. */
export const FIELD_GROUPS: readonly FieldGroup[] = [
  { title: 'Which site, and where', need: 'needed to score', fields: ['site_ref', 'latitude', 'longitude'] },
  {
    title: 'Values',
    need: 'one at least',
    fields: [
      'building_value',
      'other_structures_value',
      'contents_value',
      'time_element_value',
      'total_value',
      'currency',
    ],
  },
  {
    title: 'Policy terms',
    need: 'gross is overstated without',
    fields: ['deductible_kind', 'deductible_value', 'site_limit'],
  },
  {
    title: 'Building',
    need: 'assumed when blank',
    fields: ['construction', 'occupancy', 'year_built', 'storeys', 'terrain'],
  },
  {
    title: 'Place',
    need: 'for checks and quality',
    fields: ['location_quality', 'street', 'town', 'region', 'postcode', 'country'],
  },
  {
    title: 'Names and references',
    need: 'optional',
    fields: ['site_label', 'account_ref', 'policy_ref', 'line_of_business'],
  },
];

export const FIELD_NAMES: Record<SiteField, string> = {
  site_ref: 'Site reference',
  site_label: 'Site label',
  account_ref: 'Account reference',
  policy_ref: 'Policy reference',
  latitude: 'Latitude',
  longitude: 'Longitude',
  location_quality: 'Location quality',
  street: 'Street',
  town: 'Town',
  region: 'Region',
  postcode: 'Postcode',
  country: 'Country',
  building_value: 'Building value',
  other_structures_value: 'Other structures value',
  contents_value: 'Contents value',
  time_element_value: 'Time element value',
  total_value: 'Total value',
  currency: 'Currency',
  construction: 'Construction',
  occupancy: 'Occupancy',
  year_built: 'Year built',
  storeys: 'Storeys',
  terrain: 'Terrain',
  deductible_kind: 'Deductible kind',
  deductible_value: 'Deductible value',
  site_limit: 'Site limit',
  line_of_business: 'Line of business',
};

export const VALUE_FIELDS: readonly SiteField[] = [
  'building_value',
  'other_structures_value',
  'contents_value',
  'time_element_value',
  'total_value',
];

export const STATE_NAMES: Record<RowState, string> = {
  ready: 'Ready',
  notes: 'With notes',
  held: 'Held',
  set_aside: 'Set aside',
};

export const QUALITY_NAMES: Record<z.infer<typeof LocationQuality>, string> = {
  building: 'Building',
  parcel: 'Parcel',
  placed_by_hand: 'Placed by hand',
  street: 'Street',
  postcode: 'Postcode',
  town: 'Town',
  region: 'Region',
  unknown: 'Unknown',
};
/** From postcode down, eyewall gradients within the class can matter more than the building. */
export const POOR_QUALITIES: readonly z.infer<typeof LocationQuality>[] = ['postcode', 'town', 'region', 'unknown'];

/** Attribute names as the service lists them, in words. */
export const attributeName = (attribute: string): string =>
  (FIELD_NAMES as Record<string, string>)[attribute] ??
  attribute.charAt(0).toUpperCase() + attribute.slice(1).replaceAll('_', ' ');
