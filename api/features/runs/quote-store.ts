import type { Quote, QuoteRequest } from '#contract/runs.ts';
import { toInstant, toMinor } from '../../db/mapping.ts';
import type { Tx } from '../../transact.ts';

/** What a quote says once and for all; state, free balance and identical run are looked up when it is read. */
export type QuoteLines = Omit<
  Quote,
  'id' | 'number' | 'request' | 'createdAt' | 'validUntil' | 'state' | 'identicalRunId' | 'freeBalanceMinor'
> & { calibration: { state: string; signedBy: string | null }; stamped: boolean };

export interface StoredQuote {
  id: string;
  number: string;
  request: QuoteRequest;
  lines: QuoteLines;
  grossMinor: number;
  currency: string;
  tariffVersion: number;
  inputsDigest: string;
  engineVersion: string;
  createdAt: string;
  validUntil: string;
  isAccepted: boolean;
}

export type NewQuote = Omit<StoredQuote, 'number' | 'isAccepted' | 'createdAt' | 'validUntil'> & {
  createdBy: string;
  createdAt: Date;
  validUntil: Date;
};

interface QuoteRow {
  id: string;
  number: string;
  request: QuoteRequest;
  lines: QuoteLines;
  gross_minor: string;
  currency: string;
  tariff_version: number;
  inputs_digest: string;
  engine_version: string;
  created_at: Date;
  valid_until: Date;
  is_accepted: boolean;
}

const toQuote = (row: QuoteRow): StoredQuote => ({
  id: row.id,
  number: row.number,
  request: row.request,
  lines: row.lines,
  grossMinor: toMinor(row.gross_minor),
  currency: row.currency,
  tariffVersion: row.tariff_version,
  inputsDigest: row.inputs_digest,
  engineVersion: row.engine_version,
  createdAt: toInstant(row.created_at),
  validUntil: toInstant(row.valid_until),
  isAccepted: row.is_accepted,
});

const NUMBER_WIDTH = 4;

/** The organisation's next quote or run number; the row stays locked until the transaction ends, so none is skipped. */
export const nextNumber = async (tx: Tx, orgId: string, kind: 'quote' | 'run'): Promise<string> => {
  const column = kind === 'quote' ? 'last_quote' : 'last_run';
  const [row] = await tx('run_numbers')
    .insert({ org_id: orgId, [column]: 1 })
    .onConflict('org_id')
    .merge({ [column]: tx.raw('?? + 1', [`run_numbers.${column}`]) })
    .returning<Record<string, number>[]>(column);
  return `${kind === 'quote' ? 'Q' : 'R'}-${String(row![column]).padStart(NUMBER_WIDTH, '0')}`;
};

/** Quotes; never changed once written. */
export class QuoteStore {
  async insert(tx: Tx, orgId: string, quote: NewQuote): Promise<void> {
    await tx('quotes').insert({
      id: quote.id,
      org_id: orgId,
      number: await nextNumber(tx, orgId, 'quote'),
      request: JSON.stringify(quote.request),
      edition_id: quote.request.editionId,
      lines: JSON.stringify(quote.lines),
      gross_minor: quote.grossMinor,
      currency: quote.currency,
      tariff_version: quote.tariffVersion,
      inputs_digest: quote.inputsDigest,
      engine_version: quote.engineVersion,
      created_by: quote.createdBy,
      created_at: quote.createdAt,
      valid_until: quote.validUntil,
    });
  }

  async find(tx: Tx, orgId: string, id: string): Promise<StoredQuote | null> {
    const row = await tx('quotes')
      .where({ org_id: orgId, id })
      .first<QuoteRow | undefined>(
        'quotes.*',
        tx.raw('exists (select from runs where runs.quote_id = quotes.id) as is_accepted'),
      );
    return row ? toQuote(row) : null;
  }
}
