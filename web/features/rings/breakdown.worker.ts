import { DomainError } from '#engine/errors.ts';
import { breakdown, DEFAULT_BREAKDOWN } from '#engine/ring/breakdown.ts';
import { SIDE_IN_RADII, type FilmAnswer, type FilmAsked } from './film.ts';

/** The engine's own breakdown, frame by frame, away from the page's thread. Ending the worker ends the work. */
const answer = (message: FilmAnswer, transfer: Transferable[] = []) => self.postMessage(message, { transfer });

self.onmessage = ({ data: { order, whole } }: MessageEvent<FilmAsked>) => {
  try {
    const frames = breakdown({
      ...DEFAULT_BREAKDOWN,
      maxWind: order.maxWindMs,
      radiusOfMaxWind: order.radiusOfMaxWindM,
      widthFraction: order.ringWidthFraction,
      eyeRatio: order.eyeVorticityRatio,
      points: order.points,
      sideInRadii: SIDE_IN_RADII,
      durationS: order.durationS,
      frameStepS: order.frameStepS,
      relaxationS: order.relaxationS,
    });
    for (const frame of frames) {
      answer(
        {
          frame: {
            timeS: frame.timeS,
            vorticity: frame.vorticity,
            maxWindMs: frame.maxWind,
            meanMaxWindMs: frame.meanMaxWind,
            radiusOfMeanMaxM: frame.radiusOfMeanMax,
            minPressurePa: frame.minPressure,
            vortices: frame.vortices,
            energyShare: frame.energyShare,
            enstrophyShare: frame.enstrophyShare,
            circulationResidual: frame.circulationResidual,
          },
        },
        [frame.vorticity.buffer],
      );
      if (!whole) break;
    }
    answer({ done: true });
  } catch (error) {
    if (!(error instanceof DomainError)) throw error;
    answer({ refused: error.message });
  }
};
