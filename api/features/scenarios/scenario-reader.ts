import type { Derivation } from '#contract/derivations.ts';
import type { Track } from '#contract/scenarios.ts';
import { derivationWords } from '#contract/variant-words.ts';
import type { ObservedVortices } from '#engine/ring/observed-vortices.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { engineObservations } from '../../compute/asked-vortices.ts';
import { toInstantOrNull } from '../../db/mapping.ts';
import type { Tx } from '../../transact.ts';
import { engineFixes } from './resolve-track.ts';
import { averagingConversion } from './track-rules.ts';

/** A version as a run needs it: what is computed, and what the run slip says about it. */
export type RunTrack = {
  id: string;
  scenarioId: string;
  name: string;
  number: number;
  track: Track;
  digest: string;
  /** As the engine takes them. */
  fixes: TrackFix[];
  observations: ObservedVortices[];
  /** Where the track comes from: as declared, and what a variant was made from. */
  provenance: string;
  /** What happens to the winds on their way to 1 min, in words. */
  conversion: string;
  asOf: string | null;
  /** Continuous longitudes, [longitude, latitude] each half hour. */
  path: [number, number][];
};

const provenanceOf = ({ track, derivation, number }: Row): string =>
  [track.declarations.source, derivation === null ? '' : derivationWords(derivation, number)]
    .filter((part) => part !== '')
    .map((part) => part.replace(/\.$/, ''))
    .join('. ');

type Row = {
  id: string;
  scenario_id: string;
  name: string;
  number: number;
  track: Track;
  digest: string;
  as_of: Date | null;
  derivation: Derivation | null;
  path: [number, number][];
};

/** Answers runs and studies: which tracks are these versions? */
export class ScenarioReader {
  /** In the order asked for; versions of other organisations and unknown ones are left out. */
  async versions(tx: Tx, orgId: string, ids: readonly string[]): Promise<RunTrack[]> {
    const rows = await tx('scenario_versions as version')
      .join('scenarios', 'scenarios.id', 'version.scenario_id')
      .where('version.org_id', orgId)
      .whereIn('version.id', [...ids])
      .select<Row[]>(
        'version.id',
        'version.scenario_id',
        'scenarios.name',
        'version.number',
        'version.track',
        'version.digest',
        'version.as_of',
        'scenarios.derivation',
        tx.raw(`version.resolution -> 'path' as path`),
      );
    const found = new Map(
      rows.map((row): [string, RunTrack] => [
        row.id,
        {
          id: row.id,
          scenarioId: row.scenario_id,
          name: row.name,
          number: row.number,
          track: row.track,
          digest: row.digest,
          fixes: engineFixes(row.track),
          observations: engineObservations(row.track.vortices),
          provenance: provenanceOf(row),
          conversion: averagingConversion(row.track),
          asOf: toInstantOrNull(row.as_of),
          path: row.path,
        },
      ]),
    );
    return ids.flatMap((id) => found.get(id) ?? []);
  }

  /** The version with that number, the latest without one; null when the scenario or the version isn’t there. */
  async version(tx: Tx, orgId: string, scenarioId: string, number?: number): Promise<RunTrack | null> {
    const row = await tx('scenario_versions')
      .where({ org_id: orgId, scenario_id: scenarioId, ...(number === undefined ? {} : { number }) })
      .orderBy('number', 'desc')
      .first<{ id: string } | undefined>('id');
    const [version] = row ? await this.versions(tx, orgId, [row.id]) : [];
    return version ?? null;
  }
}
