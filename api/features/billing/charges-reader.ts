import type { Charge } from '#contract/billing.ts';
import { toInstant, toMinor, toMinorOrNull } from '../../db/mapping.ts';
import type { Tx } from '../../transact.ts';

type ChargeRow = {
  id: string;
  number: string;
  portfolio_name: string;
  accepted_at: Date;
  accepted_by: string;
  cost_centre: string;
  quoted_minor: string;
  charged_minor: string | null;
  currency: string;
};

/** What each run was quoted, charged and given back, across runs, editions and people. */
export class ChargesReader {
  /** Newest first; `only` narrows to the runs one person accepted, `before` continues after the last one seen. */
  async charges(
    tx: Tx,
    orgId: string,
    page: { only: string | null; before: { at: string; id: string } | null; limit: number },
  ): Promise<Charge[]> {
    const rows = await tx('runs')
      .join('editions', 'editions.id', 'runs.edition_id')
      .join('portfolios', 'portfolios.id', 'editions.portfolio_id')
      .join('users', 'users.id', 'runs.accepted_by')
      .where('runs.org_id', orgId)
      .modify((query) => {
        if (page.only !== null) void query.where('runs.accepted_by', page.only);
        if (page.before !== null) {
          void query.whereRaw('(runs.accepted_at, runs.id) < (?::timestamptz, ?::uuid)', [
            page.before.at,
            page.before.id,
          ]);
        }
      })
      .orderBy([
        { column: 'runs.accepted_at', order: 'desc' },
        { column: 'runs.id', order: 'desc' },
      ])
      .limit(page.limit)
      .select<ChargeRow[]>(
        'runs.id',
        'runs.number',
        'portfolios.name as portfolio_name',
        'runs.accepted_at',
        'users.name as accepted_by',
        'runs.cost_centre',
        'runs.quoted_minor',
        'runs.charged_minor',
        'runs.currency',
      );
    return rows.map((row) => {
      const quotedMinor = toMinor(row.quoted_minor);
      const chargedMinor = toMinorOrNull(row.charged_minor);
      return {
        runId: row.id,
        runNumber: row.number,
        portfolioName: row.portfolio_name,
        acceptedAt: toInstant(row.accepted_at),
        acceptedBy: row.accepted_by,
        costCentre: row.cost_centre,
        quotedMinor,
        chargedMinor,
        releasedMinor: chargedMinor === null ? null : quotedMinor - chargedMinor,
        currency: row.currency,
        state:
          chargedMinor === null
            ? ('reserved' as const)
            : chargedMinor === 0
              ? ('released' as const)
              : ('charged' as const),
      };
    });
  }
}
