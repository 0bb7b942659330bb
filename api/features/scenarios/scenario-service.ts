import type { Derivation } from '#contract/derivations.ts';
import { noticesFor } from '#contract/notices.ts';
import type { RingToScenario } from '#contract/rings.ts';
import type {
  NewScenario,
  NewVersion,
  ReadTrack,
  ReadTrackReply,
  ResolveTrack,
  ScenarioSummary,
  ScenarioVersion,
  TrackFinding,
  TrackResolution,
} from '#contract/scenarios.ts';
import { staleness, type Stale } from '#contract/track-age.ts';
import type { LandIndex } from '#engine/geo/land.ts';
import type { Actor } from '../../actor.ts';
import { decodeMomentCursor, encodeCursor, pageFrom } from '../../db/cursor.ts';
import { AppError, notFound } from '../../errors.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Ids } from '../../ports/ids.ts';
import type { Transact, Tx } from '../../transact.ts';
import { readTrackText } from './reading/read-track.ts';
import { resolveTrack, type Resolved } from './resolve-track.ts';
import type { ScenarioStore, StoredVersion } from './scenario-store.ts';
import { trackDigest } from './track-digest.ts';
import { savable } from './savable.ts';
import { checkEntry } from './track-rules.ts';

const noticesOf = ({ track }: Pick<StoredVersion, 'track'>) =>
  track.declarations.asOf === null
    ? noticesFor('life-safety', 'uncertainty', 'scope')
    : noticesFor('provisional', 'life-safety', 'uncertainty', 'scope');

type Audit = {
  record(tx: Tx, actor: Actor, action: string, object: string, details: object): Promise<void>;
};

const MAX_FIXES = 400;
/** A file of quite another kind is wrong in every line; the count is told, the list ends here. */
const MOST_FAULTS = 200;
const UNDECLARED: TrackFinding = {
  code: 'TRACK-11',
  severity: 'refuse',
  fix: null,
  text: 'The text doesn’t say how long the winds were averaged. A 10-min wind reads about 5 % lower than a 1-min wind. Declare 60, 120, 180 or 600 seconds before saving.',
};

/** Reads, checks and keeps storm tracks; what is saved never changes, an edit is the next version. */
export class ScenarioService {
  constructor(
    private readonly transact: Transact,
    private readonly scenarios: ScenarioStore,
    private readonly land: () => LandIndex,
    private readonly context: { clock: Clock; ids: Ids; audit: Audit; staleAfterHours: number },
  ) {}

  /** Text → fixes with what was converted and found; nothing is saved, and no line is dropped silently. */
  read({ sortByTime, ...request }: ReadTrack): ReadTrackReply {
    const read = readTrackText(request);
    if (!read) {
      throw new AppError(
        'track_unreadable',
        'This is neither best-track text (it begins like AL092022, NAME, 40,) nor our track CSV (a header line with time_utc, latitude, longitude). Choose the format, or check what was pasted.',
      );
    }
    const { faults, ...storm } = read;
    if (storm.fixes.length > MAX_FIXES) {
      faults.push({
        path: 'text',
        message: `The storm has ${storm.fixes.length} fixes; the limit is ${MAX_FIXES}. Leave out some.`,
      });
    }
    if (faults.length > 0) {
      const shown = faults.slice(0, MOST_FAULTS).map(({ path, message }) => ({ path, message }));
      const lines = faults.length === 1 ? 'One line or column' : `${faults.length} lines or columns`;
      throw new AppError(
        'track_unreadable',
        `${lines} can’t be read, so the track wasn’t taken. Nothing was left out.`,
        {
          faults: shown,
        },
      );
    }
    const { fixes, findings } = checkEntry(storm.fixes, sortByTime);
    const undeclared = storm.windAveragingS === null && fixes.some(({ maxWindMs }) => maxWindMs !== null);
    return { ...storm, fixes, findings: [...storm.findings, ...findings, ...(undeclared ? [UNDECLARED] : [])] };
  }

  resolve({ track, intensity, sortByTime }: ResolveTrack): TrackResolution {
    return resolveTrack(track, intensity, sortByTime, this.land()).resolution;
  }

  create(actor: Actor, { name, description, track, sortByTime }: NewScenario): Promise<ScenarioVersion> {
    const resolved = this.savable(track, sortByTime);
    return this.transact(actor, (tx) => this.add(tx, actor, { name, description, derivation: null }, resolved));
  }

