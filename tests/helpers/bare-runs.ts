import { randomUUID } from 'node:crypto';
import type { TestDatabase } from './database.ts';
import type { TestOrganisation, TestPerson } from './people.ts';

export type BareRun = { id: string; number: string };

let made = 0;

/**
 * A run as far as money knows it: its row and, when a portfolio is named, its edition; no sites, tracks or quote.
 * Written past the foreign keys, so that billing can be tested before and without everything a run rests on.
 */
export const addBareRun = async (
  { superUser }: TestDatabase,
  org: Pick<TestOrganisation, 'id'>,
  by: Pick<TestPerson, 'id'>,
  given: { quotedMinor?: number; chargedMinor?: number | null; acceptedAt?: Date; portfolioName?: string } = {},
): Promise<BareRun> => {
  made += 1;
  const [id, editionId, portfolioId] = [randomUUID(), randomUUID(), randomUUID()];
  const number = `R-${String(made).padStart(4, '0')}`;
  const at = given.acceptedAt ?? new Date('2026-12-01T09:00:00Z');
  await superUser.transaction(async (tx) => {
    await tx.raw(`set local session_replication_role = 'replica'`);
    if (given.portfolioName !== undefined) {
      await tx('portfolios').insert({
        id: portfolioId,
        org_id: org.id,
        name: given.portfolioName,
        currency: 'USD',
        created_by: by.id,
        created_at: at,
      });
      await tx('editions').insert({
        id: editionId,
        org_id: org.id,
        portfolio_id: portfolioId,
        number: 1,
        state: 'checked',
        header_digest: '',
        currency: 'USD',
        file_id: randomUUID(),
        style: '{}',
        columns: '[]',
        created_at: at,
        updated_at: at,
      });
    }
    await tx('runs').insert({
      id,
      org_id: org.id,
      number,
      quote_id: randomUUID(),
      edition_id: editionId,
      calibration_id: randomUUID(),
      curve_set_id: randomUUID(),
      options: '{}',
      purpose: 'exploratory',
      stamped: false,
      state: 'waiting',
      engine_version: 'test',
      inputs_digest: 'test',
      quoted_minor: given.quotedMinor ?? 2363,
      charged_minor: given.chargedMinor ?? null,
      currency: 'USD',
      accepted_by: by.id,
      accepted_at: at,
    });
  });
  return { id, number };
};
