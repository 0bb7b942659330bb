import type { ReadTrack } from '#contract/scenarios.ts';
import { looksLikeBestTrack, readBestTrack } from './best-track.ts';
import type { StormText } from './storm-text.ts';
import { looksLikeTrackCsv, readTrackCsv } from './track-csv.ts';

export type TrackText = StormText & { format: 'best-track' | 'track-csv' };

/** Reads a track text in the named format, or in the one it looks like; null when it looks like neither. */
export const readTrackText = ({
  format,
  text,
  storm,
}: Pick<ReadTrack, 'format' | 'text' | 'storm'>): TrackText | null => {
  const chosen =
    format !== 'auto' ? format : looksLikeBestTrack(text) ? 'best-track' : looksLikeTrackCsv(text) ? 'track-csv' : null;
  if (chosen === null) return null;
  return { format: chosen, ...(chosen === 'best-track' ? readBestTrack(text, storm) : readTrackCsv(text, storm)) };
};
