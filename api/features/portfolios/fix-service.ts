import type { z } from 'zod';
import type { Edition, FixRequest } from '#contract/portfolios.ts';
import type { Actor } from '../../actor.ts';
import { AppError } from '../../errors.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Ids } from '../../ports/ids.ts';
import type { Transact, Tx } from '../../transact.ts';
import type { AuditTrail } from './audit-trail.ts';
import { openDraft } from './edition-service.ts';
import type { EditionRecord, EditionStore } from './edition-store.ts';
import { fileMessages } from './intake/check.ts';
import type { Context, Correction } from './intake/file-row.ts';
import { judgeRow, resurveyReferences, type JudgedRow } from './intake/judge.ts';
import { countText } from './intake/numbers.ts';
import { ruleOf } from './intake/rules.ts';
import type { IntakeStore, StoredRow } from './intake-store.ts';
import { sameFileMessage } from './same-file.ts';

type Request = z.output<typeof FixRequest>;

export interface FixParts {
  transact: Transact;
  editions: EditionStore;
  intake: IntakeStore;
  audit: AuditTrail;
  clock: Clock;
  ids: Ids;
  offshoreM: Context['offshoreM'];
}

/** Bulk fixes of a checked draft and their undoing. A fix is kept as what was done, and rows are judged anew. */
export class FixService {
  constructor(private readonly parts: FixParts) {}

  apply(actor: Actor, editionId: string, request: Request): Promise<Edition> {
    const { transact, editions, intake, audit, clock, ids } = this.parts;
    const { code, kind, reason } = request;
    return transact(actor, async (tx) => {
      const record = await this.openChecked(tx, actor, editionId);
      refuseUnfit(request);
      const asked = request.rows && [...new Set(request.rows)];
      const rows = await intake.fixable(tx, actor.orgId, editionId, kind, code, asked);
      if (rows.length === 0 || (asked && rows.length < asked.length)) throw notThere(code, rows, asked);
      const seq = ((await editions.lastFix(tx, actor.orgId, editionId))?.seq ?? 0) + 1;
      const correction: Correction = { seq, kind, code, reason };
      await this.rejudge(tx, actor.orgId, record, rows, (before) => [...before, correction]);
      const fix = { id: ids.next(), seq, kind, code, rows, reason, by: actor.userId, at: clock.now() };
      await editions.addFix(tx, actor.orgId, editionId, fix);
      await audit.record(tx, actor, 'portfolio.fix_applied', `edition:${editionId}`, {
        kind,
        code,
        rows: rows.length,
        reason,
      });
      return this.conclude(tx, actor.orgId, record);
    });
  }

  undo(actor: Actor, editionId: string): Promise<Edition> {
    const { transact, editions, audit } = this.parts;
    return transact(actor, async (tx) => {
      const record = await this.openChecked(tx, actor, editionId);
      const last = await editions.lastFix(tx, actor.orgId, editionId);
      if (!last) throw new AppError('conflict', 'There is no fix to undo in this draft.');
      await editions.removeFix(tx, actor.orgId, last.id);
      await this.rejudge(tx, actor.orgId, record, last.rows, (before) => before.filter(({ seq }) => seq !== last.seq));
      await audit.record(tx, actor, 'portfolio.fix_undone', `edition:${editionId}`, {
        ...{ kind: last.kind, code: last.code },
        rows: last.rows.length,
      });
      return this.conclude(tx, actor.orgId, record);
    });
  }

  private async openChecked(tx: Tx, actor: Actor, editionId: string): Promise<EditionRecord> {
    const record = await openDraft(tx, this.parts.editions, actor.orgId, editionId);
    if (record.edition.state === 'checked' && record.survey) return record;
    throw new AppError('edition_not_ready', 'The checks of this draft aren’t finished. Wait for them, then fix rows.');
  }

  /** Judges rows under their changed corrections, then the rows that share a reference with any of them. */
  private async rejudge(
    tx: Tx,
    orgId: string,
    { edition, survey }: EditionRecord,
    numbers: number[],
    change: (before: Correction[]) => Correction[],
  ): Promise<void> {
    const { intake, offshoreM } = this.parts;
    const file: Context = { ...survey!.facts, offshoreM };
    const judge = (row: StoredRow) => ({ ...row, judged: judgeRow(row.row, file, row.surveyed, row.corrections) });

    const before = await intake.byNumber(tx, orgId, edition.id, numbers);
    const after = before.map((row) => judge({ ...row, corrections: change(row.corrections) }));
    await intake.update(tx, orgId, edition.id, after);

    const refs = new Set<string>();
    for (const { row, judged } of after)
      for (const ref of [row.received.site_ref?.trim(), judged.ref]) if (ref) refs.add(ref);
    const sharing = await intake.byReference(tx, orgId, edition.id, [...refs]);
    const resurveyed = resurveyReferences(sharing).map(judge);
    await intake.update(tx, orgId, edition.id, resurveyed satisfies { judged: JudgedRow }[]);
  }

  private async conclude(tx: Tx, orgId: string, { edition, survey }: EditionRecord): Promise<Edition> {
    const { editions, intake, clock } = this.parts;
    const tally = await intake.tally(tx, orgId, edition.id);
    const messages = fileMessages(survey!, tally, edition.control);
    const same = await sameFileMessage(tx, editions, orgId, edition.portfolioId, edition.file.digest);
    await editions.conclude(tx, orgId, edition.id, {
      ...{ tally, survey: survey! },
      messages: same ? [same, ...messages] : messages,
      at: clock.now(),
    });
    return (await editions.find(tx, orgId, edition.id))!.edition;
  }
}

/** Besides the fix a rule offers, any row that can't be helped may be excluded with a reason. */
function refuseUnfit({ code, kind }: Request): void {
  const rule = ruleOf(code);
  if (!rule)
    throw new AppError('invalid_request', `There is no message ${code}. Choose one from the list of messages.`);
  if (kind === 'exclude' || rule.fix?.kind === kind) return;
  throw new AppError(
    'invalid_request',
    `This fix doesn't help rows with ${code}. Choose the fix on offer, or exclude them with a reason.`,
  );
}

function notThere(code: string, found: readonly number[], asked: readonly number[] | undefined): AppError {
  if (!asked || found.length === 0) {
    return new AppError(
      'conflict',
      `No row can be fixed for ${code} any more; somebody may have done it already. Load the messages again.`,
    );
  }
  const known = new Set(found);
  const missing = asked.filter((row) => !known.has(row));
  const listed = missing.slice(0, 5).map(countText).join(', ');
  return new AppError(
    'conflict',
    `${missing.length === 1 ? `Row ${listed} doesn't` : `${countText(missing.length)} of the rows (${listed}${missing.length > 5 ? ', …' : ''}) don't`} have the message ${code} any more. Load the rows again and choose anew.`,
  );
}
