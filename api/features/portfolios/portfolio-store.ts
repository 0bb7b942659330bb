import type { Portfolio, Reconciliation } from '#contract/portfolios.ts';
import { pageFrom, decodeNameCursor, encodeCursor } from '../../db/cursor.ts';
import { toInstant } from '../../db/mapping.ts';
import { AppError } from '../../errors.ts';
import type { Tx } from '../../transact.ts';
import type { Summary } from './edition-store.ts';

interface PortfolioRow {
  id: string;
  name: string;
  currency: string;
  created_at: Date;
}

interface SummaryRow {
  id: string;
  portfolio_id: string;
  number: number;
  state: Summary['state'];
  as_at: string | null;
  reconciliation: Reconciliation | null;
  updated_at: Date;
}

const toSummary = (row: SummaryRow): Summary => ({
  id: row.id,
  number: row.number,
  state: row.state,
  asAt: row.as_at,
  reconciliation: row.reconciliation,
  updatedAt: toInstant(row.updated_at),
});

const toPortfolio = (row: PortfolioRow, editions: Summary[]): Portfolio => ({
  id: row.id,
  name: row.name,
  currency: row.currency,
  createdAt: toInstant(row.created_at),
  current: editions.find(({ state }) => state === 'sealed') ?? null,
  draft: editions.find(({ state }) => state !== 'sealed') ?? null,
  editions,
});

const NAME_TAKEN = '23505';

/** Portfolios with the heads of their editions, newest first. */
export class PortfolioStore {
  async insert(
    tx: Tx,
    orgId: string,
    portfolio: { id: string; name: string; currency: string; by: string; at: Date },
  ): Promise<void> {
    try {
      await tx('portfolios').insert({
        id: portfolio.id,
        org_id: orgId,
        name: portfolio.name,
        currency: portfolio.currency,
        created_by: portfolio.by,
        created_at: portfolio.at,
      });
    } catch (error) {
      if ((error as { code?: string }).code !== NAME_TAKEN) throw error;
      throw new AppError(
        'conflict',
        `There is a portfolio called “${portfolio.name}” already. Upload to that one, or choose another name.`,
        {
          cause: error,
          faults: [{ path: 'body.name', message: 'This name is taken.' }],
        },
      );
    }
  }

  async find(tx: Tx, orgId: string, portfolioId: string, lock = false): Promise<Portfolio | null> {
    const query = tx('portfolios').where({ org_id: orgId, id: portfolioId });
    const row = await (lock ? query.forUpdate() : query).first<PortfolioRow | undefined>();
    if (!row) return null;
    const editions = await this.editionsOf(tx, orgId, [portfolioId]);
    return toPortfolio(row, editions.get(portfolioId) ?? []);
  }

  async list(tx: Tx, orgId: string, { cursor, limit }: { cursor?: string | undefined; limit: number }) {
    const query = tx('portfolios')
      .where({ org_id: orgId })
      .orderBy([{ column: 'portfolios.name' }, { column: 'portfolios.id' }])
      .limit(limit + 1);
    const after = decodeNameCursor(cursor);
    if (after) void query.whereRaw('(portfolios.name, portfolios.id) > (?, ?::uuid)', [after.name, after.id]);
    const page = pageFrom(await query.select<PortfolioRow[]>(), limit, (row) => encodeCursor(row.name, row.id));
    const editions = await this.editionsOf(
      tx,
      orgId,
      page.items.map(({ id }) => id),
    );
    return {
      items: page.items.map((row) => toPortfolio(row, editions.get(row.id) ?? [])),
      nextCursor: page.nextCursor,
    };
  }

  private async editionsOf(tx: Tx, orgId: string, portfolioIds: string[]): Promise<Map<string, Summary[]>> {
    const rows = await tx('editions')
      .where({ org_id: orgId })
      .whereIn('portfolio_id', portfolioIds)
      .orderBy('number', 'desc')
      .select<SummaryRow[]>(
        'id',
        'portfolio_id',
        'number',
        'state',
        'reconciliation',
        'updated_at',
        tx.raw(`to_char(as_at, 'YYYY-MM-DD') as as_at`),
      );
    const byPortfolio = new Map<string, Summary[]>();
    for (const row of rows)
      byPortfolio.set(row.portfolio_id, [...(byPortfolio.get(row.portfolio_id) ?? []), toSummary(row)]);
    return byPortfolio;
  }
}
