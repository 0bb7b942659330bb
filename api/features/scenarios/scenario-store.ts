import type { Derivation } from '#contract/derivations.ts';
import type { ScenarioSummary, Track, TrackResolution } from '#contract/scenarios.ts';
import { toInstant, toInstantOrNull } from '../../db/mapping.ts';
import { AppError } from '../../errors.ts';
import type { Tx } from '../../transact.ts';

export type StoredVersion = {
  id: string;
  scenarioId: string;
  name: string;
  number: number;
  createdAt: string;
  createdBy: string;
  digest: string;
  track: Track;
  resolution: TrackResolution;
  derivation: Derivation | null;
};
/** Whether it is stale depends on when it is read. */
export type StoredSummary = Omit<ScenarioSummary, 'stale'>;
export type NewStoredVersion = {
  id: string;
  scenarioId: string;
  number: number;
  track: Track;
  resolution: TrackResolution;
  digest: string;
  createdBy: string;
  createdAt: Date;
};

type VersionRow = {
  id: string;
  scenario_id: string;
  name: string;
  number: number;
  created_at: Date;
  created_by_name: string;
  digest: string;
  track: Track;
  resolution: TrackResolution;
  derivation: Derivation | null;
};
type SummaryRow = VersionRow & { description: string; as_of: Date | null };

const UNIQUE_VIOLATION = '23505';
const violates = (error: unknown, constraint: string): boolean =>
  error instanceof Error &&
  (error as { code?: unknown }).code === UNIQUE_VIOLATION &&
  (error as { constraint?: unknown }).constraint === constraint;

const toVersion = (row: VersionRow): StoredVersion => ({
  id: row.id,
  scenarioId: row.scenario_id,
  name: row.name,
  number: row.number,
  createdAt: toInstant(row.created_at),
  createdBy: row.created_by_name,
  digest: row.digest,
  track: row.track,
  resolution: row.resolution,
  derivation: row.derivation,
});

const toSummary = (row: SummaryRow): StoredSummary => ({
  id: row.scenario_id,
  name: row.name,
  description: row.description,
  versionId: row.id,
  version: row.number,
  fixes: row.track.fixes.length,
  hemisphere: row.resolution.hemisphere,
  maxWindMs: row.resolution.fixes[row.resolution.maxima.fix]!.maxWindMs,
  firstTime: row.track.fixes[0]!.time,
  lastTime: row.track.fixes.at(-1)!.time,
  source: row.track.declarations.source,
  asOf: toInstantOrNull(row.as_of),
  derivation: row.derivation,
  updatedAt: toInstant(row.created_at),
  updatedBy: row.created_by_name,
  path: row.resolution.path,
});

/** Scenarios and their immutable versions. */
export class ScenarioStore {
  async insert(
    tx: Tx,
    orgId: string,
    scenario: {
      id: string;
      name: string;
      description: string;
      derivation: Derivation | null;
      createdBy: string;
      createdAt: Date;
    },
  ): Promise<void> {
    try {
      await tx('scenarios').insert({
        id: scenario.id,
        org_id: orgId,
        name: scenario.name,
        description: scenario.description,
        derivation: scenario.derivation === null ? null : JSON.stringify(scenario.derivation),
        created_by: scenario.createdBy,
        created_at: scenario.createdAt,
      });
    } catch (error) {
      if (!violates(error, 'scenarios_name_per_org')) throw error;
      throw new AppError('conflict', `There is already a scenario named “${scenario.name}”. Choose another name.`, {
        cause: error,
        faults: [{ path: 'body.name', message: 'This name is taken.' }],
      });
    }
  }

  async insertVersion(tx: Tx, orgId: string, version: NewStoredVersion): Promise<void> {
    try {
      await tx('scenario_versions').insert({
        id: version.id,
        org_id: orgId,
        scenario_id: version.scenarioId,
        number: version.number,
        track: JSON.stringify(version.track),
        resolution: JSON.stringify(version.resolution),
        as_of: version.track.declarations.asOf,
        digest: version.digest,
        created_by: version.createdBy,
        created_at: version.createdAt,
      });
    } catch (error) {
      if (!violates(error, 'scenario_versions_number')) throw error;
      throw new AppError(
        'conflict',
        'Someone saved this scenario a moment ago. Look at their version, then save again.',
        {
          cause: error,
        },
      );
    }
  }

  async latest(tx: Tx, orgId: string, scenarioId: string): Promise<StoredVersion | null> {
    return this.version(tx, orgId, scenarioId);
  }

  /** The version with that number, the latest without one. */
  async version(tx: Tx, orgId: string, scenarioId: string, number?: number): Promise<StoredVersion | null> {
    const row = await this.versions(tx, orgId)
      .where({ 'version.scenario_id': scenarioId, ...(number === undefined ? {} : { 'version.number': number }) })
      .orderBy('version.number', 'desc')
      .first();
    return row ? toVersion(row) : null;
  }

  /** Names of scenarios that begin like this. */
  async namesLike(tx: Tx, orgId: string, beginning: string): Promise<string[]> {
    const rows = await tx('scenarios')
      .where({ org_id: orgId })
      .whereRaw('starts_with(name, ?)', [beginning])
      .select<{ name: string }[]>('name');
    return rows.map(({ name }) => name);
  }

  /** Newest change first; `before` continues after the last scenario already seen. */
  async list(
    tx: Tx,
    orgId: string,
    page: { before: { at: string; id: string } | null; limit: number },
  ): Promise<StoredSummary[]> {
    const rows = await this.versions(tx, orgId)
      .whereRaw(
        'version.number = (select max(other.number) from scenario_versions other where other.scenario_id = version.scenario_id)',
      )
      .modify((query) => {
        if (page.before === null) return;
        void query.whereRaw('(version.created_at, version.scenario_id) < (?::timestamptz, ?::uuid)', [
          page.before.at,
          page.before.id,
        ]);
      })
      .orderBy([
        { column: 'version.created_at', order: 'desc' },
        { column: 'version.scenario_id', order: 'desc' },
      ])
      .limit(page.limit)
      .select<SummaryRow[]>('scenarios.description', 'version.as_of');
    return rows.map(toSummary);
  }

  private versions(tx: Tx, orgId: string) {
    return tx('scenario_versions as version')
      .join('scenarios', 'scenarios.id', 'version.scenario_id')
      .join('users', 'users.id', 'version.created_by')
      .where('version.org_id', orgId)
      .select<VersionRow[]>(
        'version.id',
        'version.scenario_id',
        'scenarios.name',
        'version.number',
        'version.created_at',
        'users.name as created_by_name',
        'version.digest',
        'version.track',
        'version.resolution',
        'scenarios.derivation',
      );
  }
}
