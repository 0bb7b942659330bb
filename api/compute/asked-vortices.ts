import { observedAt, type VortexObservation } from '#contract/observed-vortices.ts';
import type { ObservedVortices } from '#engine/ring/observed-vortices.ts';

const SECONDS_PER_MINUTE = 60;

/** Observed vortices as the engine takes them: seconds since 1970. Left out = none. */
export const engineObservations = (observations: readonly VortexObservation[] | undefined): ObservedVortices[] =>
  (observations ?? []).map((seen) => {
    const common = {
      timeS: Date.parse(seen.time) / 1000,
      timeLabel: observedAt(seen.time),
      uncertaintyDeg: seen.uncertaintyDeg,
    };
    if (seen.kind === 'maxima') return { kind: seen.kind, ...common, azimuthsDeg: seen.azimuthsDeg };
    const { kind, longAxisBearingDeg, majorM, minorM, rotationPeriodMinutes: minutes } = seen;
    const rotationPeriodS = minutes === null ? null : minutes * SECONDS_PER_MINUTE;
    return { kind, ...common, longAxisBearingDeg, majorM, minorM, rotationPeriodS };
  });
