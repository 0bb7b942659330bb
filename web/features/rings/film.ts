import { WIDTH_LIMITS, type RingStudy } from './ring-study.ts';

/** What a breakdown is computed from. */
export interface FilmOrder {
  maxWindMs: number;
  radiusOfMaxWindM: number;
  ringWidthFraction: number;
  eyeVorticityRatio: number;
  points: number;
  durationS: number;
  frameStepS: number;
  /** Time over which heating rebuilds the ring; null = left alone. */
  relaxationS: number | null;
}

/** The flow at one time; vorticity in rows of equal y from the bottom up, anticlockwise flow. */
export interface FilmFrame {
  timeS: number;
  vorticity: Float32Array;
  maxWindMs: number;
  meanMaxWindMs: number;
  radiusOfMeanMaxM: number;
  minPressurePa: number;
  vortices: number;
  energyShare: number;
  enstrophyShare: number;
  circulationResidual: number;
}

/** To the worker: the whole film, or only the ring it starts from. */
export interface FilmAsked {
  order: FilmOrder;
  whole: boolean;
}
export type FilmAnswer = { frame: FilmFrame } | { refused: string } | { done: true };

/** Side of the square the flow lives in, in radii of maximum wind. */
export const SIDE_IN_RADII = 7;
export const FRAMES = 36;
const SECONDS_PER_HOUR = 3600;

export const orderOf = (study: RingStudy): FilmOrder => ({
  maxWindMs: study.maxWindMs,
  radiusOfMaxWindM: study.radiusKm * 1000,
  ringWidthFraction: Math.min(WIDTH_LIMITS.most, Math.max(WIDTH_LIMITS.least, study.width)),
  eyeVorticityRatio: study.eye,
  points: study.points,
  durationS: study.hours * SECONDS_PER_HOUR,
  frameStepS: (study.hours * SECONDS_PER_HOUR) / FRAMES,
  relaxationS: study.heatingMin === null ? null : study.heatingMin * 60,
});

/** "2:30", hours and minutes. */
export const filmClock = (timeS: number): string => {
  const minutes = Math.round(timeS / 60);
  return `${Math.floor(minutes / 60)}:${String(minutes % 60).padStart(2, '0')}`;
};
/** "2 h 30 min". */
export const filmTime = (timeS: number): string => {
  const minutes = Math.round(timeS / 60);
  if (minutes < 60) return `${minutes} min`;
  return `${Math.floor(minutes / 60)} h ${String(minutes % 60).padStart(2, '0')} min`;
};
