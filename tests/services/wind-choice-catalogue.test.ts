import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { Anchor, Intensity, Regime } from '#contract/scenarios.ts';
import { CHAIN_CHOICES, WIND_CHOICES } from '#contract/wind-choice-catalogue.ts';
import { WindChoices } from '#contract/wind-choices.ts';
import { DEFAULT_OPTIONS, DEFAULT_WIND_OPTIONS } from '#engine/track/options.ts';

const valuesOf = (choices: readonly { key: string; values: readonly { value: string }[] }[]) =>
  Object.fromEntries(choices.map(({ key, values }) => [key, values.map(({ value }) => value)]));

describe('the catalogue of wind choices', () => {
  it('says something about every choice and every value the contract takes, in the contract’s order', () => {
    const taken = Object.fromEntries(
      Object.entries(WindChoices.shape).map(([key, choice]) => [key, choice.unwrap().options]),
    );
    expect(valuesOf(WIND_CHOICES)).toEqual(taken);
    expect(WIND_CHOICES.map(({ key }) => key)).toEqual(Object.keys(WindChoices.shape));
  });

  it('names the default first, and it is the engine’s', () => {
    const first = Object.fromEntries(WIND_CHOICES.map(({ key, values }) => [key, values[0]!.value]));
    expect(first).toEqual(DEFAULT_WIND_OPTIONS);
    expect(WindChoices.parse({})).toEqual(DEFAULT_WIND_OPTIONS);
  });

  it('covers what the chain lets a person set beside them', () => {
    expect(valuesOf(CHAIN_CHOICES)).toEqual({
      intensity: Intensity.options,
      anchor: Anchor.options,
      mesovortices: ['on', 'off'],
      regime: Regime.options,
    });
    const [intensity, anchor, mesovortices, regime] = CHAIN_CHOICES.map(({ values }) => values[0]!.value);
    expect({ intensity, anchor, regime, mesovortices: mesovortices === 'on' }).toEqual({
      intensity: DEFAULT_OPTIONS.intensity,
      anchor: DEFAULT_OPTIONS.anchor,
      mesovortices: DEFAULT_OPTIONS.mesovortices,
      regime: DEFAULT_OPTIONS.regime,
    });
  });

  it('is what the README lists', () => {
    const readme = readFileSync(new URL('../../README.md', import.meta.url), 'utf8');
    const lines = readme.split('\n').map((line) => line.replace(/\s+/g, ' ').trim());
    for (const { key, title, values } of [
      ...WIND_CHOICES,
      ...CHAIN_CHOICES.filter(({ key: of }) => of !== 'mesovortices'),
    ]) {
      expect(lines).toContain(`| \`${key}\` | ${title} | ${values.map(({ value }) => `\`${value}\``).join(', ')} |`);
    }
  });

  it('gives each a title of its own, a meaning and a reason in sentences, and a source for each value', () => {
    const choices = [...WIND_CHOICES, ...CHAIN_CHOICES];
    expect(new Set(choices.map(({ title }) => title)).size).toBe(choices.length);
    for (const { meaning, reason, values } of choices) {
      expect(meaning).toMatch(/^[A-Z].*\.$/);
      expect(reason).toMatch(/\.$/);
      expect(new Set(values.map(({ title }) => title)).size).toBe(values.length);
      for (const { title, source } of values) expect([title, source].every((words) => words.length > 1)).toBe(true);
    }
  });
});
