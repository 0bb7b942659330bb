import type { Run, RunEvent, RunSlip, RunSummary } from '#contract/runs.ts';
import type { Actor } from '../../actor.ts';
import { decodeMomentCursor, encodeCursor, pageFrom } from '../../db/cursor.ts';
import { AppError, notFound } from '../../errors.ts';
import type { Jobs } from '../../jobs/queue.ts';
import type { BillingDesk } from '../../ports/billing-desk.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Ids } from '../../ports/ids.ts';
import type { Transact, Tx } from '../../transact.ts';
import { stateOf } from './quote-service.ts';
import { nextNumber, type QuoteStore } from './quote-store.ts';
import type { RunClosing } from './run-closing.ts';
import { followRun, type Announcements } from './run-feed.ts';
import type { AuditTrail, Models, RunTrack, Tracks } from './run-ports.ts';
import { RUN_CHANNEL, type AcceptedQuote, type RunRecord, type RunStore } from './run-store.ts';
import { toEvent, toRun, toSlip, toSummary, type WholeRun } from './run-view.ts';
import { SCORE_QUEUE } from './score-job.ts';

export interface RunParts {
  transact: Transact;
  runs: RunStore;
  quotes: QuoteStore;
  closing: RunClosing;
  tracks: Tracks;
  models: Models;
  billing: BillingDesk;
  audit: AuditTrail;
  jobs: Jobs;
  announcements: Announcements;
  engineVersion: () => string;
  /** Hours after which an advisory counts as stale. */
  staleAfterHours: number;
  clock: Clock;
  ids: Ids;
}

/** Starts runs from accepted quotes, ends them early when asked, and answers questions about them. */
export class RunService {
  constructor(private readonly parts: RunParts) {}

  /**
   * Reservation, run, tracks and jobs are stored together, or not at all. `key` names the request: when its answer was
   * lost with the process that gave it, the repeat finds the run instead of a used quote.
   */
  accept(actor: Actor, quoteId: string, key: string): Promise<Run> {
    const { transact, quotes, runs, billing, jobs, audit, engineVersion, clock, ids } = this.parts;
    return transact(actor, async (tx) => {
      const { orgId } = actor;
      const quote = await quotes.find(tx, orgId, quoteId);
      if (!quote) throw notFound('Quote', quoteId);
      const used = await runs.ofQuote(tx, orgId, quoteId);
      if (used) return this.alreadyAccepted(tx, actor, quote.number, key, used);
      const now = clock.now();
      if (stateOf(quote, now) === 'expired') {
        throw new AppError('quote_expired', `Quote ${quote.number} was valid until ${quote.validUntil}. Quote again.`);
      }
      if (quote.engineVersion !== engineVersion()) {
        throw new AppError(
          'quote_expired',
          `The engine was updated after quote ${quote.number} was made. Quote again, so that price and numbers belong together.`,
        );
      }
      const run = {
        id: ids.next(),
        number: await nextNumber(tx, orgId, 'run'),
        quoteId,
        editionId: quote.request.editionId,
        calibrationId: quote.request.calibrationId,
        curveSetId: quote.request.curveSetId,
        options: quote.request.options,
        purpose: quote.request.purpose,
        costCentre: quote.request.costCentre,
        stamped: quote.lines.stamped,
        engineVersion: quote.engineVersion,
        inputsDigest: quote.inputsDigest,
        quotedMinor: quote.grossMinor,
        currency: quote.currency,
        acceptedBy: actor.userId,
        acceptedAt: now,
        acceptedKey: key,
        scenarios: [...new Set(quote.request.scenarioVersionIds)].map((scenarioVersionId) => ({
          id: ids.next(),
          scenarioVersionId,
          sitesTotal: quote.lines.readySites,
        })),
      };
      if (!(await runs.insert(tx, orgId, run))) {
        const other = (await runs.ofQuote(tx, orgId, quoteId))!;
        return this.alreadyAccepted(tx, actor, quote.number, key, other);
      }
      await billing.reserve(tx, orgId, run, {
        grossMinor: quote.grossMinor,
        currency: quote.currency,
        actorId: actor.userId,
      });
      for (const { id } of run.scenarios) {
        await jobs.enqueue(tx, SCORE_QUEUE, { orgId, runId: run.id, runScenarioId: id });
      }
      await audit.record(tx, actor, 'run.accepted', `run:${run.id}`, {
        number: run.number,
        quote: quote.number,
        quotedMinor: run.quotedMinor,
        currency: run.currency,
        purpose: run.purpose,
        stamped: run.stamped,
        inputsDigest: run.inputsDigest,
      });
      await runs.announce(tx, run.id);
      return toRun(await this.whole(tx, orgId, run.id));
    });
  }

