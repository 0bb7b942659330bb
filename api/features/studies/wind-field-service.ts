import type { WindFieldReply, WindFieldRequest } from '#contract/studies.ts';
import type { Actor } from '../../actor.ts';
import { EngineRefusal, type EnginePool } from '../../compute/pool.ts';
import { AppError } from '../../errors.ts';
import type { Transact } from '../../transact.ts';
import { StudyGate } from './study-gate.ts';
import type { StudyModels, StudyTracks } from './study-ports.ts';
import { chainOptionsOf } from './study-settings.ts';
import { studySetup } from './study-setup.ts';

export interface WindFieldParts {
  transact: Transact;
  tracks: StudyTracks;
  models: StudyModels;
  pool: EnginePool;
  engineVersion: () => string;
}

const isoOf = (timeS: number) => new Date(Math.round(timeS * 1000)).toISOString();
const inWords = (timeS: number) => `${isoOf(timeS).slice(0, 16).replace('T', ' ')} UTC`;

/** Profile and wind field of a track at one time; a picture takes a fraction of a second of one thread. */
export class WindFieldService {
  private readonly gate = new StudyGate(1, 20, 3);

  constructor(private readonly parts: WindFieldParts) {}

  async at(actor: Actor, scenarioId: string, request: WindFieldRequest, signal: AbortSignal): Promise<WindFieldReply> {
    const { transact, pool, engineVersion } = this.parts;
    const { track, fixes, notices } = await transact(actor, (tx) =>
      studySetup(tx, actor.orgId, scenarioId, request.version, this.parts),
    );
    const { settings, halfWidthM, points } = request;
    const timeS = Date.parse(request.time) / 1000;
    const first = fixes[0]!.timeS;
    const last = fixes.at(-1)!.timeS;
    if (timeS < first || timeS > last) throw outside(request.time, first, last);
    const field = await this.gate
      .pass(signal, () =>
        pool.run(
          'windField',
          {
            fixes,
            observations: track.observations,
            options: chainOptionsOf(settings),
            question: { timeS, halfWidthM, points },
          },
          signal,
        ),
      )
      .catch((error: unknown) => {
        if (!(error instanceof EngineRefusal)) throw error;
        throw new AppError('invalid_request', `No result: ${error.message}.`, {
          faults: [{ path: 'body.settings', message: error.message }],
          cause: error,
        });
      });
    const { profile, centre, seaWindMs, directionDeg, gustMs } = field;
    return {
      engineVersion: engineVersion(),
      scenario: { id: scenarioId, name: track.name, version: track.number },
      firstTime: isoOf(first),
      lastTime: isoOf(last),
      time: isoOf(field.timeS),
      settings,
      state: {
        ...centre,
        headingDeg: field.headingDeg,
        translationMs: field.translationMs,
        hemisphere: field.hemisphere,
        maxWindMs: field.maxWindMs,
        radiusOfMaxWindM: field.radiusOfMaxWindM,
        shapeB: field.shapeB,
        pressureDeficitPa: field.pressureDeficitPa,
        hoursInland: field.hoursInland,
      },
      profile: {
        radiusM: [...profile.radiusM],
        gradientMs: [...profile.gradientMs],
        meanMs: [...profile.meanMs],
        rightMs: [...profile.rightMs],
        leftMs: [...profile.leftMs],
        aheadMs: [...profile.aheadMs],
        asternMs: [...profile.asternMs],
      },
      field: {
        halfWidthM,
        points,
        seaWindMs: [...seaWindMs],
        directionDeg: [...directionDeg],
        gustMs: [...gustMs],
      },
      notices,
    };
  }
}

const outside = (time: string, first: number, last: number): AppError => {
  const message = `${inWords(Date.parse(time) / 1000)} lies outside the track. Give a time from ${inWords(first)} to ${inWords(last)}.`;
  return new AppError('invalid_request', message, { faults: [{ path: 'body.time', message }] });
};
