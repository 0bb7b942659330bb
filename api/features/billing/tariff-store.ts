import { toMinor } from '../../db/mapping.ts';
import type { Tariff } from '../../ports/billing-desk.ts';
import type { Tx } from '../../transact.ts';

type TariffRow = {
  version: number;
  unit_price: string;
  minimum_minor: string;
  tax_label: string;
  tax_rate: string;
  currency: string;
  quote_hours: number;
};

const toTariff = (row: TariffRow): Tariff => ({
  version: row.version,
  unitPrice: row.unit_price,
  minimumMinor: toMinor(row.minimum_minor),
  taxLabel: row.tax_label,
  taxRate: row.tax_rate,
  currency: row.currency,
  quoteHours: row.quote_hours,
});

/** Price lists; the same for every organisation. */
export class TariffStore {
  /** The latest version that has come into force. */
  async inForce(tx: Tx, at: Date): Promise<Tariff | null> {
    const row = await tx<TariffRow & { in_force_from: Date }>('tariffs')
      .where('in_force_from', '<=', at)
      .orderBy([
        { column: 'in_force_from', order: 'desc' },
        { column: 'version', order: 'desc' },
      ])
      .first();
    return row ? toTariff(row) : null;
  }

  async find(tx: Tx, version: number): Promise<Tariff | null> {
    const row = await tx<TariffRow>('tariffs').where({ version }).first();
    return row ? toTariff(row) : null;
  }
}
