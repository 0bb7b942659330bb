import type { Reconciliation } from '#contract/portfolios.ts';
import type { Purpose, RunOptions, RunState, ScenarioResult } from '#contract/runs.ts';
import { toMinor, toMinorOrNull } from '../../db/mapping.ts';
import type { Tx } from '../../transact.ts';

export type ScenarioState = 'waiting' | 'building' | 'scoring' | 'stored' | 'failed' | 'cancelled';

/** What a finished track keeps of the way its storm was resolved. */
export interface ResolutionWords {
  filled: string[];
}

export interface ScenarioRecord {
  id: string;
  runId: string;
  seq: number;
  scenarioVersionId: string;
  state: ScenarioState;
  sitesDone: number;
  sitesTotal: number;
  units: number;
  restarts: number;
  error: string | null;
  result: ScenarioResult | null;
  resultDigest: string | null;
  resolution: ResolutionWords | null;
  startedAt: Date | null;
  finishedAt: Date | null;
}

export interface RunRecord {
  id: string;
  number: string;
  quoteId: string;
  editionId: string;
  calibrationId: string;
  curveSetId: string;
  options: RunOptions;
  purpose: Purpose;
  costCentre: string;
  stamped: boolean;
  state: RunState;
  cancelAsked: boolean;
  engineVersion: string;
  inputsDigest: string;
  quotedMinor: number;
  chargedMinor: number | null;
  priceCurrency: string;
  acceptedById: string;
  acceptedBy: string;
  acceptedByEmail: string;
  acceptedAt: Date;
  finishedAt: Date | null;
  portfolioId: string;
  portfolioName: string;
  editionNumber: number;
  editionDigest: string;
  lossCurrency: string;
  asAt: string | null;
  reconciliation: Reconciliation;
  assumedTivMinor: number;
  assumedSites: number;
}

interface RunRow {
  id: string;
  number: string;
  quote_id: string;
  edition_id: string;
  calibration_id: string;
  curve_set_id: string;
  options: RunOptions;
  purpose: Purpose;
  cost_centre: string;
  stamped: boolean;
  state: RunState;
  cancel_asked: boolean;
  engine_version: string;
  inputs_digest: string;
  quoted_minor: string;
  charged_minor: string | null;
  currency: string;
  accepted_by: string;
  accepted_by_name: string | null;
  accepted_by_email: string | null;
  accepted_at: Date;
  finished_at: Date | null;
  portfolio_id: string;
  portfolio_name: string;
  edition_number: number;
  edition_digest: string;
  loss_currency: string;
  as_at: string | null;
  reconciliation: Reconciliation;
  assumed_tiv_minor: string;
  assumed_sites: number;
}

interface ScenarioRow {
  id: string;
  run_id: string;
  seq: number;
  scenario_version_id: string;
  state: ScenarioState;
  sites_done: number;
  sites_total: number;
  units: number;
  restarts: number;
  error: string | null;
  result: ScenarioResult | null;
  result_digest: string | null;
  resolution: ResolutionWords | null;
  started_at: Date | null;
  finished_at: Date | null;
}

const toRun = (row: RunRow): RunRecord => ({
  id: row.id,
  number: row.number,
  quoteId: row.quote_id,
  editionId: row.edition_id,
  calibrationId: row.calibration_id,
  curveSetId: row.curve_set_id,
  options: row.options,
  purpose: row.purpose,
  costCentre: row.cost_centre,
  stamped: row.stamped,
  state: row.state,
  cancelAsked: row.cancel_asked,
  engineVersion: row.engine_version,
  inputsDigest: row.inputs_digest,
  quotedMinor: toMinor(row.quoted_minor),
  chargedMinor: toMinorOrNull(row.charged_minor),
  priceCurrency: row.currency,
  acceptedById: row.accepted_by,
  acceptedBy: row.accepted_by_name ?? 'a former member',
  acceptedByEmail: row.accepted_by_email ?? '',
  acceptedAt: row.accepted_at,
  finishedAt: row.finished_at,
  portfolioId: row.portfolio_id,
  portfolioName: row.portfolio_name,
  editionNumber: row.edition_number,
  editionDigest: row.edition_digest,
  lossCurrency: row.loss_currency,
  asAt: row.as_at,
  reconciliation: row.reconciliation,
  assumedTivMinor: toMinor(row.assumed_tiv_minor),
  assumedSites: row.assumed_sites,
});

const toScenario = (row: ScenarioRow): ScenarioRecord => ({
  id: row.id,
  runId: row.run_id,
  seq: row.seq,
  scenarioVersionId: row.scenario_version_id,
  state: row.state,
  sitesDone: row.sites_done,
  sitesTotal: row.sites_total,
  units: row.units,
  restarts: row.restarts,
  error: row.error,
  result: row.result,
  resultDigest: row.result_digest,
  resolution: row.resolution,
  startedAt: row.started_at,
  finishedAt: row.finished_at,
});

