import type { SiteField } from '#contract/portfolios.ts';
import { readAmount, readDecimal, shareOf, type DecimalSign } from './numbers.ts';
import { deductibleKindNamed } from './words.ts';

type Received = Partial<Record<SiteField, string>>;
interface NumberStyle {
  decimal: DecimalSign;
  scale: number;
}

/** Below this a bare number may as well be a percentage. */
const SURELY_MONEY = 100;

export type Deductible =
  | { kind: 'none' }
  | { kind: 'applied'; minor: number }
  /** Not applied, and why: no unit, a percentage of something we don't hold, or not a number. */
  | { kind: 'no unit' | 'no basis' | 'unreadable' };

/** The deductible a row asks for, in minor units where it is an amount or a percentage of the site's own value. */
export function readDeductible(received: Received, tivMinor: number, facts: NumberStyle): Deductible {
  const value = received.deductible_value?.trim() ?? '';
  const kindText = received.deductible_kind?.trim() ?? '';
  const kind = kindText === '' ? null : deductibleKindNamed(kindText);
  if (kind === 'none' || /^(?:|-|0+(?:[.,]0+)?\s*%?|n\/?a|none|nil)$/i.test(value)) return { kind: 'none' };
  const signed = /%\s*$/.test(value);
  const number = signed ? readDecimal(value.replace(/\s*%\s*$/, ''), facts.decimal) : null;
  if (signed && (number === null || number < 0 || number > 100)) return { kind: 'unreadable' };
  if (kind === 'percent of policy value' || kind === 'percent of limit') return { kind: 'no basis' };
  if (kind === 'percent of site value') {
    if (number !== null) return { kind: 'applied', minor: shareOf(tivMinor, number) };
    const bare = readDecimal(value, facts.decimal);
    if (bare === null || bare < 0 || bare > 100) return { kind: 'unreadable' };
    // 0.02 may be 2 % as a fraction or two hundredths of a percent.
    return bare <= 1 ? { kind: 'no unit' } : { kind: 'applied', minor: shareOf(tivMinor, bare) };
  }
  if (number !== null || kind === 'percent') return { kind: 'no basis' };
  const amount = readAmount(value, facts.decimal);
  if (amount.kind !== 'amount') return { kind: 'unreadable' };
  if (kind === null && amount.minor < SURELY_MONEY * 100) return { kind: 'no unit' };
  return { kind: 'applied', minor: amount.minor * facts.scale };
}

/** The site's limit in minor units; null when none is given or it can't be read. */
export function readLimit(received: Received, facts: NumberStyle): { minor: number | null; readable: boolean } {
  const amount = readAmount(received.site_limit, facts.decimal);
  if (amount.kind === 'blank') return { minor: null, readable: true };
  if (amount.kind !== 'amount') return { minor: null, readable: false };
  return { minor: amount.minor === 0 ? null : amount.minor * facts.scale, readable: true };
}