  /** Keeps a resolved track as the first version of a new scenario. */
  async add(
    tx: Tx,
    actor: Actor,
    scenario: { name: string; description: string; derivation: Derivation | null },
    resolved: Resolved,
  ): Promise<ScenarioVersion> {
    const id = this.context.ids.next();
    const createdAt = this.context.clock.now();
    await this.scenarios.insert(tx, actor.orgId, { id, ...scenario, createdBy: actor.userId, createdAt });
    const { name, derivation } = scenario;
    return this.keep(tx, actor, { scenarioId: id, name, number: 1, derivation }, resolved, 'scenario.created');
  }

  saveVersion(actor: Actor, scenarioId: string, { track, basedOn, sortByTime }: NewVersion): Promise<ScenarioVersion> {
    const resolved = this.savable(track, sortByTime);
    return this.transact(actor, async (tx) => {
      const latest = await this.latestFor(tx, actor, scenarioId, basedOn);
      return this.keep(tx, actor, { ...latest, number: latest.number + 1 }, resolved, 'scenario.version_saved');
    });
  }

  /** The same ring at every fix, as the next version. */
  setRing(
    actor: Actor,
    scenarioId: string,
    { basedOn, ringWidthFraction, eyeVorticityRatio }: RingToScenario,
  ): Promise<ScenarioVersion> {
    return this.transact(actor, async (tx) => {
      const latest = await this.latestFor(tx, actor, scenarioId, basedOn);
      const { track, number } = latest;
      const fixes = track.fixes.map((fix) => ({ ...fix, ringWidthFraction, eyeVorticityRatio }));
      const resolved = this.savable({ ...track, fixes }, false);
      return this.keep(tx, actor, { ...latest, number: number + 1 }, resolved, 'scenario.ring_set');
    });
  }

  async get(actor: Actor, scenarioId: string): Promise<ScenarioVersion> {
    const latest = await this.transact(actor, (tx) => this.scenarios.latest(tx, actor.orgId, scenarioId));
    if (!latest) throw notFound('Scenario', scenarioId);
    return this.toContract(latest);
  }

  list(
    actor: Actor,
    { cursor, limit }: { cursor?: string | undefined; limit: number },
  ): Promise<{ items: ScenarioSummary[]; nextCursor: string | null }> {
    const before = decodeMomentCursor(cursor);
    return this.transact(actor, async (tx) => {
      const rows = await this.scenarios.list(tx, actor.orgId, { before, limit: limit + 1 });
      const items = rows.map((row) => ({ ...row, stale: this.staleNow(row.asOf) }));
      return pageFrom(items, limit, ({ updatedAt, id: last }) => encodeCursor(updatedAt, last));
    });
  }

  /** The latest version, when it is the one an edit is based on. */
  private async latestFor(tx: Tx, actor: Actor, scenarioId: string, basedOn: number): Promise<StoredVersion> {
    const latest = await this.scenarios.latest(tx, actor.orgId, scenarioId);
    if (!latest) throw notFound('Scenario', scenarioId);
    if (latest.number === basedOn) return latest;
    throw new AppError(
      'conflict',
      `${latest.createdBy} saved version ${latest.number} meanwhile; yours is based on version ${basedOn}. Compare the two, then save on top of version ${latest.number}.`,
    );
  }

  /** The resolved track, or every finding that keeps it from being saved. */
  private savable(track: NewScenario['track'], sortByTime: boolean): Resolved {
    return savable(resolveTrack(track, 'pressure', sortByTime, this.land()));
  }

  private async keep(
    tx: Tx,
    actor: Actor,
    { scenarioId, name, number, derivation }: Pick<StoredVersion, 'scenarioId' | 'name' | 'number' | 'derivation'>,
    { track, resolution }: Resolved,
    action: string,
  ): Promise<ScenarioVersion> {
    const id = this.context.ids.next();
    const createdAt = this.context.clock.now();
    const digest = trackDigest(track);
    await this.scenarios.insertVersion(tx, actor.orgId, {
      id,
      scenarioId,
      number,
      track,
      resolution,
      digest,
      createdBy: actor.userId,
      createdAt,
    });
    await this.context.audit.record(tx, actor, action, `scenario ${scenarioId}`, {
      name,
      version: number,
      fixes: track.fixes.length,
      digest,
      ...(derivation !== null && number === 1 ? { derivation } : {}),
    });
    return this.toContract({
      id,
      scenarioId,
      name,
      number,
      createdAt: createdAt.toISOString(),
      createdBy: actor.name,
      digest,
      track,
      resolution,
      derivation,
    });
  }

  private toContract(version: StoredVersion): ScenarioVersion {
    return { ...version, stale: this.staleNow(version.track.declarations.asOf), notices: noticesOf(version) };
  }

  private staleNow(asOf: string | null): Stale | null {
    return staleness(asOf, this.context.clock.now(), this.context.staleAfterHours);
  }
}
