import { describe, expect, it } from 'vitest';
import { moneyRange } from '../../web/lib/money.ts';
import { range } from '../../web/lib/numbers.ts';
import { countAxis } from '../../web/ui/charts/axis.ts';

describe('a range in words', () => {
  it('never becomes one number while its ends differ', () => {
    expect(moneyRange(1_540_012, 1_540_987, 'USD')).toBe('USD 15.40–15.41 thousand');
    expect(moneyRange(120_000, 120_040, 'USD')).toBe('USD 1,200.0–1,200.4');
  });
  it('says “to” where a dash would stand beside a minus', () => {
    expect(range('−3', '4')).toBe('−3 to 4');
    expect(range('3', '4')).toBe('3–4');
  });
});

describe('an axis of counts', () => {
  it.each([0, 1, 2, 3, 7, 8, 10, 23, 403])('has only whole numbers, and room for %d', (most) => {
    const { ticks, high } = countAxis(most, 3);
    expect(ticks.every(Number.isInteger)).toBe(true);
    expect(high).toBeGreaterThanOrEqual(most);
    expect(ticks.length).toBeLessThanOrEqual(6);
  });
});
