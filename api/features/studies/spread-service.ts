import type { CurveSet } from '#contract/models.ts';
import { INTENSITY_NOTICE } from '#contract/wind-choice-catalogue.ts';
import { NOTICE_VERSION } from '#contract/notices.ts';
import type { SpreadReply, SpreadRequest } from '#contract/studies.ts';
import type { LandIndex } from '#engine/geo/land.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import { PA_PER_HPA } from '#engine/units.ts';
import type { Actor } from '../../actor.ts';
import { EngineRefusal, type EnginePool } from '../../compute/pool.ts';
import type { SpreadReply as Computed } from '../../compute/protocol.ts';
import { AppError, notFound } from '../../errors.ts';
import type { Transact, Tx } from '../../transact.ts';
import { factsOf } from './spread-reasons.ts';
import { baseOf, ranked, rowOf } from './spread-rows.ts';
import { baseTrial, ringSwitches, switchesOf, type SwitchInputs } from './spread-switches.ts';
import { StudyGate } from './study-gate.ts';
import type { StudyEditions, StudyModels, StudyTracks } from './study-ports.ts';
import { studySetup, type StudySetup } from './study-setup.ts';
import { studiedSites } from './study-sites.ts';

export interface SpreadParts {
  transact: Transact;
  tracks: StudyTracks;
  models: StudyModels;
  editions: StudyEditions;
  land: () => LandIndex;
  pool: EnginePool;
  engineVersion: () => string;
}

type Curve = Pick<SwitchInputs, 'curve' | 'curveSetId'> & { words: string };

/** What each setting does when it alone is changed. A spread is one long task of one thread, and one runs at a time. */
export class SpreadService {
  private readonly gate = new StudyGate(1, 4, 10);

  constructor(private readonly parts: SpreadParts) {}

  async spread(actor: Actor, scenarioId: string, request: SpreadRequest, signal: AbortSignal): Promise<SpreadReply> {
    const { transact, pool, engineVersion } = this.parts;
    const { settings } = request;
    const { setup, sites, curve, approved } = await transact(actor, async (tx) => {
      const setup = await studySetup(tx, actor.orgId, scenarioId, request.version, this.parts);
      const sites = await studiedSites(tx, actor.orgId, request, setup.fixes, this.parts);
      return { setup, sites, ...(await this.curves(tx, actor.orgId, request.curveSetId, setup)) };
    });
    const inputs = { settings, fixes: setup.fixes, observations: setup.track.observations, ...curve, approved };
    const switches = request.switches === 'ring' ? ringSwitches(inputs) : switchesOf(inputs);
    const { roughnessM } = sites.batch;
    const onLand = { roughnessM: roughnessM.slice() };
    const task = { base: baseTrial(inputs), trials: switches.map(({ trial }) => trial), sites: sites.batch };
    const computed = await this.gate.pass(signal, () => pool.run('spread', task, signal)).catch(refused);
    const facts = factsOf(settings, setup.fixes, onLand, computed.base);
    const rows = switches.map((tried, i) => rowOf(tried, computed.trials[i]!, facts));
    const intensity = intensityOf(computed);
    const { track } = setup;
    return {
      engineVersion: engineVersion(),
      scenario: { id: scenarioId, name: track.name, version: track.number },
      settings,
      sites: sites.said,
      currency: sites.currency,
      curve: curve.words,
      base: baseOf(computed.base.outcome, sites.refs),
      rows: ranked(rows),
      intensity,
      notices: [
        ...(intensity.differ
          ? [{ code: 'wind-and-pressure-differ', text: INTENSITY_NOTICE, version: NOTICE_VERSION }]
          : []),
        ...setup.notices,
      ],
    };
  }

  /** The one asked for; else the one the signed calibration is paired with, else an approved one, else the reference. */
  private async curves(
    tx: Tx,
    orgId: string,
    curveSetId: string | undefined,
    { calibration }: StudySetup,
  ): Promise<{ curve: Curve; approved: CurveSet[] }> {
    const sets = await this.parts.models.curveSets(tx, orgId);
    const approved = sets.filter(({ state }) => state === 'approved');
    const asked = curveSetId === undefined ? undefined : sets.find(({ id }) => id === curveSetId);
    if (curveSetId !== undefined && !asked) throw notFound('Curve set', curveSetId);
    const set = asked ?? approved.find(({ id }) => id === calibration?.curveSetId) ?? approved[0];
    const curve: Curve = set
      ? { curve: set.curve, curveSetId: set.id, words: `${set.curve.name} (${set.name}, version ${set.version})` }
      : {
          curve: { ...REFERENCE_CURVE, name: 'Reference curve' },
          curveSetId: null,
          words: 'The reference curve: no curve set is approved',
        };
    return { curve, approved };
  }
}

const refused = (error: unknown): never => {
  if (!(error instanceof EngineRefusal)) throw error;
  throw new AppError('invalid_request', `No result with these settings: ${error.message}.`, {
    faults: [{ path: 'body.settings', message: error.message }],
    cause: error,
  });
};

const intensityOf = ({ base }: Computed): SpreadReply['intensity'] => {
  const { fix, pressure, wind, relationB } = base.readings;
  const said = base.storm.notices.some(
    ({ code, text }) => code === 'wind-and-pressure-differ' && text.startsWith(`Fix ${fix + 1}:`),
  );
  return {
    fix,
    centralPressureHpa: base.storm.fixes[fix]!.centralPressurePa / PA_PER_HPA,
    pressure,
    wind,
    relationB,
    differ: said,
  };
};
