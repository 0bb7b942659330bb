import type { Drivers } from '#contract/drivers.ts';
import { MOST_EVALUATED_SITES } from '#contract/evaluations.ts';
import { NOTICE_VERSION } from '#contract/notices.ts';
import { DEFAULT_EYE_RATIO, DEFAULT_RING_WIDTH } from '#engine/ring/stability.ts';
import type { Actor } from '../../actor.ts';
import type { EnginePool } from '../../compute/pool.ts';
import { notFound } from '../../errors.ts';
import type { Transact } from '../../transact.ts';
import { factsOf } from './spread-reasons.ts';
import { baseOf, ranked, rowOf } from './spread-rows.ts';
import { baseTrial, ringSwitches } from './spread-switches.ts';
import type { StudyGate } from './study-gate.ts';
import type { LossSites, StudiedRun, StudiedRuns, StudySite } from './study-ports.ts';
import { settingsOf } from './study-settings.ts';
import { editionBatch } from './study-sites.ts';

export interface DriverParts {
  transact: Transact;
  runs: StudiedRuns;
  sites: LossSites;
  pool: EnginePool;
  engineVersion: () => string;
  gate: StudyGate;
}

type At = { runId: string; runScenarioId: string };
type Chosen = { sites: StudySite[]; of: number };

/** What the ring and its vortices do to a result that is there already: worked out when asked for, stored nowhere. */
export class DriverService {
  constructor(private readonly parts: DriverParts) {}

  async ofEvent(actor: Actor, { runId, runScenarioId }: At, signal: AbortSignal): Promise<Drivers> {
    const { transact, runs, sites } = this.parts;
    const { run, chosen } = await transact(actor, async (tx) => {
      const run = await runs.require(tx, actor.orgId, runId, runScenarioId);
      return { run, chosen: await sites.largest(tx, actor.orgId, run, MOST_EVALUATED_SITES) };
    });
    return this.work(run, chosen, eventRule(chosen), signal);
  }

  async ofSite(actor: Actor, { runId, runScenarioId }: At, siteNo: number, signal: AbortSignal): Promise<Drivers> {
    const { transact, runs, sites } = this.parts;
    const { run, site } = await transact(actor, async (tx) => {
      const run = await runs.require(tx, actor.orgId, runId, runScenarioId);
      return { run, site: await sites.one(tx, actor.orgId, run, siteNo) };
    });
    if (site === null) throw notFound('Site within reach of this track', siteNo);
    return this.work(run, { sites: [site], of: 1 }, `Site ${site.ref} alone.`, signal);
  }

  private async work(run: StudiedRun, { sites, of }: Chosen, rule: string, signal: AbortSignal): Promise<Drivers> {
    const { pool, engineVersion, gate } = this.parts;
    const { fixes, observations, options, damageCurve } = run;
    const inputs = {
      settings: settingsOf(options),
      curve: damageCurve,
      curveSetId: null,
      approved: [],
      ...{ fixes, observations },
    };
    const switches = ringSwitches(inputs);
    const batch = editionBatch(sites);
    const ground = { roughnessM: batch.roughnessM.slice() };
    const task = { base: baseTrial(inputs), trials: switches.map(({ trial }) => trial), sites: batch };
    const computed = await gate.pass(signal, () => pool.run('spread', task, signal));
    const facts = factsOf(inputs.settings, fixes, ground, computed.base);
    const refs = sites.map(({ ref }) => ref);
    return {
      engineVersion: engineVersion(),
      sites: { used: sites.length, of, rule },
      currency: run.currency,
      curve: run.curve,
      base: baseOf(computed.base.outcome, refs),
      rows: ranked(switches.map((tried, i) => rowOf(tried, computed.trials[i]!, facts))),
      ring: {
        width: rangeOf(fixes.map(({ ringWidthFraction }) => ringWidthFraction ?? DEFAULT_RING_WIDTH)),
        eyeRatio: rangeOf(fixes.map(({ eyeVorticityRatio }) => eyeVorticityRatio ?? DEFAULT_EYE_RATIO)),
      },
      mesovortices: options.mesovortices,
      notices: [...otherEngine(run, engineVersion()), ...run.notices],
    };
  }
}

const rangeOf = (values: readonly number[]): [number, number] => [Math.min(...values), Math.max(...values)];

const number = (n: number) => n.toLocaleString('en');

const eventRule = ({ sites, of }: Chosen): string => {
  if (of === 0) return 'No site of this run is within 1000 km of the track.';
  return sites.length < of
    ? `The ${number(sites.length)} sites with the largest gross, of ${number(of)} within 1000 km of the track.`
    : `All ${number(of)} sites within 1000 km of the track.`;
};

const otherEngine = ({ runNumber, engineVersion }: StudiedRun, now: string): Drivers['notices'] =>
  engineVersion === now
    ? []
    : [
        {
          code: 'other-engine',
          text: `Run ${runNumber} was computed with engine ${engineVersion}; this was worked out with ${now}, so its base may differ from the stored result.`,
          version: NOTICE_VERSION,
        },
      ];
