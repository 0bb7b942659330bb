import { z } from 'zod';
import { Instant } from './common.ts';

const between = (least: number, most: number, unit: string) =>
  z.number().min(least, `Give ${least} to ${most}${unit}.`).max(most, `Give ${least} to ${most}${unit}.`);
const bearing = between(0, 360, ' degrees');

const sighting = {
  /** Within the track. */
  time: Instant,
  /** Standard error of the bearings. */
  uncertaintyDeg: between(1, 60, ' degrees'),
};

export const ObservedMaxima = z.strictObject({
  kind: z.literal('maxima'),
  ...sighting,
  /** Bearings of the local maxima around the eye, seen from the centre. */
  azimuthsDeg: z.array(bearing).min(2, 'Give 2 to 8 bearings.').max(8, 'Give 2 to 8 bearings.'),
});

export const ObservedEllipse = z
  .strictObject({
    kind: z.literal('ellipse'),
    ...sighting,
    /** Of either end. */
    longAxisBearingDeg: bearing,
    /** Semi-axes. */
    majorM: between(1000, 500_000, ' m'),
    minorM: between(1000, 500_000, ' m'),
    /** Of a whole turn; null when it wasn’t seen. */
    rotationPeriodMinutes: between(10, 600, ' min').nullable().default(null),
  })
  .refine(({ majorM, minorM }) => minorM <= majorM, {
    path: ['minorM'],
    message: 'The short axis can’t be longer than the long one.',
  });

/** What radar or satellite showed of a storm’s vortices at one time. */
export const VortexObservation = z.discriminatedUnion('kind', [ObservedMaxima, ObservedEllipse]);
export type VortexObservation = z.infer<typeof VortexObservation>;

/** Left out = none. */
export const VortexObservations = z.array(VortexObservation).max(20, 'At most 20 observations.').optional();

/** A moment as results tell it. */
export const observedAt = (time: string): string =>
  `${new Date(time).toISOString().slice(0, 16).replace('T', ' ')} UTC`;

/** What results of a track with observations are labelled, null without any. */
export const conditionedLabel = (observations: readonly VortexObservation[] | undefined): string | null => {
  if (!observations?.length) return null;
  const counts = [...new Set(observations.map((seen) => (seen.kind === 'ellipse' ? 2 : seen.azimuthsDeg.length)))];
  return `Conditioned on ${counts.join(' or ')} observed vortices at ${observations.map(({ time }) => observedAt(time)).join(', ')}`;
};
