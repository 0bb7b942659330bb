import { createHash } from 'node:crypto';
import type { VortexObservation } from '#contract/observed-vortices.ts';
import type { Fix, Track } from '#contract/scenarios.ts';

/** Only where given, so that tracks saved before these radii were read keep their digest. */
const outerRadii = ({ radius34KtM, radius50KtM }: Fix) =>
  (radius34KtM ?? radius50KtM ?? null) === null ? [] : [radius34KtM ?? null, radius50KtM ?? null];

const sightingOf = (seen: VortexObservation) => [
  seen.kind,
  new Date(seen.time).toISOString(),
  seen.uncertaintyDeg,
  ...(seen.kind === 'maxima'
    ? [seen.azimuthsDeg]
    : [seen.longAxisBearingDeg, seen.majorM, seen.minorM, seen.rotationPeriodMinutes]),
];

/**
 * Digest of what a track says: its fixes, declarations and observed vortices in a fixed order of fields.
 *
 * The name of the scenario isn't part of it, so the same track under another name is recognised.
 */
export const trackDigest = ({ fixes, declarations, vortices }: Track): string => {
  const canonical = [
    'track-1',
    declarations.windAveragingS,
    declarations.source,
    declarations.asOf,
    fixes.map((fix) => [
      new Date(fix.time).toISOString(),
      fix.latitude,
      fix.longitude,
      fix.centralPressureHpa,
      fix.ambientPressureHpa,
      fix.maxWindMs,
      fix.radiusOfMaxWindM,
      fix.radius64KtM,
      fix.ringWidthFraction,
      fix.eyeVorticityRatio,
      fix.hoursInland,
      ...outerRadii(fix),
    ]),
    ...(vortices?.length ? [vortices.map(sightingOf)] : []),
  ];
  return createHash('sha256').update(JSON.stringify(canonical)).digest('hex');
};
