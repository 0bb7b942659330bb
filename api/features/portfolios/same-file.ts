import type { IntakeMessage } from '#contract/portfolios.ts';
import type { Tx } from '../../transact.ts';
import type { EditionStore } from './edition-store.ts';

const day = (date: Date) =>
  date.toLocaleDateString('en-GB', { day: 'numeric', month: 'long', year: 'numeric', timeZone: 'UTC' });

/** FILE-10: these very bytes already make a sealed edition of the portfolio. */
export async function sameFileMessage(
  tx: Tx,
  editions: EditionStore,
  orgId: string,
  portfolioId: string,
  fileDigest: string,
): Promise<IntakeMessage | null> {
  const same = await editions.sealedFrom(tx, orgId, portfolioId, fileDigest);
  if (!same) return null;
  return {
    code: 'FILE-10',
    severity: 'note',
    field: null,
    received: null,
    text: `This is the same file as edition ${same.number} (uploaded on ${day(same.uploadedAt)}). There is nothing new to seal unless you map or fix it differently.`,
  };
}
