import { createHash } from 'node:crypto';
import type { z } from 'zod';
import type { Edition, SealRequest } from '#contract/portfolios.ts';
import type { Fault } from '#contract/errors.ts';
import type { Actor } from '../../actor.ts';
import { AppError } from '../../errors.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Transact, Tx } from '../../transact.ts';
import type { AuditTrail } from './audit-trail.ts';
import { openDraft } from './edition-service.ts';
import type { EditionRecord, EditionStore } from './edition-store.ts';
import { canonicalSite, sealedSite } from './intake/site.ts';
import { countText, rowsText } from './intake/numbers.ts';
import type { IntakeStore } from './intake-store.ts';
import type { SiteStore } from './site-store.ts';

type Request = z.output<typeof SealRequest>;

export interface SealParts {
  transact: Transact;
  editions: EditionStore;
  intake: IntakeStore;
  sites: SiteStore;
  audit: AuditTrail;
  clock: Clock;
}

const SITES_AT_ONCE = 5_000;

/** Seals a checked draft: its sites become fixed, with a digest over them and over what is held. */
export class SealService {
  constructor(private readonly parts: SealParts) {}

  seal(actor: Actor, editionId: string, request: Request): Promise<Edition> {
    const { transact, editions, audit, clock } = this.parts;
    return transact(actor, async (tx) => {
      const record = await openDraft(tx, editions, actor.orgId, editionId);
      refuseBlocked(record.edition, request);
      const at = clock.now();
      const { digest, sites } = await this.buildSites(tx, actor.orgId, record, request.asAt);
      await editions.seal(tx, actor.orgId, editionId, {
        asAt: request.asAt,
        heldReason: record.edition.reconciliation!.held.rows > 0 ? request.heldReason : null,
        controlReason: controlMessage(record.edition) ? request.controlReason : null,
        digest,
        by: actor.userId,
        at,
      });
      await audit.record(tx, actor, 'portfolio.edition_sealed', `edition:${editionId}`, {
        portfolioId: record.edition.portfolioId,
        edition: record.edition.number,
        sites,
        held: record.edition.reconciliation!.held,
        heldReason: request.heldReason,
        controlReason: request.controlReason,
        asAt: request.asAt,
        digest,
      });
      return (await editions.find(tx, actor.orgId, editionId))!.edition;
    });
  }

  private async buildSites(tx: Tx, orgId: string, { edition, survey }: EditionRecord, asAt: string) {
    const { intake, sites } = this.parts;
    const { held, setAside } = edition.reconciliation!;
    const hash = createHash('sha256');
    hash.update(
      `${JSON.stringify(['edition', 1, edition.currency, asAt, held.rows, held.tivMinor, setAside.rows, setAside.tivMinor])}\n`,
    );
    let siteNo = 0;
    for await (const rows of intake.scored(tx, orgId, edition.id, SITES_AT_ONCE)) {
      const batch = rows.map(({ row, corrections, ...judged }) =>
        sealedSite((siteNo += 1), row, corrections, survey!.facts, judged),
      );
      for (const site of batch) hash.update(canonicalSite(site));
      await sites.add(tx, orgId, edition.id, batch);
    }
    return { digest: hash.digest('hex'), sites: siteNo };
  }
}

const controlMessage = (edition: Edition) => edition.messages.find(({ severity }) => severity === 'blocks_sealing');

/** Everything that stands against sealing, at once. */
function refuseBlocked(edition: Edition, { heldReason, controlReason }: Request): void {
  if (edition.state !== 'checked' || !edition.reconciliation) {
    throw new AppError(
      'edition_not_ready',
      'The checks of this draft aren’t finished. Map its columns and wait for the checks, then seal.',
    );
  }
  const { ready, notes, held } = edition.reconciliation;
  const faults: Fault[] = edition.messages
    .filter(({ severity }) => severity === 'stop')
    .map(({ code, text }) => ({ path: 'edition', message: text, code }));
  if (ready.rows + notes.rows === 0) {
    faults.push({ path: 'edition', message: 'No row can be scored. Fix the held rows before you seal.' });
  }
  const control = controlMessage(edition);
  if (control && !controlReason) {
    faults.push({
      path: 'body.controlReason',
      message: `${control.text} To seal all the same, give a reason.`,
      code: control.code,
    });
  }
  if (held.rows > 0 && !heldReason) {
    faults.push({
      path: 'body.heldReason',
      message: `${rowsText(held.rows)} ${held.rows === 1 ? "is held and won't" : "are held and won't"} be scored. They stay listed on every result. Give a reason to seal without them.`,
    });
  }
  if (faults.length === 0) return;
  const count = faults.length === 1 ? 'One thing stands' : `${countText(faults.length)} things stand`;
  throw new AppError('seal_blocked', `${count} against sealing. ${faults.map(({ message }) => message).join(' ')}`, {
    faults,
  });
}
