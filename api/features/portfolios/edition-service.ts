import type { z } from 'zod';
import type {
  Column,
  Edition,
  Mapping,
  MessageGroup,
  RowState,
  Severity,
  SiteField,
  SitePoints,
} from '#contract/portfolios.ts';
import type { Actor } from '../../actor.ts';
import { AppError, notFound } from '../../errors.ts';
import type { Jobs } from '../../jobs/queue.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Transact, Tx } from '../../transact.ts';
import type { AuditTrail } from './audit-trail.ts';
import { CHECK_QUEUE, type CheckPayload } from './check-payload.ts';
import { requireCents } from './currencies.ts';
import type { EditionRecord, EditionStore } from './edition-store.ts';
import { ruleOf } from './intake/rules.ts';
import type { IntakeStore } from './intake-store.ts';

export interface EditionParts {
  transact: Transact;
  editions: EditionStore;
  intake: IntakeStore;
  jobs: Jobs;
  audit: AuditTrail;
  clock: Clock;
}

const SEVERITY_OF: Record<RowState, Severity> = { held: 'hold', notes: 'note', set_aside: 'set_aside', ready: 'note' };
const SEVERITY_ORDER: readonly Severity[] = ['stop', 'blocks_sealing', 'hold', 'note', 'set_aside'];

/** A draft that may still be changed; sealed ones answer the same to everyone. */
export async function openDraft(
  tx: Tx,
  editions: EditionStore,
  orgId: string,
  editionId: string,
): Promise<EditionRecord> {
  const record = await editions.find(tx, orgId, editionId, true);
  if (!record) throw notFound('Edition', editionId);
  if (record.edition.state === 'sealed') {
    throw new AppError(
      'edition_sealed',
      `Edition ${record.edition.number} is sealed and can't be changed. Upload the file again to make a new edition.`,
    );
  }
  return record;
}

/** Questions about an edition, and the mapping that starts its checks. */
export class EditionService {
  constructor(private readonly parts: EditionParts) {}

  get(actor: Actor, editionId: string): Promise<Edition> {
    return this.read(actor, editionId, ({ edition }) => Promise.resolve(edition));
  }

  rows(actor: Actor, editionId: string, query: { cursor?: string; limit: number; state?: RowState; code?: string }) {
    return this.read(actor, editionId, (_, tx) => this.parts.intake.list(tx, actor.orgId, editionId, query));
  }

  points(actor: Actor, editionId: string): Promise<SitePoints> {
    return this.read(actor, editionId, (_, tx) => this.parts.intake.points(tx, actor.orgId, editionId));
  }

  /** One line a kind of message, the gravest first and then the largest. */
  messages(actor: Actor, editionId: string): Promise<{ groups: MessageGroup[] }> {
    return this.read(actor, editionId, async ({ edition }, tx) => {
      const counts = await this.parts.intake.groups(tx, actor.orgId, editionId);
      const groups = counts.map(({ code, state, rows, tivMinor }): MessageGroup => {
        const rule = ruleOf(code);
        const offered =
          rule?.fix && edition.state !== 'sealed' ? { kind: rule.fix.kind, label: rule.fix.label(rows) } : null;
        return { code, severity: SEVERITY_OF[state], title: rule?.title ?? code, rows, tivMinor, fix: offered };
      });
      groups.sort(
        (a, b) =>
          SEVERITY_ORDER.indexOf(a.severity) - SEVERITY_ORDER.indexOf(b.severity) ||
          b.rows - a.rows ||
          a.code.localeCompare(b.code),
      );
      return { groups };
    });
  }

  /** Sets the mapping and starts the checks anew; whatever an earlier check or fix left is gone. */
  map(actor: Actor, editionId: string, mapping: z.output<typeof Mapping>): Promise<Edition> {
    const { transact, editions, jobs, audit, clock } = this.parts;
    requireCents(mapping.currency);
    return transact(actor, async (tx) => {
      const { edition, style } = await openDraft(tx, editions, actor.orgId, editionId);
      const columns = mappedColumns(edition.columns, mapping.columns);
      const checkNo = await editions.startCheck(tx, actor.orgId, editionId, {
        columns,
        answers: {
          currency: mapping.currency,
          decimal: mapping.decimal,
          scale: mapping.valuesIn === null ? null : mapping.valuesIn === 'thousands' ? 1000 : 1,
          expectedRows: mapping.expectedRows,
          expectedTivMinor: mapping.expectedTivMinor,
        },
        control: { expectedRows: mapping.expectedRows, expectedTivMinor: mapping.expectedTivMinor },
        rows: style.rows,
        at: clock.now(),
      });
      const payload: CheckPayload = { orgId: actor.orgId, editionId, checkNo };
      await jobs.enqueue(tx, CHECK_QUEUE, payload);
      await audit.record(tx, actor, 'portfolio.columns_mapped', `edition:${editionId}`, {
        columns: Object.fromEntries(columns.flatMap(({ name, field }) => (field ? [[field, name]] : []))),
        currency: mapping.currency,
      });
      return (await editions.find(tx, actor.orgId, editionId))!.edition;
    });
  }

  private read<T>(actor: Actor, editionId: string, work: (record: EditionRecord, tx: Tx) => Promise<T>): Promise<T> {
    return this.parts.transact(actor, async (tx) => {
      const record = await this.parts.editions.find(tx, actor.orgId, editionId);
      if (!record) throw notFound('Edition', editionId);
      return work(record, tx);
    });
  }
}

const named = (field: SiteField) => field.replaceAll('_', ' ');

/** The columns with their fields; every fault of the mapping is told at once. */
function mappedColumns(columns: readonly Column[], mapping: readonly { index: number; field: SiteField }[]): Column[] {
  const faults: { path: string; message: string; code?: string }[] = [];
  const byField = new Map<SiteField, Column>();
  const byColumn = new Map<number, SiteField>();
  mapping.forEach(({ index, field }, position) => {
    const column = columns[index];
    const path = `body.columns.${position}`;
    if (!column) {
      faults.push({ path, message: `The file has ${columns.length} columns; there is no column ${index + 1}.` });
      return;
    }
    if (byColumn.has(index))
      faults.push({ path, message: `'${column.name}' is mapped twice. Choose one field for it.` });
    const other = byField.get(field);
    if (other) {
      const message = `Two columns are mapped to ${named(field)}: '${other.name}' and '${column.name}'. Choose one.`;
      faults.push({ path, message, code: 'FILE-04' });
    }
    byField.set(field, column);
    byColumn.set(index, field);
  });
  if (faults.length > 0) throw new AppError('invalid_request', faults[0]!.message, { faults });
  return columns.map((column) => ({ ...column, field: byColumn.get(column.index) ?? null }));
}
