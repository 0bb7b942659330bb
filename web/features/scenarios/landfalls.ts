import type { Variant } from '#contract/variants.ts';
import { placeByTrack } from '../../ui/map/geography.ts';

type Landfall = NonNullable<Variant['landfall']>;

const EARTH_KM = 6371;
const radians = (degrees: number) => (degrees * Math.PI) / 180;

/** How far one place is from another [km]. */
const apartKm = (a: Landfall, b: Landfall): number => {
  const north = radians(a.latitude - b.latitude);
  const east = radians(a.longitude - b.longitude) * Math.cos(radians((a.latitude + b.latitude) / 2));
  return EARTH_KM * Math.hypot(north, east);
};

/**
 * Where a variant comes ashore, seen from where the central track does: km to the right of that track's way when positive.
 * Null when either never comes ashore.
 */
export const shiftKm = (base: Variant, variant: Variant): number | null => {
  if (!base.landfall || !variant.landfall) return null;
  const place = placeByTrack(base.path, [variant.landfall.longitude, variant.landfall.latitude]);
  const distance = apartKm(base.landfall, variant.landfall);
  return place?.side === 'left' ? -distance : distance;
};

/** "30.14° N, 85.42° W" */
export const placeWords = ({ latitude, longitude }: Landfall): string => {
  const wrapped = longitude - 360 * Math.round(longitude / 360);
  const of = (degrees: number, plus: string, minus: string) =>
    `${Math.abs(degrees).toFixed(2)}° ${degrees < 0 ? minus : plus}`;
  return `${of(latitude, 'N', 'S')}, ${of(wrapped, 'E', 'W')}`;
};