  private async alreadyAccepted(
    tx: Tx,
    { orgId, userId }: Actor,
    quoteNumber: string,
    key: string,
    run: AcceptedQuote,
  ): Promise<Run> {
    if (run.by === userId && run.key === key) return toRun(await this.whole(tx, orgId, run.id));
    throw new AppError('quote_used', `Quote ${quoteNumber} has been accepted already: see run ${run.number}.`);
  }

  /** What is finished stays and is charged; what is under way stops at its next chunk. */
  cancel(actor: Actor, runId: string): Promise<Run> {
    const { transact, runs, closing, audit, clock } = this.parts;
    return transact(actor, async (tx) => {
      const run = await runs.lock(tx, actor.orgId, runId);
      if (!run) throw notFound('Run', runId);
      if (run.state !== 'waiting' && run.state !== 'working') {
        throw new AppError('run_finished', 'This run has ended already; there is nothing left to cancel.');
      }
      if (!run.cancelAsked) {
        await runs.askCancel(tx, actor.orgId, runId, clock.now());
        await audit.record(tx, actor, 'run.cancel_asked', `run:${runId}`);
        await closing.closeIfDone(tx, actor.orgId, runId);
        await runs.announce(tx, runId);
      }
      return toRun(await this.whole(tx, actor.orgId, runId));
    });
  }

  get(actor: Actor, runId: string): Promise<Run> {
    return this.parts.transact(actor, async (tx) => toRun(await this.whole(tx, actor.orgId, runId)));
  }

  async list(
    actor: Actor,
    { cursor, limit, portfolioId }: { cursor?: string; limit: number; portfolioId?: string },
  ): Promise<{ items: RunSummary[]; nextCursor: string | null }> {
    const { transact, runs, tracks } = this.parts;
    const before = decodeMomentCursor(cursor);
    return transact(actor, async (tx) => {
      const found = await runs.list(tx, actor.orgId, { portfolioId: portfolioId ?? null, before, limit: limit + 1 });
      const page = pageFrom(found, limit, (run) => encodeCursor(run.acceptedAt.toISOString(), run.id));
      const scenarios = await runs.scenarios(
        tx,
        actor.orgId,
        page.items.map((run) => run.id),
      );
      const versions = await tracks.versions(tx, actor.orgId, [
        ...new Set(scenarios.map(({ scenarioVersionId }) => scenarioVersionId)),
      ]);
      const names = new Map(versions.map((track) => [track.id, track.name]));
      const items = page.items.map((run) =>
        toSummary(
          run,
          scenarios.filter(({ runId }) => runId === run.id),
          names,
        ),
      );
      return { items, nextCursor: page.nextCursor };
    });
  }

  slip(actor: Actor, runId: string): Promise<RunSlip> {
    const { transact, quotes } = this.parts;
    return transact(actor, async (tx) => {
      const whole = await this.whole(tx, actor.orgId, runId);
      const quote = (await quotes.find(tx, actor.orgId, whole.run.quoteId))!;
      return toSlip(whole, quote);
    });
  }

  /** Sends the run's state now and after every change, until it is over or the listener has gone. */
  async watch(actor: Actor, runId: string, send: (event: RunEvent) => void, signal: AbortSignal): Promise<void> {
    await followRun(this.parts.announcements, {
      runId,
      channel: RUN_CHANNEL,
      read: () => this.event(actor, runId),
      send,
      signal,
    });
  }

  /** Refuses a run that isn't there before a stream is opened for it. */
  async requireRun(actor: Actor, runId: string): Promise<void> {
    if ((await this.event(actor, runId)) === null) throw notFound('Run', runId);
  }

  private event({ orgId }: Actor, runId: string): Promise<RunEvent | null> {
    const { transact, runs } = this.parts;
    return transact(orgId, async (tx) => {
      const run = await runs.find(tx, orgId, runId);
      return run && toEvent(run, await runs.scenarios(tx, orgId, [runId]));
    });
  }

  private async whole(tx: Tx, orgId: string, runId: string): Promise<WholeRun> {
    const { runs, tracks, models, clock, staleAfterHours } = this.parts;
    const run: RunRecord | null = await runs.find(tx, orgId, runId);
    if (!run) throw notFound('Run', runId);
    const scenarios = await runs.scenarios(tx, orgId, [runId]);
    const versions = await tracks.versions(
      tx,
      orgId,
      scenarios.map(({ scenarioVersionId }) => scenarioVersionId),
    );
    const calibration = (await models.calibration(tx, orgId, run.calibrationId))!;
    const curveSet = (await models.curveSet(tx, orgId, run.curveSetId))!;
    return {
      ...{ run, scenarios, calibration, curveSet, staleAfterHours, readAt: clock.now() },
      tracks: new Map(versions.map((track): [string, RunTrack] => [track.id, track])),
    };
  }
}
