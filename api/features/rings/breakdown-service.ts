import { noticesFor } from '#contract/notices.ts';
import type { BreakdownReply, BreakdownRequest } from '#contract/rings.ts';
import { EngineRefusal, type EnginePool } from '../../compute/pool.ts';
import { AppError } from '../../errors.ts';
import { breakdownFaults, setupOf } from './breakdown-setup.ts';

/** Lets so many through at a time. */
interface Gate {
  pass<T>(signal: AbortSignal, work: () => Promise<T>): Promise<T>;
}

export interface BreakdownParts {
  pool: EnginePool;
  gate: Gate;
  engineVersion: () => string;
}

/** How a ring breaks down, computed at once for the caller; nothing is stored. */
export class BreakdownService {
  constructor(private readonly parts: BreakdownParts) {}

  async breakdown(request: BreakdownRequest, signal: AbortSignal): Promise<BreakdownReply> {
    const { pool, gate, engineVersion } = this.parts;
    const faults = breakdownFaults(request);
    if (faults.length > 0) throw new AppError('invalid_request', faults[0]!.message, { faults });
    const setup = setupOf(request);
    const frames = await gate
      .pass(signal, () => pool.run('breakdown', { setup, withVorticity: request.frames }, signal))
      .catch((error: unknown) => {
        if (!(error instanceof EngineRefusal)) throw error;
        throw new AppError('invalid_request', `No breakdown: ${error.message}.`, {
          faults: [{ path: 'body', message: error.message }],
          cause: error,
        });
      });
    return {
      engineVersion: engineVersion(),
      setup: request,
      sideM: setup.sideInRadii * setup.radiusOfMaxWind,
      frames: frames.map((frame) => ({
        timeS: frame.timeS,
        maxWindMs: frame.maxWind,
        meanMaxWindMs: frame.meanMaxWind,
        radiusOfMeanMaxM: frame.radiusOfMeanMax,
        minPressurePa: frame.minPressure,
        vortices: frame.vortices,
        energyShare: frame.energyShare,
        enstrophyShare: frame.enstrophyShare,
        circulationResidual: frame.circulationResidual,
        vorticityPerS: [...frame.vorticity],
      })),
      notices: noticesFor('life-safety', 'uncertainty', 'scope'),
    };
  }
}
