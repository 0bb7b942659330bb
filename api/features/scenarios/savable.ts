import { AppError } from '../../errors.ts';
import type { Resolved } from './resolve-track.ts';
import { isSavable } from './track-rules.ts';

/** The resolved track, refused with every finding that keeps it from being saved. */
export const savable = (resolved: Resolved): Resolved => {
  const { findings } = resolved.resolution;
  if (isSavable(findings)) return resolved;
  const faults = findings
    .filter(({ severity }) => severity !== 'note')
    .map(({ code, fix, text }) => ({
      code,
      path: fix === null ? 'body.track' : `body.track.fixes.${fix}`,
      message: text,
    }));
  throw new AppError(
    'track_unreadable',
    faults.length === 1 ? faults[0]!.message : `${faults.length} things keep this track from being saved.`,
    { faults },
  );
};
