import type { Fix, IntakeRow } from '#contract/portfolios.ts';

/** What a row's place would become, computed only to show it; the service applies the fix. */
export const placeAfter = (row: IntakeRow, fix: Fix): { latitude: string; longitude: string } | null => {
  const latitude = row.received.latitude ?? '';
  const longitude = row.received.longitude ?? '';
  if (fix === 'swap_coordinates') return { latitude: longitude, longitude: latitude };
  if (fix === 'negate_longitude') return { latitude, longitude: negated(longitude) };
  return null;
};

const negated = (text: string) =>
  /^[-−]/.test(text.trim()) ? text.trim().slice(1) : `−${text.trim().replace(/^\+/, '')}`;

export const trueMinus = (text: string): string => text.replace(/^-/, '−');

/** Words of each fix: what it does, and what the rows become. */
export const FIX_EFFECTS: Record<Fix, string> = {
  swap_coordinates: 'They become Ready with notes. Values as received are kept, and you can undo until sealing.',
  negate_longitude: 'They become Ready with notes. Values as received are kept, and you can undo until sealing.',
  exclude: 'They are set aside with your reason and not scored. You can undo until sealing.',
  keep_all: 'They count as sites of their own again. You can undo until sealing.',
};