export interface NewRun {
  id: string;
  number: string;
  quoteId: string;
  editionId: string;
  calibrationId: string;
  curveSetId: string;
  options: RunOptions;
  purpose: Purpose;
  costCentre: string;
  stamped: boolean;
  engineVersion: string;
  inputsDigest: string;
  quotedMinor: number;
  currency: string;
  acceptedBy: string;
  acceptedAt: Date;
  acceptedKey: string;
  scenarios: { id: string; scenarioVersionId: string; sitesTotal: number }[];
}

export interface AcceptedQuote {
  id: string;
  number: string;
  by: string;
  key: string | null;
}

const WORKING: readonly ScenarioState[] = ['building', 'scoring'];
const OPEN: readonly ScenarioState[] = ['waiting', ...WORKING];
/** One channel for all runs: the payload is a run's id and nothing else. */
export const RUN_CHANNEL = 'run_changed';

/** Runs and their tracks. Whoever takes more than one lock takes the run's first. */
export class RunStore {
  /** False when the quote has been used already. */
  async insert(tx: Tx, orgId: string, run: NewRun): Promise<boolean> {
    const inserted = await tx('runs')
      .insert({
        id: run.id,
        org_id: orgId,
        number: run.number,
        quote_id: run.quoteId,
        edition_id: run.editionId,
        calibration_id: run.calibrationId,
        curve_set_id: run.curveSetId,
        options: JSON.stringify(run.options),
        purpose: run.purpose,
        cost_centre: run.costCentre,
        stamped: run.stamped,
        state: 'waiting',
        engine_version: run.engineVersion,
        inputs_digest: run.inputsDigest,
        quoted_minor: run.quotedMinor,
        currency: run.currency,
        accepted_by: run.acceptedBy,
        accepted_at: run.acceptedAt,
        accepted_key: run.acceptedKey,
      })
      .onConflict('quote_id')
      .ignore()
      .returning('id');
    if (inserted.length === 0) return false;
    await tx('run_scenarios').insert(
      run.scenarios.map(({ id, scenarioVersionId, sitesTotal }, seq) => ({
        id,
        org_id: orgId,
        run_id: run.id,
        seq,
        scenario_version_id: scenarioVersionId,
        state: 'waiting',
        sites_total: sitesTotal,
      })),
    );
    return true;
  }

  async find(tx: Tx, orgId: string, runId: string): Promise<RunRecord | null> {
    const row = await this.select(tx, orgId).where('runs.id', runId).first();
    return row ? toRun(row) : null;
  }

  /** Newest first; `before` continues after the last one seen. */
  async list(
    tx: Tx,
    orgId: string,
    page: { portfolioId: string | null; before: { at: string; id: string } | null; limit: number },
  ): Promise<RunRecord[]> {
    const rows = await this.select(tx, orgId)
      .modify((query) => {
        if (page.portfolioId !== null) void query.where('editions.portfolio_id', page.portfolioId);
        if (page.before !== null) {
          void query.whereRaw('(runs.accepted_at, runs.id) < (?::timestamptz, ?::uuid)', [
            page.before.at,
            page.before.id,
          ]);
        }
      })
      .orderBy([
        { column: 'runs.accepted_at', order: 'desc' },
        { column: 'runs.id', order: 'desc' },
      ])
      .limit(page.limit);
    return rows.map(toRun);
  }

  /** Tracks of several runs, each run's in their order. */
  async scenarios(tx: Tx, orgId: string, runIds: readonly string[]): Promise<ScenarioRecord[]> {
    const rows = await tx<ScenarioRow>('run_scenarios')
      .where({ org_id: orgId } as object)
      .whereIn('run_id', [...runIds])
      .orderBy(['run_id', 'seq']);
    return rows.map(toScenario);
  }

  async scenario(tx: Tx, orgId: string, runId: string, runScenarioId: string): Promise<ScenarioRecord | null> {
    const row = await tx<ScenarioRow>('run_scenarios')
      .where({ org_id: orgId, run_id: runId, id: runScenarioId } as object)
      .first();
    return row ? toScenario(row) : null;
  }

  /** A complete run with the same inputs and engine, the latest one. */
  async findIdentical(tx: Tx, orgId: string, inputsDigest: string, engineVersion: string): Promise<string | null> {
    const row = await tx('runs')
      .where({ org_id: orgId, inputs_digest: inputsDigest, engine_version: engineVersion, state: 'complete' })
      .whereNotExists(
        tx('run_scenarios').whereRaw('run_scenarios.run_id = runs.id').whereNot('run_scenarios.state', 'stored'),
      )
      .orderBy('accepted_at', 'desc')
      .first<{ id: string } | undefined>('id');
    return row?.id ?? null;
  }

  /** The run a quote became, and by whose request. */
  async ofQuote(tx: Tx, orgId: string, quoteId: string): Promise<AcceptedQuote | null> {
    const row = await tx('runs')
      .where({ org_id: orgId, quote_id: quoteId })
      .first<{ id: string; number: string; accepted_by: string; accepted_key: string | null } | undefined>(
        'id',
        'number',
        'accepted_by',
        'accepted_key',
      );
    return row ? { id: row.id, number: row.number, by: row.accepted_by, key: row.accepted_key } : null;
  }

