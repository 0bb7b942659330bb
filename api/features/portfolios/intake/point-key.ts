import type { Received } from './file-row.ts';

/** One number for coordinates given as plain decimal degrees, to five decimals (about a metre); null for any others. */
export function pointKey({ latitude, longitude }: Received): number | null {
  if (!latitude || !longitude) return null;
  const y = Math.round(Number(latitude) * 1e5);
  const x = Math.round(Number(longitude) * 1e5);
  return Math.abs(y) <= 18e6 && Math.abs(x) <= 18e6 ? (y + 18e6) * 4e7 + (x + 18e6) : null;
}
