import type { z } from 'zod';
import type { VortexObservation } from '#contract/observed-vortices.ts';
import type { Averaging, Fix, Track, TrackDeclarations } from '#contract/scenarios.ts';

export type AveragingSeconds = z.infer<typeof Averaging>;
/** A fix while it is typed: place and time may still be missing. Stored in m/s, m and hPa whatever unit is shown. */
export type DraftFix = Omit<Fix, 'time' | 'latitude' | 'longitude'> & {
  time: string | null;
  latitude: number | null;
  longitude: number | null;
};
export interface TrackDraft {
  fixes: readonly DraftFix[];
  windAveragingS: AveragingSeconds | null;
  source: string;
  asOf: string | null;
  vortices: readonly VortexObservation[];
}

export const emptyFix = (): DraftFix => ({
  time: null,
  latitude: null,
  longitude: null,
  centralPressureHpa: null,
  ambientPressureHpa: null,
  maxWindMs: null,
  radiusOfMaxWindM: null,
  radius34KtM: null,
  radius50KtM: null,
  radius64KtM: null,
  ringWidthFraction: null,
  eyeVorticityRatio: null,
  hoursInland: null,
});

export const draftOf = ({ fixes, declarations, vortices }: Track): TrackDraft => ({
  fixes,
  windAveragingS: declarations.windAveragingS,
  source: declarations.source,
  asOf: declarations.asOf,
  vortices: vortices ?? [],
});

const isComplete = (fix: DraftFix): fix is Fix => fix.time !== null && fix.latitude !== null && fix.longitude !== null;

/** Where a track is looked at first: its largest entered wind, else its lowest pressure. */
export const strongestFix = (fixes: readonly DraftFix[]): number =>
  fixes.reduce((best, fix, index) => {
    const strongest = fixes[best]!;
    const byWind = (fix.maxWindMs ?? 0) - (strongest.maxWindMs ?? 0);
    const byPressure = (strongest.centralPressureHpa ?? Infinity) > (fix.centralPressureHpa ?? Infinity);
    return byWind > 0 || (byWind === 0 && byPressure) ? index : best;
  }, 0);

/** The draft as it is sent, or null while something that can't be filled is missing. */
export const trackOf = (draft: TrackDraft): Track | null => {
  if (draft.windAveragingS === null || draft.fixes.length === 0 || !draft.fixes.every(isComplete)) return null;
  const declarations: z.output<typeof TrackDeclarations> = {
    windAveragingS: draft.windAveragingS,
    source: draft.source,
    asOf: draft.asOf,
  };
  const fixes = draft.fixes.filter(isComplete);
  return draft.vortices.length === 0 ? { fixes, declarations } : { fixes, declarations, vortices: [...draft.vortices] };
};

/** Why the draft can't be saved or resolved yet, in the person's words; null when it can. */
export const missingFrom = (draft: TrackDraft): string | null => {
  if (draft.fixes.length === 0) return 'Add the first fix.';
  const open = draft.fixes.findIndex((fix) => !isComplete(fix));
  if (open !== -1) return `Fix ${open + 1} still needs its time, latitude and longitude.`;
  if (draft.windAveragingS === null) return 'Declare how long the winds were averaged.';
  return null;
};

export const withFix = (draft: TrackDraft, row: number, change: Partial<DraftFix>): TrackDraft => ({
  ...draft,
  fixes: draft.fixes.map((fix, index) => (index === row ? { ...fix, ...change } : fix)),
});

const HOUR_MS = 3_600_000;
const DEFAULT_STEP_MS = 6 * HOUR_MS;

/** A new fix after the given one: half-way to the next, or one step on along the last leg. */
export const withFixAfter = (draft: TrackDraft, row: number): TrackDraft => {
  const before = draft.fixes[row];
  const after = draft.fixes[row + 1];
  const earlier = draft.fixes[row - 1];
  const added = emptyFix();
  const between = (a: number | null, b: number | null) => (a === null || b === null ? null : (a + b) / 2);
  if (before && isComplete(before)) {
    const time = Date.parse(before.time);
    if (after && isComplete(after)) {
      added.time = new Date((time + Date.parse(after.time)) / 2).toISOString();
      added.latitude = between(before.latitude, after.latitude);
      // A leg across ±180 has no middle in plain degrees; the person types it.
      added.longitude =
        Math.abs(before.longitude - after.longitude) < 180 ? between(before.longitude, after.longitude) : null;
    } else {
      const step = earlier?.time ? time - Date.parse(earlier.time) : DEFAULT_STEP_MS;
      added.time = new Date(time + step).toISOString();
    }
  }
  const fixes = [...draft.fixes];
  fixes.splice(row + 1, 0, added);
  return { ...draft, fixes };
};

export const withoutFix = (draft: TrackDraft, row: number): TrackDraft => ({
  ...draft,
  fixes: draft.fixes.filter((_, index) => index !== row),
});

const KM_PER_DEG = 111.195;

/** Moves a fix on the ground [km]. */
export const withFixMoved = (draft: TrackDraft, row: number, northKm: number, eastKm: number): TrackDraft => {
  const fix = draft.fixes[row];
  if (!fix || fix.latitude === null || fix.longitude === null) return draft;
  const latitude = Math.max(-90, Math.min(90, fix.latitude + northKm / KM_PER_DEG));
  const eastDeg = eastKm / (KM_PER_DEG * Math.max(0.05, Math.cos((fix.latitude * Math.PI) / 180)));
  const longitude = ((((fix.longitude + eastDeg + 180) % 360) + 360) % 360) - 180;
  return withFix(draft, row, { latitude: rounded(latitude, 4), longitude: rounded(longitude, 4) });
};

const rounded = (value: number, decimals: number) => Math.round(value * 10 ** decimals) / 10 ** decimals;

/** One pressure outside for the whole track; null leaves it to be filled. */
export const withAmbientPressure = (draft: TrackDraft, hpa: number | null): TrackDraft => ({
  ...draft,
  fixes: draft.fixes.map((fix) => ({ ...fix, ambientPressureHpa: hpa })),
});
