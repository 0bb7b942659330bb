import type { Calibration, CurveSet } from '#contract/models.ts';
import type { Quote, QuoteRequest } from '#contract/runs.ts';
import { countWithinReach, reachPath } from '#engine/footprint/reach.ts';
import type { Actor } from '../../actor.ts';
import { AppError, notFound } from '../../errors.ts';
import type { BillingDesk } from '../../ports/billing-desk.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Ids } from '../../ports/ids.ts';
import type { Transact, Tx } from '../../transact.ts';
import type { QuoteStore, StoredQuote } from './quote-store.ts';
import { inputsDigest, setUpRemarks } from './run-inputs.ts';
import type { AuditTrail, EditionHeader, Editions, Models, RunTrack, Tracks } from './run-ports.ts';
import type { RunStore } from './run-store.ts';

export interface QuoteParts {
  transact: Transact;
  quotes: QuoteStore;
  runs: RunStore;
  editions: Editions;
  tracks: Tracks;
  models: Models;
  billing: BillingDesk;
  audit: AuditTrail;
  engineVersion: () => string;
  clock: Clock;
  ids: Ids;
}

const HOUR_MS = 3_600_000;

interface Chosen {
  edition: EditionHeader;
  tracks: RunTrack[];
  calibration: Calibration;
  curveSet: CurveSet;
}

const count = (n: number, one: string, many = `${one}s`) => `${n.toLocaleString('en')} ${n === 1 ? one : many}`;
const percent = (share: number) => `${(100 * share).toLocaleString('en', { maximumFractionDigits: 1 })} %`;

/** The price before the button, pinned to everything it was worked out from. */
export class QuoteService {
  constructor(private readonly parts: QuoteParts) {}

  create(actor: Actor, request: QuoteRequest): Promise<Quote> {
    const { transact, quotes, editions, billing, audit, engineVersion, clock, ids } = this.parts;
    return transact(actor, async (tx) => {
      const chosen = await this.chosen(tx, actor.orgId, request);
      const { edition, tracks, calibration, curveSet } = chosen;
      refuseUnsigned(request, calibration);
      const { latitude, longitude } = await editions.coordinates(tx, actor.orgId, edition.id);
      const units = tracks.reduce((sum, { fixes }) => sum + countWithinReach(reachPath(fixes), latitude, longitude), 0);
      const siteScenarios = latitude.length * tracks.length;
      const tariff = await billing.tariffInForce(tx);
      const price = billing.price(tariff, units);
      const { ready, notes, held } = edition.reconciliation!;
      const readyTiv = ready.tivMinor + notes.tivMinor;
      const assumedTivShare = readyTiv === 0 ? 0 : edition.assumedTivMinor / readyTiv;
      const stamped = calibration.state !== 'signed';
      const createdAt = clock.now();
      const id = ids.next();
      await quotes.insert(tx, actor.orgId, {
        id,
        request,
        lines: {
          editionName: `${edition.portfolioName}, edition ${edition.number}`,
          scenarioNames: tracks.map(({ name }) => name),
          readySites: latitude.length,
          heldSites: held.rows,
          heldTivMinor: held.tivMinor,
          tivCurrency: edition.currency,
          scenarios: tracks.length,
          siteScenarios,
          outOfReach: siteScenarios - units,
          units,
          unitPrice: tariff.unitPrice,
          minimumApplied: price.minimumApplied,
          minimumMinor: tariff.minimumMinor,
          netMinor: price.netMinor,
          taxLabel: tariff.taxLabel,
          taxMinor: price.taxMinor,
          grossMinor: price.grossMinor,
          currency: tariff.currency,
          tariffVersion: tariff.version,
          assumedTivShare,
          calibration: { state: calibration.state, signedBy: calibration.signedBy },
          stamped,
          warnings: warningsOf(request, chosen, { units, siteScenarios, assumedTivShare, stamped }),
        },
        grossMinor: price.grossMinor,
        currency: tariff.currency,
        tariffVersion: tariff.version,
        inputsDigest: inputsDigest({ edition, tracks, calibration, curveSet, options: request.options }),
        engineVersion: engineVersion(),
        createdBy: actor.userId,
        createdAt,
        validUntil: new Date(createdAt.getTime() + tariff.quoteHours * HOUR_MS),
      });
      const quote = await this.read(tx, actor.orgId, id);
      await audit.record(tx, actor, 'run.quoted', `quote:${id}`, {
        number: quote.number,
        editionId: edition.id,
        units,
        grossMinor: quote.grossMinor,
        currency: quote.currency,
      });
      return quote;
    });
  }

  get(actor: Actor, quoteId: string): Promise<Quote> {
    return this.parts.transact(actor, (tx) => this.read(tx, actor.orgId, quoteId));
  }

