import { expect, it, describe } from 'vitest';
import { day, elapsed, longDay, utc } from '../../web/lib/dates.ts';
import { gustRangeText, gustText } from '../../web/lib/gusts.ts';
import { exactMoney, millionsRange, minorPerUnit, moneyRange, shortMoney } from '../../web/lib/money.ts';
import { bytes, count, decimal, percent } from '../../web/lib/numbers.ts';
import { fromMetresPerSecond, toMetresPerSecond, WIND_UNITS } from '../../web/lib/wind-units.ts';

describe('gusts', () => {
  // The mile (1,609.344 m) and the nautical mile (1,852 m) are exact by definition.
  it('are written with one decimal in each of the four units', () => {
    expect(WIND_UNITS.map((unit) => gustText(50, unit))).toEqual(['50.0', '111.8', '180.0', '97.2']);
  });
  it('come back unchanged from every unit', () => {
    for (const unit of WIND_UNITS)
      expect(toMetresPerSecond(fromMetresPerSecond(57.7, unit), unit)).toBeCloseTo(57.7, 12);
  });
  it('read as one value when both ends round alike', () => {
    expect(gustRangeText(58.31, 60.4, 'ms')).toBe('58.3–60.4');
    expect(gustRangeText(58.31, 58.34, 'ms')).toBe('58.3');
    expect(gustRangeText(58.3, 60.4, 'mph')).toBe('130.4–135.1');
  });
});

describe('money', () => {
  it('is exact to the cent where it is a price', () => {
    expect(exactMoney(2363, 'USD')).toBe('USD 23.63');
    expect(exactMoney(481260431000, 'USD')).toBe('USD 4,812,604,310.00');
    expect(exactMoney(-11763, 'EUR')).toBe('EUR −117.63');
  });
  it('knows currencies without minor units', () => {
    expect(minorPerUnit('JPY')).toBe(1);
    expect(exactMoney(125000, 'JPY')).toBe('JPY 125,000');
  });
  it('has three figures in ranges, both ends on one scale', () => {
    expect(moneyRange(186e8, 412e8, 'USD')).toBe('USD 186–412 million');
    expect(moneyRange(4.1e8, 12.6e8, 'USD')).toBe('USD 4.1–12.6 million');
    expect(moneyRange(950e8, 1210e8, 'USD')).toBe('USD 0.95–1.21 billion');
    expect(moneyRange(51_240_00, 66_180_00, 'USD')).toBe('USD 51.2–66.2 thousand');
    expect(moneyRange(1_200_00, 4_321_00, 'USD')).toBe('USD 1,200–4,321');
  });
  it('keeps two figures at a low end far below the high one', () => {
    expect(millionsRange(0.41e8, 12.6e8, 'USD')).toBe('0.41–12.60');
    expect(millionsRange(0, 12.6e8, 'USD')).toBe('0.0–12.6');
  });
  it('is short in sentences', () => {
    expect(shortMoney(10830431000, 'USD')).toBe('USD 108 million');
    expect(shortMoney(4120000000, 'USD')).toBe('USD 41.2 million');
    expect(shortMoney(0, 'USD')).toBe('USD 0');
  });
});

describe('numbers', () => {
  it('have comma thousands and a true minus', () => {
    expect(count(1987)).toBe('1,987');
    expect(decimal(-50.9414, 4)).toBe('−50.9414');
    expect(decimal(-0.004, 2)).toBe('0.00');
  });
  it('write percentages with one decimal and a space that doesn’t break', () => {
    expect(percent(0.8233)).toBe('82.3\u00a0%');
  });
  it('write file sizes', () => {
    expect(bytes(62_400_000)).toBe('62.4 MB');
    expect(bytes(1)).toBe('1 byte');
  });
});

describe('dates', () => {
  it('are in UTC and say so', () => {
    expect(utc('2026-09-04T18:00:00.000Z')).toBe('4 Sep 2026 18:00 UTC');
    expect(day('2026-12-31T23:59:59.000Z')).toBe('31 Dec 2026');
    expect(longDay('2026-12-18T09:00:00.000Z')).toBe('Friday 18 December 2026');
  });
  it('give ages in the largest fitting unit', () => {
    expect(elapsed(0, 45_000)).toBe('45 s');
    expect(elapsed(0, 8 * 3_600_000)).toBe('8 h');
    expect(elapsed(0, 3 * 86_400_000)).toBe('3 days');
  });
});
