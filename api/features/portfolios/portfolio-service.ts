import type { z } from 'zod';
import type { NewPortfolio, Portfolio } from '#contract/portfolios.ts';
import type { Actor } from '../../actor.ts';
import { notFound } from '../../errors.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Ids } from '../../ports/ids.ts';
import type { Transact } from '../../transact.ts';
import type { AuditTrail } from './audit-trail.ts';
import { requireCents } from './currencies.ts';
import type { PortfolioStore } from './portfolio-store.ts';

export interface PortfolioParts {
  transact: Transact;
  portfolios: PortfolioStore;
  audit: AuditTrail;
  clock: Clock;
  ids: Ids;
}

/** Portfolios: the account or book that editions belong to. */
export class PortfolioService {
  constructor(private readonly parts: PortfolioParts) {}

  list(actor: Actor, page: { cursor?: string | undefined; limit: number }) {
    return this.parts.transact(actor, (tx) => this.parts.portfolios.list(tx, actor.orgId, page));
  }

  async get(actor: Actor, portfolioId: string): Promise<Portfolio> {
    const { transact, portfolios } = this.parts;
    const portfolio = await transact(actor, (tx) => portfolios.find(tx, actor.orgId, portfolioId));
    if (!portfolio) throw notFound('Portfolio', portfolioId);
    return portfolio;
  }

  create(actor: Actor, { name, currency }: z.output<typeof NewPortfolio>): Promise<Portfolio> {
    const { transact, portfolios, audit, clock, ids } = this.parts;
    requireCents(currency);
    return transact(actor, async (tx) => {
      const id = ids.next();
      await portfolios.insert(tx, actor.orgId, { id, name, currency, by: actor.userId, at: clock.now() });
      await audit.record(tx, actor, 'portfolio.created', `portfolio:${id}`, { name, currency });
      return (await portfolios.find(tx, actor.orgId, id))!;
    });
  }
}
