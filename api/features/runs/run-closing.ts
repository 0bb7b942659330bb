import { STANDING_NOTE } from '#contract/notices.ts';
import type { BillingDesk, Outcome } from '../../ports/billing-desk.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Tx } from '../../transact.ts';
import type { QuoteStore } from './quote-store.ts';
import type { AuditTrail, Post, Tracks } from './run-ports.ts';
import { isOpen, type RunRecord, type RunStore, type ScenarioRecord } from './run-store.ts';

export interface ClosingParts {
  runs: RunStore;
  quotes: QuoteStore;
  tracks: Tracks;
  billing: BillingDesk;
  outbox: Post;
  audit: AuditTrail;
  clock: Clock;
  publicUrl: string;
}

/** How a run has ended: what was finished counts, whatever else failed; a cancelled run says so. */
export const closedState = (
  { cancelAsked }: { cancelAsked: boolean },
  scenarios: readonly Pick<ScenarioRecord, 'state'>[],
): 'complete' | 'failed' | 'cancelled' => {
  const some = (state: ScenarioRecord['state']) => scenarios.some((scenario) => scenario.state === state);
  if (cancelAsked && some('cancelled')) return 'cancelled';
  return some('stored') ? 'complete' : 'failed';
};

export const outcomeOf = (scenarios: readonly Pick<ScenarioRecord, 'state' | 'units'>[]): Outcome => ({
  units: scenarios.reduce((sum, { state, units }) => (state === 'stored' ? sum + units : sum), 0),
  tracksCompleted: scenarios.filter(({ state }) => state === 'stored').length,
  tracksFailed: scenarios.filter(({ state }) => state === 'failed').length,
});

/** Ends a run with its last track: charge, release, state, mail and audit, all in the caller's transaction. */
export class RunClosing {
  constructor(private readonly parts: ClosingParts) {}

  /** Call with the run locked. Does nothing while a track is open, or when the run has been closed. */
  async closeIfDone(tx: Tx, orgId: string, runId: string): Promise<void> {
    const { runs, quotes, billing, audit, clock } = this.parts;
    const run = (await runs.find(tx, orgId, runId))!;
    if (run.state !== 'waiting' && run.state !== 'working') return;
    const scenarios = await runs.scenarios(tx, orgId, [runId]);
    if (scenarios.some(isOpen)) return;
    const quote = (await quotes.find(tx, orgId, run.quoteId))!;
    const tariff = await billing.tariff(tx, quote.tariffVersion);
    const charge = billing.settlement(tariff, quote.lines.units, outcomeOf(scenarios));
    await billing.settle(tx, orgId, { id: runId, number: run.number }, charge);
    const state = closedState(run, scenarios);
    await runs.close(tx, orgId, runId, { state, chargedMinor: charge.grossMinor, at: clock.now() });
    await audit.record(tx, { orgId, userId: null }, `run.${state}`, `run:${runId}`, {
      number: run.number,
      ...outcomeOf(scenarios),
      quotedMinor: run.quotedMinor,
      chargedMinor: charge.grossMinor,
      currency: run.priceCurrency,
    });
    await this.write(tx, orgId, run, scenarios, state);
  }

  /** To whoever accepted the run: that it has ended and where to look. No numbers of loss, nothing of any site. */
  private async write(
    tx: Tx,
    orgId: string,
    run: RunRecord,
    scenarios: readonly ScenarioRecord[],
    state: 'complete' | 'failed' | 'cancelled',
  ): Promise<void> {
    if (run.acceptedByEmail === '') return;
    const { tracks, outbox, publicUrl } = this.parts;
    const found = await tracks.versions(
      tx,
      orgId,
      scenarios.map(({ scenarioVersionId }) => scenarioVersionId),
    );
    const asOf = found
      .flatMap((track) => (track.asOf === null ? [] : [track.asOf]))
      .sort()
      .at(-1);
    const provisional = asOf === undefined ? '' : `, track as of ${timeWords(asOf)}`;
    const words = { complete: 'is complete', failed: 'has failed', cancelled: 'was cancelled' }[state];
    const lines = [
      `Run ${run.number} on ${run.portfolioName}, edition ${run.editionNumber}, ${words}.`,
      tracksWords(scenarios),
      ...(run.stamped ? ['Its calibration isn’t signed; every output says so.'] : []),
      ...(asOf === undefined
        ? []
        : [`Provisional: the track is as of ${timeWords(asOf)}; the next advisory supersedes it.`]),
      '',
      `${publicUrl}/runs/${run.id}`,
      '',
      'Real storms differ: results are ranges, not predictions.',
      STANDING_NOTE,
    ];
    await outbox.post(tx, orgId, {
      to: run.acceptedByEmail,
      subject: `Run ${run.number} ${words}${provisional}`,
      text: lines.join('\n'),
    });
  }
}

const timeWords = (instant: string) =>
  `${new Date(instant).toLocaleString('en-GB', { day: 'numeric', month: 'short', year: 'numeric', hour: '2-digit', minute: '2-digit', timeZone: 'UTC' }).replace(',', '')} UTC`;

const tracksWords = (scenarios: readonly ScenarioRecord[]): string => {
  const number = (state: ScenarioRecord['state']) => scenarios.filter((scenario) => scenario.state === state).length;
  const [stored, failed, cancelled] = [number('stored'), number('failed'), number('cancelled')];
  const parts = [`${stored} of ${scenarios.length} ${scenarios.length === 1 ? 'track' : 'tracks'} finished`];
  if (failed > 0) parts.push(`${failed} failed on our side and ${failed === 1 ? 'is' : 'are'} free`);
  if (cancelled > 0) parts.push(`${cancelled} cancelled and not charged`);
  return `${parts.join('; ')}.`;
};