  private async read(tx: Tx, orgId: string, quoteId: string): Promise<Quote> {
    const { quotes, runs, billing, clock, engineVersion } = this.parts;
    const quote = await quotes.find(tx, orgId, quoteId);
    if (!quote) throw notFound('Quote', quoteId);
    const { id, number, request, lines, createdAt, validUntil } = quote;
    return {
      ...lines,
      ...{ id, number, request, createdAt, validUntil },
      state: stateOf(quote, clock.now()),
      // Only what this build would compute itself counts as the same.
      identicalRunId:
        quote.engineVersion === engineVersion()
          ? await runs.findIdentical(tx, orgId, quote.inputsDigest, quote.engineVersion)
          : null,
      freeBalanceMinor: await billing.freeMinor(tx, orgId),
    };
  }

  private async chosen(tx: Tx, orgId: string, request: QuoteRequest): Promise<Chosen> {
    const { editions, tracks: scenarios, models } = this.parts;
    const edition = await editions.findEdition(tx, orgId, request.editionId);
    if (!edition) throw notFound('Edition', request.editionId);
    if (edition.state !== 'sealed' || edition.digest === null || edition.reconciliation === null) {
      throw new AppError(
        'edition_not_sealed',
        `${edition.portfolioName}, edition ${edition.number} isn’t sealed yet. Seal it, then quote: a run rests on sites that can’t change.`,
      );
    }
    const ids = [...new Set(request.scenarioVersionIds)];
    const tracks = await scenarios.versions(tx, orgId, ids);
    const missing = ids.find((id) => !tracks.some((track) => track.id === id));
    if (missing) throw notFound('Track version', missing);
    const calibration = await models.calibration(tx, orgId, request.calibrationId);
    if (!calibration) throw notFound('Calibration', request.calibrationId);
    if (calibration.state === 'withdrawn') {
      throw new AppError(
        'calibration_not_signed',
        `Calibration ${calibration.code} version ${calibration.version} has been withdrawn. Choose a signed one.`,
      );
    }
    const curveSet = await models.curveSet(tx, orgId, request.curveSetId);
    if (!curveSet) throw notFound('Curve set', request.curveSetId);
    return { edition, tracks, calibration, curveSet };
  }
}

export const stateOf = (quote: StoredQuote, now: Date): Quote['state'] =>
  quote.isAccepted ? 'accepted' : Date.parse(quote.validUntil) <= now.getTime() ? 'expired' : 'open';

function refuseUnsigned({ purpose }: QuoteRequest, { code, version, state }: Calibration): void {
  if (purpose !== 'underwriting_file' || state === 'signed') return;
  throw new AppError(
    'calibration_not_signed',
    `Calibration ${code} version ${version} isn’t signed, and an underwriting file may rest on signed ones only. Choose a signed calibration, or mark the run exploratory.`,
  );
}

function warningsOf(
  request: QuoteRequest,
  { edition, tracks, calibration, curveSet }: Chosen,
  sums: { units: number; siteScenarios: number; assumedTivShare: number; stamped: boolean },
): Quote['warnings'] {
  const { held } = edition.reconciliation!;
  const warnings: Quote['warnings'] = [];
  if (sums.stamped) {
    warnings.push({
      code: 'calibration-unsigned',
      text: `Calibration ${calibration.code} version ${calibration.version} isn’t signed. Every output of this run will say so.`,
    });
  }
  if (held.rows > 0) {
    warnings.push({
      code: 'held-sites',
      text: `${count(held.rows, 'site is', 'sites are')} held in this edition: not scored, not charged, and listed on the result.`,
    });
  }
  if (sums.assumedTivShare > 0) {
    warnings.push({
      code: 'assumed-share',
      text: `${percent(sums.assumedTivShare)} of the insured value rests on assumed attributes. The readiness sheet lists them.`,
    });
  }
  if (sums.units === 0) {
    warnings.push({
      code: 'nothing-in-reach',
      text: 'Every site is more than 1000 km from every track. The run costs nothing and records zero loss.',
    });
  } else if (sums.units < sums.siteScenarios) {
    warnings.push({
      code: 'out-of-reach',
      text: `${count(sums.siteScenarios - sums.units, 'site–scenario is', 'site–scenarios are')} out of reach, more than 1000 km from the track: not scored, not charged.`,
    });
  }
  const provisional = tracks.filter(({ asOf }) => asOf !== null).map(({ name, asOf }) => `${name} as of ${asOf}`);
  if (provisional.length > 0) {
    warnings.push({
      code: 'provisional-track',
      text: `Provisional: ${provisional.join('; ')}. The next advisory supersedes it.`,
    });
  }
  const remarks = setUpRemarks(request.options, calibration, curveSet, []);
  return [...warnings, ...remarks];
}
