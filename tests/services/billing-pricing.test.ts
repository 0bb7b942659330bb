import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { priceRun, settleRun } from '../../api/features/billing/pricing.ts';
import type { Tariff } from '../../api/ports/billing-desk.ts';

const TARIFF: Tariff = {
  version: 1,
  unitPrice: '0.004000',
  minimumMinor: 500,
  taxLabel: 'Tax 7 %',
  taxRate: '0.070000',
  currency: 'USD',
  quoteHours: 24,
};
const UNTAXED = { ...TARIFF, taxRate: '0' };

describe('the worked examples of the charging rules', () => {
  it('asks the minimum for 12 sites and one track', () =>
    expect(priceRun(UNTAXED, 12)).toEqual({
      units: 12,
      minimumApplied: true,
      netMinor: 500,
      taxMinor: 0,
      grossMinor: 500,
    }));
  it('asks 22.08 for 1,840 sites and three tracks, and 1.55 tax on it', () =>
    expect(priceRun(TARIFF, 1_840 * 3)).toEqual({
      units: 5_520,
      minimumApplied: false,
      netMinor: 2_208,
      taxMinor: 155,
      grossMinor: 2_363,
    }));
  it('asks 1,440.00 for 50,000 sites and 20 tracks of which 640,000 units are out of reach', () =>
    expect(priceRun(UNTAXED, 1_000_000 - 640_000).netMinor).toBe(144_000));
  it('charges 14.72 of 22.08 when one of three tracks fails on our side', () => {
    const charge = settleRun(UNTAXED, 5_520, { units: 3_680, tracksCompleted: 2, tracksFailed: 1 });
    expect(charge.grossMinor).toBe(1_472);
    expect(priceRun(UNTAXED, 5_520).grossMinor - charge.grossMinor).toBe(736);
  });
});

describe('rounding', () => {
  it.each([
    // Net in hundredths of a cent: 0.5 cent goes up, below goes down.
    ['0.005', 100, 50],
    ['0.00005', 100, 1],
    ['0.000049', 100, 0],
    ['0.000150', 100, 2],
    ['1.005', 1, 101],
  ])('goes half-up to the cent: %s × %i is %i', (unitPrice, units, net) =>
    expect(priceRun({ ...UNTAXED, unitPrice, minimumMinor: 0 }, units).netMinor).toBe(net),
  );
  it('rounds tax half-up on the rounded net', () =>
    // 0.50 × 0.07 = 0.035 → 0.04; in doubles 50 × 0.07 is 3.5000000000000004, and 0.15 × 0.1 would fall short.
    expect([50, 150].map((net) => priceRun({ ...TARIFF, unitPrice: '0.01', minimumMinor: 0 }, net).taxMinor)).toEqual([
      4, 11,
    ]));
  it('agrees with long division in whole numbers for any price', () =>
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 5_000_000 }), fc.integer({ min: 0, max: 999_999 }), (units, millionths) => {
        const unitPrice = `0.${String(millionths).padStart(6, '0')}`;
        const net = priceRun({ ...UNTAXED, unitPrice, minimumMinor: 0 }, units).netMinor;
        // units × millionths is the price in millionths of a unit; a cent is 10,000 of them.
        const left = BigInt(units) * BigInt(millionths) - BigInt(net) * 10_000n;
        expect(left >= -5_000n && left < 5_000n).toBe(true);
      }),
      { numRuns: 300, seed: 20261201 },
    ));
});

describe('settlement', () => {
  it('is free when nothing completed, for cancelled and for failed runs alike', () => {
    expect(settleRun(TARIFF, 5_520, { units: 1_840, tracksCompleted: 0, tracksFailed: 0 }).grossMinor).toBe(0);
    expect(settleRun(TARIFF, 5_520, { units: 1_840, tracksCompleted: 0, tracksFailed: 3 }).grossMinor).toBe(0);
  });
  it('is free when every site is out of reach', () =>
    expect(settleRun(TARIFF, 0, { units: 0, tracksCompleted: 3, tracksFailed: 0 }).grossMinor).toBe(0));
  it('asks the minimum of a cancelled run with a completed track', () =>
    expect(settleRun(UNTAXED, 5_520, { units: 12, tracksCompleted: 1, tracksFailed: 0 })).toMatchObject({
      minimumApplied: true,
      netMinor: 500,
    }));
  it('waives the minimum after a failure of ours', () =>
    expect(settleRun(UNTAXED, 36, { units: 12, tracksCompleted: 1, tracksFailed: 1 })).toMatchObject({
      minimumApplied: false,
      netMinor: 5,
    }));
  it('never exceeds the quote', () =>
    fc.assert(
      fc.property(
        fc.nat(2_000_000),
        fc.nat(2_000_000),
        fc.nat(5),
        fc.nat(5),
        (quoted, units, tracksCompleted, tracksFailed) => {
          const charge = settleRun(TARIFF, quoted, { units, tracksCompleted, tracksFailed });
          expect(charge.grossMinor).toBeLessThanOrEqual(priceRun(TARIFF, quoted).grossMinor);
          expect(charge.netMinor + charge.taxMinor).toBe(charge.grossMinor);
        },
      ),
      { numRuns: 300, seed: 20261201 },
    ));
});

it('refuses a count that is not one', () => {
  expect(() => priceRun(TARIFF, -1)).toThrow('count');
  expect(() => priceRun(TARIFF, 0.5)).toThrow('count');
});