  /** Locks a run until the transaction ends. */
  async lock(tx: Tx, orgId: string, runId: string): Promise<{ state: RunState; cancelAsked: boolean } | null> {
    const row = await tx('runs')
      .where({ org_id: orgId, id: runId })
      .forUpdate()
      .first<{ state: RunState; cancel_asked: boolean } | undefined>('state', 'cancel_asked');
    return row ? { state: row.state, cancelAsked: row.cancel_asked } : null;
  }

  async setWorking(tx: Tx, orgId: string, runId: string): Promise<void> {
    await tx('runs').where({ org_id: orgId, id: runId, state: 'waiting' }).update({ state: 'working' });
  }

  async askCancel(tx: Tx, orgId: string, runId: string, at: Date): Promise<void> {
    await tx('runs').where({ org_id: orgId, id: runId }).update({ cancel_asked: true });
    await tx('run_scenarios')
      .where({ org_id: orgId, run_id: runId, state: 'waiting' })
      .update({ state: 'cancelled', finished_at: at });
  }

  /** Takes a track in hand, again after a lost worker; false when there is nothing left to do for it. */
  async begin(tx: Tx, orgId: string, id: string, at: Date): Promise<boolean> {
    const begun = await tx('run_scenarios')
      .where({ org_id: orgId, id })
      .whereIn('state', [...OPEN])
      .update({
        restarts: tx.raw(`restarts + case when state = 'waiting' then 0 else 1 end`),
        started_at: tx.raw('coalesce(started_at, ?)', [at]),
        state: 'building',
        sites_done: 0,
      });
    return begun === 1;
  }

  /** Notes how far a track is; tells whether someone asked to cancel. */
  async progress(tx: Tx, orgId: string, runId: string, id: string, sitesDone: number): Promise<boolean> {
    await tx('run_scenarios')
      .where({ org_id: orgId, id })
      .whereIn('state', [...WORKING])
      .update({ state: 'scoring', sites_done: sitesDone });
    const run = await tx('runs')
      .where({ org_id: orgId, id: runId })
      .first<{ cancel_asked: boolean } | undefined>('cancel_asked');
    return run?.cancel_asked ?? false;
  }

  /** Ends a track one way or the other; false when it had ended before. */
  async end(
    tx: Tx,
    orgId: string,
    id: string,
    end:
      | { state: 'failed'; error: string; at: Date }
      | { state: 'cancelled'; at: Date }
      | {
          state: 'stored';
          result: ScenarioResult;
          resultDigest: string;
          resolution: ResolutionWords;
          at: Date;
        },
  ): Promise<boolean> {
    const ended = await tx('run_scenarios')
      .where({ org_id: orgId, id })
      .whereIn('state', [...OPEN])
      .update({
        state: end.state,
        finished_at: end.at,
        ...(end.state === 'failed' && { error: end.error }),
        ...(end.state === 'stored' && {
          sites_done: tx.ref('sites_total'),
          units: end.result.sitesScored,
          result: JSON.stringify(end.result),
          result_digest: end.resultDigest,
          resolution: JSON.stringify(end.resolution),
        }),
      });
    return ended === 1;
  }

  async close(
    tx: Tx,
    orgId: string,
    runId: string,
    end: { state: 'complete' | 'failed' | 'cancelled'; chargedMinor: number; at: Date },
  ): Promise<void> {
    await tx('runs')
      .where({ org_id: orgId, id: runId })
      .update({ state: end.state, charged_minor: end.chargedMinor, finished_at: end.at });
  }

  /** Tells whoever watches, once the transaction has been stored. */
  async announce(tx: Tx, runId: string): Promise<void> {
    await tx.raw('select pg_notify(?, ?)', [RUN_CHANNEL, runId]);
  }

  private select(tx: Tx, orgId: string) {
    return tx('runs')
      .join('editions', 'editions.id', 'runs.edition_id')
      .join('portfolios', 'portfolios.id', 'editions.portfolio_id')
      .leftJoin('users', 'users.id', 'runs.accepted_by')
      .where('runs.org_id', orgId)
      .select<RunRow[]>(
        'runs.*',
        'users.name as accepted_by_name',
        'users.email as accepted_by_email',
        'portfolios.id as portfolio_id',
        'portfolios.name as portfolio_name',
        'editions.number as edition_number',
        'editions.digest as edition_digest',
        'editions.currency as loss_currency',
        tx.raw(`to_char(editions.as_at, 'YYYY-MM-DD') as as_at`),
        'editions.reconciliation',
        'editions.assumed_tiv_minor',
        'editions.assumed_sites',
      );
  }
}

export const isOpen = ({ state }: Pick<ScenarioRecord, 'state'>): boolean => OPEN.includes(state);
